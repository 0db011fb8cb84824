package scenarios

import (
	"math"
	"math/rand/v2"
	"testing"

	"fluxtoll/potential"
	"fluxtoll/propagate"
)

// levelWell is the width of the well between walls of height 1.5 of which the
// lowest level stands at the packet's energy 0.5 in the limit of thick walls:
// k tan(k w/2) = kappa with k = 1, kappa = sqrt(2) (L. I. Schiff, Quantum
// Mechanics, sec. 9; from memory).
func levelWell() float64 { return 2 * math.Atan(math.Sqrt2) }

// twinBarrier is a packet of length 10, tuned to the level between two walls.
func twinBarrier(t testing.TB, left, right, loss, tolerance float64) *Scenario {
	well := flatLayer(levelWell(), 0, 1)
	well.Loss = loss
	return natural(t, potential.Lead{Mass: 1}, tolerance, 10, flatLayer(left, 1.5, 1), well, flatLayer(right, 1.5, 1))
}

// coupledWells are two equal wells with a wall between them.
func coupledWells(t testing.TB, outer, middle, tolerance float64) *Scenario {
	wall, well := flatLayer(outer, 1.5, 1), flatLayer(levelWell(), 0, 1)
	return natural(t, potential.Lead{Mass: 1}, tolerance, 10, wall, well, flatLayer(middle, 1.5, 1), well, wall)
}

// agreed takes both roads, which are to agree within the budget, to close the
// ledger to 1e-8 and to leave nothing inside, by a tail of as many poles.
func agreed(t *testing.T, s *Scenario, poles int) (*Trial, *Result) {
	t.Helper()
	trial, r := take(t, s, Forced{})
	switch {
	case r.Verdict != Agrees || r.Ledger == nil:
		t.Errorf("verdict %q (%s) %v", r.Verdict, r.Ended, r.Notes)
		report(t, r)
		t.FailNow()
	case !(math.Abs(r.Ledger.Closure) < 1e-8) || !(math.Abs(r.Ledger.Trapped) < 1e-8):
		t.Errorf("closure %g, trapped %g", r.Ledger.Closure, r.Ledger.Trapped)
	case r.Tail == nil || r.Tail.Poles != poles:
		t.Fatalf("tail %+v, want one of %d poles", r.Tail, poles)
	case !(r.Tail.Error <= shareTail*s.Tolerance):
		t.Errorf("the tail's error %g is beyond its share", r.Tail.Error)
	}
	return trial, r
}

// From ten to 10^9 passages of the packet (its length over its speed, 10): the
// run takes the same few hundred steps, and what the resonance sends comes from
// the tail. For the longest the averages know times only to 2e-5, since the
// next number after the resonance's energy is that much of its width away.
func TestLifetimesUpTo1e9Passages(t *testing.T) {
	for _, c := range []struct{ wall, passages, tolerance float64 }{
		{1.7, 10, 1e-6}, {3.35, 1e3, 1e-6}, {5.8, 1e6, 1e-6}, {8.25, 1e9, 1e-4},
	} {
		trial, r := agreed(t, twinBarrier(t, c.wall, c.wall, 0, c.tolerance), 1)
		if p := r.Tail.States[0].Lifetime / 10; !(p > c.passages/2 && p < 2*c.passages) {
			t.Errorf("walls of %g: lifetime of %g passages, want about %g", c.wall, p, c.passages)
		}
		if r.Numerics.Steps > 1000 {
			t.Errorf("walls of %g: %d steps", c.wall, r.Numerics.Steps)
		}
		sent := trial.Averages.Transmitted.Value
		if share := r.Tail.Transmitted / sent; c.passages >= 1e3 && !(share > 0.5 && share < 1+1e-6) {
			t.Errorf("walls of %g: %g of what is transmitted from the tail", c.wall, share)
		}
		if !(*r.Tail.ArrivalTransmitted > 0) {
			t.Errorf("walls of %g: the tail moves the arrival by %g", c.wall, *r.Tail.ArrivalTransmitted)
		}
	}
}

// Two resonances closer than, as far as and farther than they are wide: what
// they send beats.
func TestTailOfTwoResonances(t *testing.T) {
	for _, c := range []struct{ outer, middle float64 }{{2, 4.5}, {2, 4}, {2.5, 4}, {3, 3}, {4, 5}} {
		agreed(t, coupledWells(t, c.outer, c.middle, 1e-6), 2)
	}
}

// Unequal walls, either way round, and an absorbing well, from either side.
func TestTailOfUnequalAndAbsorbing(t *testing.T) {
	for _, c := range []struct{ left, right, loss float64 }{
		{2.5, 4, 0}, {4.5, 2.5, 0}, {3, 4, 1e-4}, {4, 3.5, 1e-5},
	} {
		_, r := agreed(t, twinBarrier(t, c.left, c.right, c.loss, 1e-6), 1)
		if c.loss > 0 && !(r.Tail.Lost > 0) {
			t.Errorf("%+v: nothing lost in the tail", c)
		}
		s := twinBarrier(t, c.left, c.right, c.loss, 1e-6)
		s.Packet.Side = FromRight
		agreed(t, s, 1)
	}
}

// A tail from which a resonance is missing does not pass: the run does not
// settle, and where it is made to, the roads do not agree. With the
// resonance they do.
func TestDroppedPoleIsCaught(t *testing.T) {
	s := coupledWells(t, 3, 3, 1e-6)
	agreed(t, s, 2)
	for _, c := range []struct {
		settle bool
		want   []Verdict
	}{{false, []Verdict{NotReached}}, {true, []Verdict{NotReached, Disagrees}}} {
		trial, err := Prepare(t.Context(), s, Forced{})
		if err != nil {
			t.Fatal(err)
		}
		p := trial.Plan
		p.States, p.MostSteps = p.States[:1], 600
		stepper, err := propagate.NewStepper(p.Mesh, p.Pade, p.TimeStep, p.Origin, p.packet())
		if err != nil {
			t.Fatal(err)
		}
		e := trial.ending()
		if c.settle {
			e.Settled = func(l *propagate.Ledger, _, _ float64) bool { return l.Steps > 400 }
		}
		trial.Run = propagate.NewRun(stepper, e)
		r := trial.Finish(t.Context(), nil)
		caught := false
		for _, v := range c.want {
			caught = caught || r.Verdict == v
		}
		off := math.Abs(r.Ledger.Transmitted - trial.Averages.Transmitted.Value)
		if !caught || !(off > 10*s.Tolerance) {
			t.Errorf("settled by force %v: verdict %q, off by %g", c.settle, r.Verdict, off)
		}
	}
}

// Where the end of the run is asked for, there is no tail: what is inside is
// trapped.
func TestNoTailAtAForcedEnd(t *testing.T) {
	trial, r := take(t, twinBarrier(t, 3.35, 3.35, 0, 1e-6), Forced{StopTime: 500})
	if r.Tail != nil || !(r.Ledger.Trapped > 1e-4) || trial.Run.Tail() != nil {
		t.Errorf("tail %+v, trapped %g", r.Tail, r.Ledger.Trapped)
	}
}

// randomBarriers are two or three walls, of random height, thickness and mass,
// with wells between them, some absorbing.
func randomBarriers(t testing.TB, r *rand.Rand) *Scenario {
	height := 0.7 + 1.8*r.Float64()
	kappa := math.Sqrt(2 * math.Abs(height-0.5))
	var layers []potential.Layer
	for i := range 2 + r.IntN(2) {
		if i > 0 {
			well := flatLayer(1+6*r.Float64(), -0.3*r.Float64(), 1)
			if r.IntN(5) == 0 {
				well.Loss = math.Pow(10, -2-4*r.Float64())
			}
			layers = append(layers, well)
		}
		layers = append(layers, flatLayer((0.5+6*r.Float64())/kappa, height, 0.7+0.6*r.Float64()))
	}
	exit := potential.Lead{Mass: 1}
	if r.IntN(3) == 0 {
		exit.Height = 0.2 * r.NormFloat64()
	}
	s := natural(t, exit, []float64{1e-4, 1e-6}[r.IntN(2)], 6*math.Exp(2*r.Float64()), layers...)
	if r.IntN(3) == 0 {
		s.Packet.Side = FromRight
		near, _ := s.leads()
		s.Packet.Energy = near.Height + 0.5/near.Mass
	}
	return s
}

// Random barriers with a fixed seed: never does the packet road differ from
// the averages by more than its budget, nor its ledger by more than 1e-8 from 1;
// nearly all are within the tolerance, and most by a tail.
func TestTailsOfRandomBarriers(t *testing.T) {
	const count = 40
	random := rand.New(rand.NewPCG(4, 3))
	verdicts, tails := map[Verdict]int{}, 0
	for i := range count {
		_, r := take(t, randomBarriers(t, random), Forced{})
		verdicts[r.Verdict]++
		if r.Tail != nil {
			tails++
		}
		if r.Verdict != Agrees && r.Verdict != NotReached || r.Ledger != nil && !(math.Abs(r.Ledger.Closure) < 1e-8) {
			t.Errorf("case %d: verdict %q", i, r.Verdict)
			report(t, r)
		}
	}
	if verdicts[Agrees] < count*9/10 || tails < count/2 {
		t.Errorf("verdicts %v, %d tails of %d", verdicts, tails, count)
	}
}
