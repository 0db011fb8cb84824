package stationary

import (
	"context"
	"errors"
	"math"
	"math/cmplx"
)

// sheet says which wave numbers belong to a complex energy: in a lead that is
// open the one with Re k > 0, which grows outwards below the real axis; in one
// that is closed that with Im k > 0, which decays.
type sheet struct{ nearOpen, farOpen bool }

// wavenumberOn is sqrt(2 m e) on the side of an open or closed lead. It is
// analytic for Re e > 0 where open, for Re e < 0 where closed.
func wavenumberOn(e complex128, m float64, open bool) complex128 {
	if e == 0 {
		return tiny
	}
	if open {
		return cmplx.Sqrt(complex(2*m, 0) * e)
	}
	return 1i * cmplx.Sqrt(complex(-2*m, 0)*e)
}

// denominator is the amplitude in(E) of the incident wave on one sheet. It is
// analytic in a rectangle about the real axis that reaches over no lead's
// height, and its zeros there are the poles of t and r.
type denominator struct {
	solver *Solver
	sheet  sheet
}

// at returns in(z) up to a positive factor, and its logarithmic derivative.
func (d denominator) at(z complex128) (in, logSlope complex128) {
	k, q := d.waves(z)
	in, slope, _ := d.solver.incoming(z, k, q)
	return in, slope / in
}

// waves are the wave numbers in the near and the far lead.
func (d denominator) waves(z complex128) (k, q complex128) {
	s := d.solver
	k = wavenumberOn(z-complex(s.near.Height, 0), s.near.Mass, d.sheet.nearOpen)
	q = wavenumberOn(z-complex(s.far.Height, 0), s.far.Mass, d.sheet.farOpen)
	return k, q
}

// rectangle is a part of the plane of complex energies.
type rectangle struct{ from, to, bottom, top float64 }

func (r rectangle) holds(z complex128) bool {
	return real(z) >= r.from && real(z) <= r.to && imag(z) >= r.bottom && imag(z) <= r.top
}

func (r rectangle) size() float64 { return max(r.to-r.from, r.top-r.bottom) }

func (r rectangle) centre() complex128 {
	return complex((r.from+r.to)/2, (r.bottom+r.top)/2)
}

// divided cuts the longer side at a fraction.
func (r rectangle) divided(at float64) (a, b rectangle) {
	a, b = r, r
	if r.to-r.from >= r.top-r.bottom {
		x := r.from + at*(r.to-r.from)
		a.to, b.from = x, x
		return a, b
	}
	y := r.bottom + at*(r.top-r.bottom)
	a.top, b.bottom = y, y
	return a, b
}

// errMeets says that a contour runs through a zero, or next to one.
var errMeets = errors.New("stationary: the contour meets a pole")

// contour adds up the phase of a denominator along straight lines.
type contour struct {
	denominator
	budget *int // evaluations left
}

// zeros counts the zeros in a rectangle by the argument principle: the phase
// of in rises by 2 pi for each on the way round.
func (c contour) zeros(ctx context.Context, r rectangle) (int, error) {
	corners := [5]complex128{
		complex(r.from, r.bottom), complex(r.to, r.bottom), complex(r.to, r.top), complex(r.from, r.top),
		complex(r.from, r.bottom),
	}
	turn := 0.0
	last := c.mark(corners[0])
	for _, z := range corners[1:] {
		next := c.mark(z)
		const pieces = 4 // so that no symmetry of an edge hides a turn
		for i := 1; i <= pieces; i++ {
			to := next
			if i < pieces {
				to = c.mark(last.z + (z-last.z)/complex(float64(pieces-i+1), 0))
			}
			rise, err := c.rise(ctx, last, to)
			if err != nil {
				return 0, err
			}
			turn, last = turn+rise, to
		}
	}
	return int(math.Round(turn / (2 * math.Pi))), nil
}

// mark is what a contour knows at one energy.
type mark struct{ z, in, logSlope complex128 }

func (c contour) mark(z complex128) mark {
	*c.budget--
	in, logSlope := c.at(z)
	return mark{z, in, logSlope}
}

// A step of the phase counts as known where it is below an eighth of a turn
// and the derivative at both ends tells the same.
const (
	phaseStep     = math.Pi / 4
	phaseMismatch = 0.1
)

// rise is by how much the phase of in rises from a to b.
func (c contour) rise(ctx context.Context, a, b mark) (float64, error) {
	step := cmplx.Phase(b.in * cmplx.Conj(a.in))
	told := imag((a.logSlope + b.logSlope) / 2 * (b.z - a.z))
	if math.Abs(step) <= phaseStep && math.Abs(step-told) <= phaseMismatch {
		return step, nil
	}
	switch {
	case ctx.Err() != nil:
		return 0, ctx.Err()
	case *c.budget <= 0:
		return 0, ErrEvaluations
	case !(cmplx.Abs(b.z-a.z) > 8*eps*cmplx.Abs(a.z)):
		return 0, errMeets
	}
	mid := c.mark((a.z + b.z) / 2)
	left, err := c.rise(ctx, a, mid)
	if err != nil {
		return 0, err
	}
	right, err := c.rise(ctx, mid, b)
	return left + right, err
}
