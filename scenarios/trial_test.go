package scenarios

import (
	"context"
	"errors"
	"math"
	"testing"

	"fluxtoll/potential"
	"fluxtoll/propagate"
)

// natural is a scenario in natural units made without a file: entry height 0
// and mass 1, a packet of wave number 1.
func natural(t testing.TB, exit potential.Lead, tolerance, length float64, layers ...potential.Layer) *Scenario {
	t.Helper()
	structure, err := potential.Build(potential.Lead{Mass: 1}, exit, layers, potential.Options{Cut: tolerance * 5e-4})
	if err != nil {
		t.Fatal(err)
	}
	return &Scenario{
		Tolerance: tolerance, Structure: structure, Scale: Scale{Length: 1, Energy: 1, Time: 1},
		Packet: Packet{Energy: 0.5, K0: 1, Length: length},
	}
}

// take runs both roads.
func take(t testing.TB, s *Scenario, forced Forced) (*Trial, *Result) {
	t.Helper()
	trial, err := Prepare(context.Background(), s, forced)
	if err != nil {
		t.Fatal(err)
	}
	return trial, trial.Finish(context.Background(), nil)
}

// report logs what a person would want to see of a result that is not as it
// should be.
func report(t testing.TB, r *Result) {
	t.Helper()
	t.Logf("%s (%s) %v", r.Verdict, r.Ended, r.Notes)
	if r.Budget != nil {
		t.Logf("budget %+v", *r.Budget)
	}
	for _, q := range r.Quantities {
		if q.Packet != nil && q.Average != nil && q.Budget != nil {
			t.Logf("%-24s %.12g %.12g off %.2g budget %.2g allowed %.2g", q.Name, *q.Average, *q.Packet, *q.Difference, *q.Budget, q.Allowed)
		}
	}
}

func flatLayer(thickness, height, mass float64) potential.Layer {
	return potential.Layer{Thickness: thickness, Mass: mass, Shape: potential.Flat{Height: height}}
}

// TestDemosAgree: every demo agrees at its own tolerance, and at 1e-9.
func TestDemosAgree(t *testing.T) {
	demos := Demos()
	if len(demos) < 9 {
		t.Fatalf("%d demos", len(demos))
	}
	for _, d := range demos {
		for _, tolerance := range []float64{0, 1e-9} {
			f, err := OpenDemo(d.Name)
			if err != nil {
				t.Fatal(err)
			}
			s, err := f.Compile()
			if err != nil {
				t.Fatal(err)
			}
			if tolerance > 0 {
				s.Tolerance = tolerance
			}
			if _, r := take(t, s, Forced{}); r.Verdict != Agrees {
				t.Errorf("%s at %g:", d.Name, s.Tolerance)
				report(t, r)
			}
		}
	}
}

// TestTightTolerance: at 1e-12 (1e-10 on times) the standard structures agree.
func TestTightTolerance(t *testing.T) {
	same := potential.Lead{Mass: 1}
	list := []struct {
		name   string
		exit   potential.Lead
		layers []potential.Layer
	}{
		{"step", potential.Lead{Height: 0.2, Mass: 1}, nil},
		{"barrier", same, []potential.Layer{flatLayer(2, 0.7, 1)}},
		{"well", same, []potential.Layer{flatLayer(3, -0.6, 1)}},
		{"ramp", potential.Lead{Height: 0.15, Mass: 1}, []potential.Layer{{Thickness: 4, Mass: 1, Shape: potential.Ramp{HeightEnd: 0.15}}}},
		{"sech2", same, []potential.Layer{{Mass: 1, Shape: potential.Hump{Height: 0.5, Width: 2}}}},
		{"gauss", same, []potential.Layer{{Mass: 1, Shape: potential.Bell{Height: 0.5, Width: 1.5}}}},
		{"unequal masses", potential.Lead{Height: -0.2, Mass: 1.3}, []potential.Layer{flatLayer(2, 0.3, 0.7), flatLayer(1, 0.6, 1.2)}},
	}
	for _, c := range list {
		s := natural(t, c.exit, 1e-12, 12, c.layers...)
		_, r := take(t, s, Forced{})
		if r.Verdict != Agrees || !(math.Abs(r.Ledger.Closure) < 1e-12) {
			t.Errorf("%s: closure %g", c.name, r.Ledger.Closure)
			report(t, r)
		}
	}
}

// TestDeepTunnelling: a transmitted probability near 1e-12 is right to 1e-4 of
// itself, and so is the time at which it comes.
func TestDeepTunnelling(t *testing.T) {
	s := natural(t, potential.Lead{Mass: 1}, 1e-6, 60, flatLayer(20, 0.75, 1))
	trial, r := take(t, s, Forced{})
	average := trial.Averages.Transmitted.Value
	if !(average > 1e-13 && average < 1e-11) {
		t.Fatalf("transmitted %g: not the case that this test is for", average)
	}
	if off := r.Ledger.Transmitted/average - 1; !(math.Abs(off) < 1e-4) || r.Verdict != Agrees {
		t.Errorf("transmitted off by %g of %g", off, average)
		report(t, r)
	}
}

// TestBrokenSolverIsCaught replaces the packet road's structure, mesh or step
// by one that is slightly wrong: the verdict must turn.
func TestBrokenSolverIsCaught(t *testing.T) {
	barrier := func(height float64) *Scenario {
		return natural(t, potential.Lead{Mass: 1}, 1e-6, 10, flatLayer(2, height, 1))
	}
	if _, r := take(t, barrier(0.7), Forced{}); r.Verdict != Agrees {
		t.Fatal("the sound solver must agree")
	}
	breaks := map[string]func(*Trial){
		"a barrier too high by 1e-5": func(trial *Trial) {
			other, err := Prepare(context.Background(), barrier(0.7*(1+1e-5)), Forced{})
			if err != nil {
				t.Fatal(err)
			}
			trial.Run = other.Run
		},
		"a packet that starts a thousandth of its length too near": func(trial *Trial) {
			packet := trial.Plan.packet()
			packet.Centre += 1e-3 * packet.Length
			restart(t, trial, trial.Plan.Pade, trial.Plan.TimeStep, packet)
		},
		"a step longer than planned by 1e-5": func(trial *Trial) {
			p := trial.Plan
			restart(t, trial, p.Pade, p.TimeStep, p.packet())
			run := trial.Run
			run.Step *= 1 + 1e-5 // the ledger's clock runs fast
		},
	}
	for name, damage := range breaks {
		trial, err := Prepare(context.Background(), barrier(0.7), Forced{})
		if err != nil {
			t.Fatal(err)
		}
		damage(trial)
		if r := trial.Finish(context.Background(), nil); r.Verdict != Disagrees {
			t.Errorf("%s: verdict %q", name, r.Verdict)
			report(t, r)
		}
	}
}

// restart replaces the trial's run.
func restart(t testing.TB, trial *Trial, pade propagate.Pade, dt float64, packet propagate.Packet) {
	t.Helper()
	stepper, err := propagate.NewStepper(trial.Plan.Mesh, pade, dt, trial.Plan.Origin, packet)
	if err != nil {
		t.Fatal(err)
	}
	trial.Run = propagate.NewRun(stepper, trial.ending())
}

// TestForcedMember: every member of the family agrees when it is asked for,
// Crank-Nicolson with a step that is shorter by far.
func TestForcedMember(t *testing.T) {
	s := natural(t, potential.Lead{Height: 0.2, Mass: 1}, 1e-5, 10)
	var before float64
	for member := 1; member <= propagate.MaxPade; member++ {
		trial, r := take(t, s, Forced{Pade: member})
		if r.Verdict != Agrees || trial.Plan.Pade.Member != member {
			t.Errorf("member %d, used %d", member, trial.Plan.Pade.Member)
			report(t, r)
		}
		if trial.Plan.TimeStep < before {
			t.Errorf("member %d takes a step of %g, the one before %g", member, trial.Plan.TimeStep, before)
		}
		before = trial.Plan.TimeStep
	}
	// A forced step that is far too long is honest about it.
	if _, r := take(t, s, Forced{Pade: 1, TimeStep: 5}); r.Verdict != NotReached {
		t.Errorf("Crank-Nicolson with dt = 5: %s", r.Verdict)
		report(t, r)
	}
}

// TestLimitsRefuseBeforehand: a run that is too large is refused with the
// estimate, the limit and the flag; the other columns stand.
func TestLimitsRefuseBeforehand(t *testing.T) {
	s := natural(t, potential.Lead{Height: 0.2, Mass: 1}, 1e-6, 10, flatLayer(2, 0.7, 1))
	for flag, limits := range map[string]Limits{
		"--max-nodes": {Nodes: 100}, "--max-steps": {Steps: 3}, "--max-memory": {Bytes: 1000},
	} {
		trial, r := take(t, s, Forced{Limits: limits})
		var limit *LimitError
		if !errors.As(trial.Refused, &limit) || limit.Flag != flag || !(limit.Estimate > limit.Limit) {
			t.Errorf("%s: refused with %v", flag, trial.Refused)
		}
		if r.Verdict != NotReached || len(r.Quantities) == 0 || r.Quantities[0].Average == nil || r.Quantities[0].Packet != nil {
			t.Errorf("%s: verdict %s, quantities %+v", flag, r.Verdict, r.Quantities)
		}
	}
}

// TestInterruptedKeepsTheLedger: a cancelled run says so and its ledger closes.
func TestInterruptedKeepsTheLedger(t *testing.T) {
	s := natural(t, potential.Lead{Height: 0.2, Mass: 1}, 1e-6, 10)
	trial, err := Prepare(context.Background(), s, Forced{})
	if err != nil {
		t.Fatal(err)
	}
	for range 10 {
		trial.Run.Next()
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	r := trial.Finish(ctx, nil)
	if r.Verdict != Incomplete || !(r.Ledger.Trapped > 0.9) || !(math.Abs(r.Ledger.Closure) < 1e-12) {
		t.Errorf("%s, ledger %+v", r.Verdict, *r.Ledger)
	}
}

// TestFromEitherSide: the mirrored structure with the packet from the other
// side gives the same answer, position for position.
func TestFromEitherSide(t *testing.T) {
	layers := []potential.Layer{flatLayer(2, 0.4, 0.8), {Thickness: 3, Mass: 1.1, Shape: potential.Ramp{Height: 0.3, HeightEnd: -0.1}}}
	s := natural(t, potential.Lead{Height: 0.1, Mass: 1.2}, 1e-8, 9, layers...)
	m := natural(t, potential.Lead{Height: 0.1, Mass: 1.2}, 1e-8, 9, layers...)
	m.Structure, m.Packet.Side = s.Structure.Mirror(), FromRight
	_, left := take(t, s, Forced{})
	_, right := take(t, m, Forced{})
	if left.Verdict != Agrees || right.Verdict != Agrees || len(left.Quantities) != len(right.Quantities) {
		t.Fatalf("%s and %s", left.Verdict, right.Verdict)
	}
	for i, q := range left.Quantities {
		// Equal but for the order of sums.
		if d := *q.Packet - *right.Quantities[i].Packet; !(math.Abs(d) <= 1e-9*(1+math.Abs(*q.Packet))) {
			t.Errorf("%s: %g from the left, %g from the right", q.Name, *q.Packet, *right.Quantities[i].Packet)
		}
	}
	if width := s.Structure.Width(); !(math.Abs(right.Planes.Near-(width-left.Planes.Near)) < 1e-9) {
		t.Errorf("near planes %g and %g of width %g", left.Planes.Near, right.Planes.Near, width)
	}
}
