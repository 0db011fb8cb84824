package scenarios

import (
	"context"
	"math"

	"fluxtoll/propagate"
)

// Roomy is the scenario with start and near plane so far from everything,
// where it leaves them open, that single energies can be read off the packet:
// where a tail of the Gaussian is cut off, exp(-d^2/(4 length^2)), it is small
// beside the least of the spectrum that is shown. For averages, over which the
// phase of a cut cancels, run places them closer.
func (s *Scenario) Roomy() *Scenario {
	const part, most = 0.1, 12.0 // of the tolerance; packet lengths
	clear := math.Min(most, 2*math.Sqrt(-math.Log(part*s.Tolerance*math.Sqrt(shotShare))))
	c := *s
	g := geometry{side: s.Packet.Side, width: s.Structure.Width()}
	room := s.roundUp(clear * s.Packet.Length)
	if s.Packet.Start == nil && s.Planes.Near == nil {
		start := g.at(room)
		c.Packet.Start = &start
	}
	if c.Packet.Start != nil && s.Planes.Near == nil {
		near := g.at(s.roundUp(g.before(*c.Packet.Start) + room))
		c.Planes.Near = &near
	}
	return &c
}

// evenWork is how many node solves a pulse may take in steps of one size, and
// before it is left to the states of a tail: a second or two.
const evenWork = 5e7

// leftToTail is the part of the tolerance that may be left when a pulse is
// finished by a tail, in which it has no series.
const leftToTail = 0.1

// PreparePulse is Prepare for a run whose pulses and energies are looked at:
// roomy, and for as long as that takes no more than seconds in steps of one
// size, since energies are read off less well across a change of step, and
// until all but a little has passed.
func PreparePulse(ctx context.Context, s *Scenario, forced Forced) (*Trial, error) {
	t, err := Prepare(ctx, s.Roomy(), forced)
	if err != nil || t.Run == nil {
		return t, err
	}
	t.Run = propagate.NewRun(t.Run.Stepper, t.patient(t.ending()))
	t.record = t.Run.Record()
	return t, nil
}

// patient makes an ending wait for the pulse.
func (t *Trial) patient(e propagate.Ending) propagate.Ending {
	even := int(evenWork / float64(t.Plan.Mesh.Nodes()*t.Plan.Pade.Member))
	if slow := e.Slow; slow != nil {
		e.Slow = func(l *propagate.Ledger, remaining, lifetime float64) bool {
			return l.Steps > even && slow(l, remaining, lifetime)
		}
	}
	if settled := e.Settled; len(e.States) > 0 {
		left := math.Max(leftToTail*t.Scenario.Tolerance, 2*t.stray())
		e.Settled = func(l *propagate.Ledger, remaining, lifetime float64) bool {
			return (l.Steps > even || l.Remaining() < left) && settled(l, remaining, lifetime)
		}
	}
	return e
}
