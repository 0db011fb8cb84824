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

// evenWork is how many node solves a pulse may take in steps of one size
// before they may grow: a few seconds.
const evenWork = 2e8

// PreparePulse is Prepare for a run whose pulses and energies are looked at:
// roomy, and in steps of one size for as long as that takes no more than
// seconds, since energies are read off less well across a change of step.
func PreparePulse(ctx context.Context, s *Scenario, forced Forced) (*Trial, error) {
	t, err := Prepare(ctx, s.Roomy(), forced)
	if err != nil || t.Run == nil {
		return t, err
	}
	even := int(evenWork / float64(t.Plan.Mesh.Nodes()*t.Plan.Pade.Member))
	e := t.ending()
	if slow := e.Slow; slow != nil {
		e.Slow = func(l *propagate.Ledger, remaining, lifetime float64) bool {
			return l.Steps > even && slow(l, remaining, lifetime)
		}
	}
	t.Run = propagate.NewRun(t.Run.Stepper, e)
	t.record = t.Run.Record()
	return t, nil
}
