package scenarios

import (
	"math"
	"math/rand/v2"
	"testing"

	"fluxtoll/potential"
)

// TestRandomTrials: the roads agree on structures, packets and tolerances
// drawn at random. A disagreement is an error of a road or of its budget; a
// tolerance that is not reached is allowed, rarely.
func TestRandomTrials(t *testing.T) {
	count := 60
	if slowTests {
		count = 1500
	}
	missed, alarms := 0, 0
	for i := range count {
		s := randomScenario(rand.New(rand.NewPCG(uint64(i), 7)))
		_, r := take(t, s, Forced{})
		switch r.Verdict {
		case Agrees:
		case NotReached:
			missed++
		default:
			t.Logf("seed %d: %s, packet %+v, structure %+v", i, r.Verdict, s.Packet, *s.Structure)
			report(t, r)
			if !falseAlarm(r) {
				t.Errorf("seed %d: %s", i, r.Verdict)
			} else {
				alarms++
			}
		}
		// Steps close to rounding; what resonance states send after them is
		// known to the tail's own error.
		allowed := 1e-11
		if r.Tail != nil {
			allowed += r.Tail.Error
		}
		if c := r.Ledger.Closure; !(math.Abs(c) < allowed) {
			t.Errorf("seed %d: the ledger is off by %g", i, c)
		}
	}
	if alarms > count/1000 {
		t.Errorf("%d of %d disagree, if only by little more than their budget", alarms, count)
	}
	if missed > 1+count/100 {
		t.Errorf("%d of %d did not reach their tolerance", missed, count)
	}
}

// falseAlarm reports whether every difference is within three times its budget
// and within the tolerance. The tail of waves at a threshold that a shallow
// state holds back is estimated that much too small about once in a thousand
// draws (seed 164).
func falseAlarm(r *Result) bool {
	for _, q := range r.Quantities {
		if q.Difference == nil || q.Budget == nil || !(math.Abs(*q.Difference) <= math.Min(3**q.Budget, q.Allowed)) {
			return false
		}
	}
	return true
}

// randomScenario draws up to four layers of all shapes, leads, a packet and a
// tolerance, in a setting in which the packet's wave number is 1.
func randomScenario(r *rand.Rand) *Scenario {
	entry := potential.Lead{Mass: 1}
	exit := potential.Lead{Height: r.NormFloat64() * 0.15, Mass: 0.6 + r.Float64()*0.8}
	if r.IntN(3) == 0 {
		exit = entry
	}
	layers := make([]potential.Layer, r.IntN(5))
	for i := range layers {
		layers[i] = randomLayer(r)
	}
	tolerance := []float64{1e-4, 1e-6, 1e-6, 1e-7}[r.IntN(4)]
	structure, err := potential.Build(entry, exit, layers, potential.Options{
		Cut: tolerance * 5e-4, Drop: 0.1 * float64(r.IntN(2)) * r.Float64(),
	})
	if err != nil {
		panic(err) // nothing drawn here is refused
	}
	s := &Scenario{Tolerance: tolerance, Structure: structure, Scale: Scale{Length: 1, Energy: 1, Time: 1}}
	s.Packet = Packet{K0: 1, Length: 5 * math.Exp(2*r.Float64()), Side: Side(r.IntN(2))}
	near, _ := s.leads()
	s.Packet.Energy = near.Height + 0.5/near.Mass
	return s
}

func randomLayer(r *rand.Rand) potential.Layer {
	height, width := r.NormFloat64()*0.6, 2*math.Exp(0.8*r.NormFloat64())
	l := potential.Layer{Thickness: width, Mass: 0.6 + r.Float64()*0.8}
	switch r.IntN(7) {
	case 0, 1, 2:
		l.Shape = potential.Flat{Height: height}
	case 3:
		l.Shape = potential.Ramp{Height: height, HeightEnd: r.NormFloat64() * 0.6}
	case 4:
		l.Shape = potential.Bell{Height: height, Width: width / 6}
	case 5:
		l.Shape, l.Thickness = potential.Point{Strength: 0.7 * r.NormFloat64()}, 0
	case 6:
		l.Shape = potential.Hump{Height: height, Width: width / 8}
	}
	if l.Thickness > 0 && r.IntN(6) == 0 {
		l.Loss = 0.05 * r.Float64()
	}
	return l
}
