package propagate

import (
	"context"
	"math"
	"testing"

	"fluxtoll/potential"
)

// wellSetup is a packet on a well between walls of the given widths and height
// 1.5, mean energy 0.5 near its lowest level.
func wellSetup(left, right, loss float64) setup {
	s := stepSetup()
	s.exit.Height = 0
	s.layers = []potential.Layer{
		{Thickness: left, Shape: potential.Flat{Height: 1.5}, Mass: 1},
		{Thickness: 1.9, Shape: potential.Flat{}, Mass: 1, Loss: loss},
		{Thickness: right, Shape: potential.Flat{Height: 1.5}, Mass: 1},
	}
	s.packet = Packet{Centre: -45, Length: 5, K0: 1}
	s.low, s.high, s.phase, s.origin, s.dt = 0.02, 1.6, 7, 0.5, 0.8
	s.edge = Edge{Count: 14, First: 3, Growth: 1.5, Angle: EdgeAngle}
	s.extent = Extent{Left: -95, PlaneLeft: -95, PlaneRight: 22, Right: 22}
	return s
}

// coupledSetup is two such wells with a wall between them: two resonances, the
// beat of which is seen in the flow.
func coupledSetup() setup {
	s := wellSetup(1.5, 1.5, 0)
	s.layers = append(s.layers[:2:2], potential.Layer{Thickness: 2, Shape: potential.Flat{Height: 1.5}, Mass: 1}, s.layers[1], s.layers[2])
	return s
}

// states finds the resonances near some energies: on a mesh with close planes
// first, where a rough guess will do.
func (s setup) states(t testing.TB, guesses ...complex128) []*Eigenstate {
	t.Helper()
	compact, m := s, s.mesh(t)
	compact.extent.Left, compact.extent.PlaneLeft = -2, -2
	c := compact.mesh(t)
	var out []*Eigenstate
	for _, g := range guesses {
		rough, err := c.Eigenstate(g)
		if err != nil {
			t.Fatal(err)
		}
		u, err := m.Eigenstate(rough.Energy)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, u)
	}
	return out
}

// ended is a run that ends at a time as if it were settled, with or without
// states.
func (s setup) ended(t testing.TB, time float64, states []*Eigenstate) *Run {
	t.Helper()
	stepper := s.stepper(t)
	if len(states) > 0 {
		stepper.Mesh = states[0].mesh
	}
	run := NewRun(stepper, Ending{
		Steps: 1 << 30, Time: math.Inf(1), States: states,
		Settled: func(l *Ledger, _, _ float64) bool { return l.Time >= time },
	})
	if status := run.Finish(context.Background()); status != Settled {
		t.Fatalf("run ended with %v", status)
	}
	return run
}

// cut is a set-up whose run is cut short while its resonances hold much, and
// finished by poles; and the same run taken on until nothing is left.
type cut struct {
	name        string
	setup       setup
	guesses     []complex128
	early, late float64 // ends of the run
}

func cuts() []cut {
	return []cut{
		{"one resonance", wellSetup(1.5, 1.5, 0), []complex128{0.49 - 0.01i}, 420, 3200},
		{"unequal walls", wellSetup(1.8, 1.4, 0), []complex128{0.49 - 0.01i}, 420, 3200},
		{"losses", wellSetup(1.5, 1.6, 0.002), []complex128{0.49 - 0.01i}, 420, 3200},
		{"two resonances", coupledSetup(), []complex128{0.46 - 0.005i, 0.53 - 0.005i}, 420, 3200},
	}
}

// A run that is cut short and finished by poles books what the run that is
// taken to its end does: probabilities, times and dwell. The tail is a good
// part of each.
func TestTailIsTheRestOfTheRun(t *testing.T) {
	for _, c := range cuts() {
		t.Run(c.name, func(t *testing.T) {
			list := c.setup.states(t, c.guesses...)
			short, long := c.setup.ended(t, c.early, list), c.setup.ended(t, c.late, nil)
			tail, got, want := short.Tail(), short.Booked(), long.Ledger()
			if !(tail.Left.Probability+tail.Right.Probability+tail.TotalLost() > 1e-4) {
				t.Fatalf("the tail of %g tests nothing", tail.Left.Probability+tail.Right.Probability)
			}
			// What is beside the states, and interferes with them.
			tol := tail.Rest + tail.Cross + long.Inside() + 1e-12
			if !(tol < 1e-7) {
				t.Fatalf("rest %g, interference %g, %g left in the long run", tail.Rest, tail.Cross, long.Inside())
			}
			near(t, "left", got.Left.Probability, want.Left.Probability, tol)
			near(t, "right", got.Right.Probability, want.Right.Probability, tol)
			near(t, "lost", got.TotalLost(), want.TotalLost(), tol)
			late := tol * c.late
			near(t, "first moment left", got.Left.first, want.Left.first, late)
			near(t, "first moment right", got.Right.first, want.Right.first, late)
			near(t, "second moment right", got.Right.second, want.Right.second, late*c.late)
			near(t, "dwell", got.TotalDwell(), want.TotalDwell(), late)
			near(t, "closure", got.Left.Probability+got.Right.Probability+got.TotalLost()+short.Trapped(), 1, tol)
			if !(tail.Error.Probability < 1e-9) {
				t.Errorf("error of the eigenpairs %g", tail.Error.Probability)
			}
		})
	}
}

// The sums continue those of the steps, however long these are against the
// resonance's beat and decay.
func TestTailContinuesTheSteps(t *testing.T) {
	s := coupledSetup()
	list := s.states(t, 0.46-0.005i, 0.53-0.005i)
	stepper := s.stepper(t)
	for _, dt := range []float64{0.5, 3, 11} {
		stepper.shift(dt, 0.45)
		for i := range stepper.psi.all {
			stepper.psi.all[i] = 0.3*list[0].all[i] + 0.2i*list[1].all[i]
		}
		stepper.ledger = newLedger(stepper.Mesh, stepper.psi)
		stepper.dwell(0)
		p := newSplitter(list[0].mesh, list)
		p.split(stepper.psi)
		tail := p.tail(0, stepper.stepping())
		for range int(6000 / dt) {
			stepper.Advance()
		}
		l := stepper.Ledger()
		// Rounding of a few hundred steps; times up to some hundred.
		near(t, "left", tail.Left.Probability, l.Left.Flux(), 1e-12)
		near(t, "right", tail.Right.Probability, l.Right.Flux(), 1e-12)
		near(t, "first left", tail.Left.first, l.Left.first, 1e-9)
		near(t, "second right", tail.Right.second, l.Right.second, 1e-6)
		near(t, "dwell", tail.TotalDwell(), l.TotalDwell(), 1e-9)
	}
}

// A state that is left out stays in the rest, which does not look settled;
// the same check passes with it.
func TestDroppedStateShows(t *testing.T) {
	s := coupledSetup()
	list := s.states(t, 0.46-0.005i, 0.53-0.005i)
	whole, dropped := s.ended(t, 420, list).Tail(), s.ended(t, 420, list[:1]).Tail()
	if !(whole.Rest < 1e-9) || !(dropped.Rest > 1e-4) {
		t.Errorf("rest %g with both states, %g with one", whole.Rest, dropped.Rest)
	}
	near(t, "rest against what the dropped state held", dropped.Rest/whole.Held[1].Probability, 1, 1e-2)
}

// A bound state stays: it is trapped, and is no part of what is sent.
func TestBoundStateIsTrapped(t *testing.T) {
	s := stepSetup()
	s.exit.Height, s.layers = 0, flatLayer(3, -2, 1)
	list := s.states(t, -1.5)
	stepper := s.stepper(t)
	for i := range stepper.psi.all {
		stepper.psi.all[i] = 0.6 * list[0].all[i]
	}
	p := newSplitter(list[0].mesh, list)
	p.split(stepper.psi)
	tail := p.tail(0, stepper.stepping())
	near(t, "trapped", tail.Trapped(), 0.36, 1e-12)
	near(t, "sent", math.Abs(tail.Left.Probability)+math.Abs(tail.Right.Probability), 0, 0)
	if !tail.Held[0].Bound {
		t.Error("not bound")
	}
}

// Going back to before the end and on again ends at the same numbers.
func TestTailAfterRestore(t *testing.T) {
	s := wellSetup(1.5, 1.5, 0)
	list := s.states(t, 0.49-0.01i)
	stepper := s.stepper(t)
	run := NewRun(stepper, Ending{
		Steps: 1 << 30, Time: math.Inf(1), States: list,
		Settled: func(l *Ledger, _, _ float64) bool { return l.Time >= 280 },
	})
	for range 100 {
		run.Next()
	}
	middle := run.Save()
	run.Finish(context.Background())
	first, end := *run.Booked(), run.Save()
	run.Restore(middle)
	if run.Tail() != nil {
		t.Error("a tail in the middle of a run")
	}
	run.Finish(context.Background())
	if second := *run.Booked(); second.Left != first.Left || second.Right != first.Right {
		t.Errorf("%+v, and again %+v", first.Left, second.Left)
	}
	run.Restore(middle)
	run.Restore(end)
	if third := *run.Booked(); third.Left != first.Left {
		t.Errorf("%+v, and restored %+v", first.Left, third.Left)
	}
}
