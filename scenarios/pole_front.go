package scenarios

import "math"

// caught charges what resonances catch directly of the packet's front, the
// part that lies in the structure at the start: it is in no spectrum, and adds
// coherently to what a resonance catches in passing. By the inequality of
// Cauchy and Schwarz its amplitude in a state is at most the root of its
// probability, and the probabilities p and front make up at most
// p + 2 sqrt(p front) + front.
func (p *planner) caught(g geometry) errorSet {
	var e errorSet
	m, packet := p.means(g), p.scenario.Packet
	front := math.Erfc(g.start/packet.Length/math.Sqrt2) / 2
	speed := packet.K0 / p.near.Mass
	for _, r := range p.averages.Resonances {
		change := 2*math.Sqrt(front*p.heldBy(r.Energy, r.Width)) + front
		e.transmitted += change
		e.dwell += change / r.Width
		there := g.start/speed + 1/r.Width
		if m.transmitted > leastPart {
			e.arrivalTransmitted += change * math.Abs(there-m.timeTransmitted) / m.transmitted
		}
		if m.reflected > leastPart {
			e.arrivalReflected += change * math.Abs(there-m.timeReflected) / m.reflected
		}
	}
	e.reflected, e.lost = e.transmitted, e.transmitted
	return e
}
