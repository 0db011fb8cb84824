package stationary

import "math"

// Work estimates what one energy costs, in crossings of a flat layer (0.2
// microseconds): every other segment is crossed in slices, each of which costs
// about as much as four flat layers, of a phase of at most about 1.
func (s *Solver) Work(energy float64) float64 {
	const slice = 4
	work := 1.0
	for i := range s.elements {
		e := &s.elements[i]
		work++
		if e.kind == smooth {
			g := &s.smooths[e.smooth]
			k := math.Sqrt(2 * g.mass * math.Max(math.Abs(energy-g.low), math.Abs(energy-g.high)))
			work += slice * (1 + k*g.segment.Length())
		}
	}
	return work
}
