package propagate

import (
	"math/cmplx"

	"fluxtoll/potential"
)

// EdgeAngle is the rotation of the edges, in radians: large enough that a few
// elements absorb, small enough that the rotated wave stays well resolved.
const EdgeAngle = 0.55

// Edge is a row of Count elements behind a plane, rotated into the complex
// plane by Angle (exterior complex scaling: B. Simon, Phys. Lett. A 71, 211
// (1979)). The first has length First, each next is Growth times longer.
type Edge struct {
	Count                int
	First, Growth, Angle float64
}

// lengths lists the element lengths from the plane outwards.
func (e Edge) lengths() []float64 {
	out := make([]float64, e.Count)
	h := e.First
	for i := range out {
		out[i] = h
		h *= e.Growth
	}
	return out
}

// Reflection is the amplitude with which an edge of elements of the given
// order, standing on its own behind a plane in a lead, sends back a wave of
// the given energy (> lead.Height). It is solved on the edge's own elements.
func (e Edge) Reflection(lead potential.Lead, order int, energy float64) complex128 {
	return e.reflection(uniformPencil(newRule(order)), lead, energy)
}

func (e Edge) reflection(uniform *pencil, lead potential.Lead, energy float64) complex128 {
	turn := cmplx.Exp(complex(0, e.Angle))
	var r edgeRow
	for _, h := range e.lengths() {
		c := flatCell(uniform, complex(h, 0)*turn, lead.Height, lead.Mass, 0)
		r.append(c.condense(1, complex(energy, 0)))
	}
	return waveIn(lead, energy).reflect(r.all.ll)
}

// edgeRow is a row of elements, seen from the plane, with all faces between
// its ends eliminated. all.ll is its admittance with the wall psi = 0 behind it.
type edgeRow struct {
	all   condensed
	count int
}

// append adds the next element outwards.
func (r *edgeRow) append(c condensed) {
	r.count++
	if r.count == 1 {
		r.all = c
		return
	}
	g := reciprocal(r.all.rr + c.ll)
	r.all = condensed{
		ll: r.all.ll - r.all.lr*r.all.lr*g,
		lr: -r.all.lr * c.lr * g,
		rr: c.rr - c.lr*c.lr*g,
	}
}
