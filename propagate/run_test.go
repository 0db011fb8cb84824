package propagate

import (
	"context"
	"fmt"
	"math"
	"testing"
)

func settledBelow(rest float64) func(*Ledger, float64, float64) bool {
	return func(_ *Ledger, remaining, _ float64) bool { return remaining < rest }
}

func TestRunEnds(t *testing.T) {
	cancelled, cancel := context.WithCancel(t.Context())
	cancel()
	for _, c := range []struct {
		name   string
		ctx    context.Context
		ending Ending
		want   Status
		steps  int // 0: whatever it takes
	}{
		{"settled", t.Context(), Ending{Steps: 5000, Time: 5000, Settled: settledBelow(1e-9)}, Settled, 0},
		{"settled at a limit", t.Context(), Ending{Steps: 5, Time: 5000, Settled: settledBelow(2)}, Settled, 4},
		{"settled at the last step", t.Context(), Ending{Steps: 3, Time: 5000, Settled: settledBelow(2)}, Settled, 3},
		{"steps", t.Context(), Ending{Steps: 7, Time: 5000, Settled: settledBelow(0)}, StepLimit, 7},
		{"time", t.Context(), Ending{Steps: 5000, Time: 4.9, Settled: settledBelow(0)}, TimeLimit, 10},
		{"nothing settles", t.Context(), Ending{Steps: 6, Time: 5000}, StepLimit, 6},
		{"interrupted", cancelled, Ending{Steps: 5000, Time: 5000, Settled: settledBelow(0)}, Interrupted, -1},
	} {
		t.Run(c.name, func(t *testing.T) {
			watched := 0
			c.ending.Watch = func(*Ledger) { watched++ }
			run := NewRun(barrierSetup().stepper(t), c.ending)
			if got := run.Finish(c.ctx); got != c.want {
				t.Errorf("ended with %v, want %v", got, c.want)
			}
			steps := run.Ledger().Steps
			if c.steps > 0 && steps != c.steps || c.steps < 0 && steps != 0 || c.steps == 0 && steps < 50 {
				t.Errorf("ended after %d steps, want %d", steps, c.steps)
			}
			if watched != steps {
				t.Errorf("%d steps, watched %d", steps, watched)
			}
		})
	}
}

func TestRunIsInterruptedBetweenSteps(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	run := NewRun(barrierSetup().stepper(t), Ending{Steps: 5000, Time: 5000, Settled: settledBelow(0)})
	run.ending.Watch = func(l *Ledger) {
		if l.Steps == 9 {
			cancel()
		}
	}
	if got := run.Finish(ctx); got != Interrupted || run.Ledger().Steps != 9 {
		t.Errorf("%v after %d steps", got, run.Ledger().Steps)
	}
	near(t, "remaining", run.Remaining, run.Inside(), 0)
}

func TestStatusNames(t *testing.T) {
	seen := map[string]bool{}
	for s := Running; s <= Interrupted; s++ {
		if name := s.String(); name == "unknown" || seen[name] {
			t.Errorf("status %d is called %q", s, name)
		} else {
			seen[name] = true
		}
	}
	if Status(99).String() != "unknown" {
		t.Error("status 99 has a name")
	}
}

// leakingSetup holds half of a packet of long life between two barriers.
func leakingSetup() setup {
	s := freeSetup()
	s.layers = append(append(flatLayer(1, 3, 1), flatLayer(4, 0, 1)...), flatLayer(1, 3, 1)...)
	s.packet = Packet{Centre: 3, Length: 0.7, K0: 1.5}
	s.extent = Extent{Left: -20, PlaneLeft: -20, PlaneRight: 26, Right: 26}
	return s
}

// The lifetime is right also where a run ends between two looks: held against
// the fall of what is inside, step by step.
func TestLifetimeBetweenLooks(t *testing.T) {
	for _, steps := range []int{400, 401, 402, 403} {
		run := NewRun(leakingSetup().stepper(t), Ending{Steps: steps, Time: math.Inf(1)})
		before := 0.0
		run.ending.Watch = func(l *Ledger) {
			if l.Steps == steps-1 {
				before = run.Inside()
			}
		}
		if got := run.Finish(t.Context()); got != StepLimit {
			t.Fatalf("ended with %v", got)
		}
		want := run.Step / math.Log(before/run.Inside())
		near(t, "lifetime ratio", run.Lifetime/want, 1, 0.02) // the decay is not one exponential
	}
}

func TestLook(t *testing.T) {
	l := firstLook().next(0.5, 2)
	near(t, "lifetime", l.Lifetime, 2/math.Ln2, 1e-15)
	if again := l.next(0.5, 2); again != l {
		t.Errorf("a second look at the same time: %+v, want %+v", again, l)
	}
	if grown := l.next(0.6, 3); !math.IsInf(grown.Lifetime, 1) {
		t.Errorf("what does not fall has lifetime %g", grown.Lifetime)
	}
}

// A run taken back to an earlier moment, once or often and at odd steps, goes
// on and ends as it would have.
func TestRestoredRunEndsAtTheSameStep(t *testing.T) {
	ending := Ending{Steps: 100000, Time: 1e5,
		Settled: func(_ *Ledger, remaining, lifetime float64) bool { return remaining < 1e-6 && lifetime < 1e4 },
		Slow:    func(_ *Ledger, remaining, _ float64) bool { return remaining < 1e-2 },
	}
	describe := func(r *Run, s Status) string { return fmt.Sprintf("%v %x %+v", s, *r.Ledger(), r.look) }
	start := func() *Run { return NewRun(stepSetup().stepper(t), ending) }
	straight := start()
	want := describe(straight, straight.Finish(t.Context()))

	run := start()
	var states []State
	status := Running
	for status == Running {
		states = append(states, run.Save())
		status = run.Next()
	}
	if got := describe(run, status); got != want || len(states) < 50 {
		t.Fatalf("saving %d times changed the end:\n%s\n%s", len(states), got, want)
	}
	last := len(states) - 1
	for _, i := range []int{last, last - 1, last - 2, last - 3, 0, last / 2, last - 9} {
		run.Restore(states[0])
		for range 2 * checkEvery {
			run.Next()
		}
		run.Restore(states[i])
		if got := describe(run, run.Finish(t.Context())); got != want {
			t.Errorf("restored to state %d, the run ended otherwise:\n%s\n%s", i, got, want)
		}
	}
}
