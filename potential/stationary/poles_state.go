package stationary

import (
	"math"
	"math/cmplx"
)

// state describes the zero z; false where the solver of the other side, whose
// rounding is different, does not confirm it, or the width that the shape of the
// state tells is not that of the zero.
func (f *finder) state(z zero, on sheet) (State, bool) {
	there, off := f.other(z, on)
	scale := cmplx.Abs(z.at) + f.near.high - f.near.low
	ok := off <= 1e-6*scale
	if !ok {
		there = z.at
	}
	err := off + z.error + 4*eps*scale
	at := (z.at + there) / 2
	s := f.describe(at, on)
	moved := f.describe(at+complex(err, 0), on)
	s.EnergyError = err
	apart := max(0, math.Abs(s.Width+2*imag(at))-2*err)
	s.WidthError = math.Abs(moved.Width-s.Width) + 64*eps*s.Width + apart
	return s, ok && apart <= 1e-6*scale
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
// them, each is right on the side where it started, up to the step in which
// the product of the two is largest.
func (f *finder) describe(z complex128, on sheet) State {
	byFar, byNear := f.near.portraits(z, on)
	out := State{Energy: real(z), Shares: make([]float64, f.near.layers)}
	best := brightest(byFar.steps, byNear.steps)
	if best < 0 {
		return out // nothing but a point: all of it is in the leads
	}
	norm := 0.0
	for i := range byFar.steps {
		p := &byFar
		if i > best {
			p = &byNear
		}
		part := p.steps[i].over(p.steps[best])
		out.Shares[p.layers[i]] += part
		norm += part
	}
	unit := tally{sum: 1}
	farUnit, nearUnit := unit.over(byFar.steps[best]), unit.over(byNear.steps[best])
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

// brightest is the step in which the product of the two portraits is largest,
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
