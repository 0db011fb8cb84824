package stationary

import (
	"math"
	"math/cmplx"
)

// portrait is a solution that leaves by the far lead, as seen going from the
// far face to the near one: the integral of |psi|^2 over each layer, with
// |psi| = 1 at the far face.
type portrait struct {
	layers []tally
	flux   float64 // out at the far face; 0 where the lead is closed
	tail   float64 // integral of |psi|^2 over the far lead where it is closed
}

// portrait draws the solution at z with wave number q in the far lead.
func (s *Solver) portrait(z, q complex128, open bool) portrait {
	p := portrait{layers: make([]tally, s.layers)}
	if open {
		p.flux = real(q) / s.far.Mass
	} else {
		p.tail = 1 / (2 * imag(q))
	}
	r := s.leaving(q)
	for i := range s.elements {
		s.drawn(&r, &s.elements[i], z, &p)
	}
	return p
}

// drawn passes one element and adds its integral.
func (s *Solver) drawn(r *ray, e *element, z complex128, p *portrait) {
	switch e.kind {
	case point:
		s.pass(r, e, z)
	case smooth:
		at := z + complex(0, e.loss)
		slices := s.smooths[e.smooth].complexSlices(real(z), e.loss+math.Abs(imag(z)))
		for i := len(slices) - 1; i >= 0; i-- {
			t := s.cplx.cross(&slices[i], at)
			p.layers[e.layer].add(sampledDensity(&s.cplx, r.u, r.w), r.log)
			r.apply(&t.m, &t.d, 0)
		}
	default:
		var f lossyLayer
		f.set(z+complex(-e.height, e.loss), e.mass, e.length)
		p.layers[e.layer].add(f.density(r.u, r.w), r.log+f.growth)
		r.apply(&f.m, &f.d, f.growth)
	}
}

// state describes the zero z; false where the solver of the other side, whose
// rounding is different, does not confirm it.
func (f *finder) state(z zero, on sheet) (State, bool) {
	there, off := f.other(z, on)
	ok := off <= 1e-6*(cmplx.Abs(z.at)+f.near.high-f.near.low)
	if !ok {
		there = z.at
	}
	err := off + z.error + 4*eps*(cmplx.Abs(z.at)+f.near.high-f.near.low)
	at := (z.at + there) / 2
	s := f.describe(at, on)
	moved := f.describe(at+complex(err, 0), on)
	s.EnergyError = err
	s.WidthError = math.Abs(moved.Width-s.Width) + 64*eps*s.Width +
		max(0, math.Abs(s.Width+2*imag(at))-2*err)
	return s, ok
}

// other polishes the zero on the solver of the other side and returns how far
// that is.
func (f *finder) other(z zero, on sheet) (there complex128, off float64) {
	l := locator{contour: contour{denominator{f.far, sheet{on.farOpen, on.nearOpen}}, &f.budget}}
	there, step := l.polish(z.at)
	return there, cmplx.Abs(there-z.at) + step
}

// describe finds the widths and shares of the state at z from the solutions
// that leave by either lead. At a pole they are one; of what rounding makes of
// them, each is right on the side where it started, up to the layer in which
// the product of the two is largest.
func (f *finder) describe(z complex128, on sheet) State {
	s := f.near
	k, q := denominator{s, on}.waves(z)
	byFar := s.portrait(z, q, on.farOpen)
	byNear := f.far.portrait(z, k, on.nearOpen)
	out := State{Energy: real(z), Shares: make([]float64, s.layers)}
	best := brightest(byFar.layers, byNear.layers)
	if best < 0 {
		return out // nothing but a point: all of it is in the leads
	}
	norm := 0.0
	for i := range out.Shares {
		p := byNear.layers
		if (i > best) != f.mirrored {
			p = byFar.layers
		}
		out.Shares[i] = p[i].over(p[best])
		norm += out.Shares[i]
	}
	unit := tally{sum: 1}
	farUnit, nearUnit := unit.over(byFar.layers[best]), unit.over(byNear.layers[best])
	norm += byFar.tail*farUnit + byNear.tail*nearUnit
	out.Left, out.Right = byNear.flux*nearUnit/norm, byFar.flux*farUnit/norm
	if f.mirrored {
		out.Left, out.Right = out.Right, out.Left
	}
	for i := range out.Shares {
		out.Shares[i] /= norm
	}
	out.Lost = f.lost(out.Shares)
	out.Width = out.Left + out.Right + out.Lost
	return out
}

// over is the ratio of two tallies.
func (t tally) over(o tally) float64 { return t.sum / o.sum * math.Exp(2*(t.log-o.log)) }

// brightest is the layer in which the product of the two portraits is largest,
// -1 where it is nowhere above zero.
func brightest(a, b []tally) int {
	best, most := -1, math.Inf(-1)
	for i := range a {
		if p := math.Log(a[i].sum) + math.Log(b[i].sum) + 2*(a[i].log+b[i].log); p > most {
			best, most = i, p
		}
	}
	return best
}

// lost is the width to losses, the sum of 2 loss times the share.
func (f *finder) lost(shares []float64) float64 {
	sum := 0.0
	seen := make([]bool, len(shares))
	for i := range f.near.elements {
		if e := &f.near.elements[i]; e.loss > 0 && !seen[e.layer] {
			seen[e.layer] = true
			sum += 2 * e.loss * shares[e.layer]
		}
	}
	return sum
}
