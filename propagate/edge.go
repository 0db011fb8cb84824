package propagate

import (
	"math"
	"math/cmplx"

	"fluxtoll/potential"
)

// EdgeAngle is the rotation of the edges, in radians: large enough that a few
// elements absorb, small enough that the rotated wave stays well resolved.
const EdgeAngle = 0.55

// Reflection is the amplitude with which an edge of elements of the given
// order, standing on its own behind a plane in a lead, sends back a wave of
// the given energy (> lead.Height). It is solved on the edge's own elements.
func (e Edge) Reflection(lead potential.Lead, order int, energy float64) complex128 {
	return e.reflection(uniformPencil(newRule(order)), lead, energy)
}

func (e Edge) reflection(p *pencil, lead potential.Lead, energy float64) complex128 {
	turn := cmplx.Exp(complex(0, e.Angle))
	lengths := e.lengths()
	a := admittance{}
	for i := len(lengths) - 1; i >= 0; i-- {
		h := complex(lengths[i], 0) * turn
		c := cell{pencil: p, kappa: 1 / (complex(lead.Mass, 0) * h), mu: h, u: complex(lead.Height, 0)}
		f := c.condense(1, complex(energy, 0))
		if i == len(lengths)-1 {
			a.value = f.ll
			continue
		}
		a.value = f.ll - f.lr*f.lr/(f.rr+a.value)
	}
	return leadWave(lead, energy).reflect(a)
}

// EdgeGoal is one energy at which an edge has to absorb, and the share of the
// packet that meets the edge there.
type EdgeGoal struct{ Energy, Weight float64 }

// ChooseEdge returns the shortest edge for which the weighted sum of
// |reflection amplitude| over the goals is at most limit, or, where none of
// those tried is good enough, the one with the least.
func ChooseEdge(lead potential.Lead, order int, goals []EdgeGoal, limit float64) Edge {
	p := uniformPencil(newRule(order))
	shortest := math.Inf(1)
	for _, g := range goals {
		shortest = min(shortest, 1/math.Sqrt(2*lead.Mass*math.Max(g.Energy-lead.Height, 0)))
	}
	best, least := Edge{}, math.Inf(1)
	if math.IsInf(shortest, 1) {
		shortest = 1 / math.Sqrt(lead.Mass*math.SmallestNonzeroFloat32)
	}
	for count := 4; count <= 24; count++ {
		for _, first := range []float64{2, 3, 4.5, 6} {
			for _, growth := range []float64{1.3, 1.5, 1.7} {
				e := Edge{Count: count, First: first * shortest, Growth: growth, Angle: EdgeAngle}
				sum := 0.0
				for _, g := range goals {
					if g.Energy > lead.Height {
						sum += g.Weight * cmplx.Abs(e.reflection(p, lead, g.Energy))
					}
				}
				if sum < least {
					best, least = e, sum
				}
			}
		}
		if least <= limit {
			return best
		}
	}
	return best
}
