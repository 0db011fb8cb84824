package stationary

import (
	"context"
	"errors"
	"math"
	"math/cmplx"
)

// zero is a zero of the denominator, known to within error.
type zero struct {
	at    complex128
	error float64
}

// locator finds all zeros of one denominator in a rectangle.
type locator struct {
	contour
	scale float64 // of energies: what rounding is relative to
	zeros []zero
}

func (f *finder) locator(on sheet) *locator {
	s := f.near
	return &locator{contour: contour{denominator{s, on}, &f.budget}, scale: s.high - s.low}
}

// all locates every zero of a piece and returns how many there are.
func (l *locator) all(ctx context.Context, p piece) (counted int, err error) {
	s := l.solver
	for _, share := range []float64{0, 1e-5, 1e-4, 1e-3, 1e-2} {
		r := p.widened(share, s.near.Height, s.far.Height)
		if counted, err = l.contour.zeros(ctx, r); errors.Is(err, errMeets) {
			continue
		}
		if err != nil {
			return 0, err
		}
		return counted, l.search(ctx, r, counted)
	}
	return counted, err
}

// inside is how many of the zeros known lie in a rectangle.
func (l *locator) inside(r rectangle) int {
	n := 0
	for _, z := range l.zeros {
		if r.holds(z.at) {
			n++
		}
	}
	return n
}

// search locates the n zeros of a rectangle: by Newton's method, with the
// known ones divided out, from a few places in it, and where that does not find all, in its halves.
func (l *locator) search(ctx context.Context, r rectangle, n int) error {
	if l.inside(r) >= n {
		return nil
	}
	for _, start := range r.starts() {
		if z, ok := l.newton(start, r); ok {
			l.offer(z, r)
		}
		if l.inside(r) >= n {
			return nil
		}
	}
	if r.size() <= l.blur(r.centre()) {
		l.merge(r, n)
		return nil
	}
	return l.halves(ctx, r, n)
}

// blur is how far apart two zeros must be to be told apart.
func (l *locator) blur(z complex128) float64 { return 1e3 * eps * (cmplx.Abs(z) + l.scale) }

// merge takes what cannot be told apart for as many zeros at one place.
func (l *locator) merge(r rectangle, n int) {
	z := zero{r.centre(), r.size()}
	for l.inside(r) < n {
		l.zeros = append(l.zeros, z)
	}
}

// halves searches both halves. Where the line between them meets a zero it is
// moved; where that is of no avail, all zeros are too close together.
func (l *locator) halves(ctx context.Context, r rectangle, n int) error {
	for _, at := range []float64{0.5, 0.44, 0.57, 0.38, 0.66} {
		a, b := r.divided(at)
		inA, err := l.contour.zeros(ctx, a)
		if errors.Is(err, errMeets) {
			continue
		}
		if err != nil {
			return err
		}
		if err := l.search(ctx, a, inA); err != nil {
			return err
		}
		return l.search(ctx, b, n-inA)
	}
	if r.size() < 1e3*l.blur(r.centre()) {
		l.merge(r, n)
		return nil
	}
	return errMeets
}

// starts are the middle and the middles of the quarters.
func (r rectangle) starts() [5]complex128 {
	c, dx, dy := r.centre(), (r.to-r.from)/4, (r.top-r.bottom)/4
	return [5]complex128{c, c + complex(dx, dy), c + complex(-dx, dy), c + complex(dx, -dy), c + complex(-dx, -dy)}
}

// newton goes from z to a zero that is not among the known ones. It gives up
// where that leads far from the rectangle.
func (l *locator) newton(z complex128, r rectangle) (complex128, bool) {
	const steps = 40
	for range steps {
		*l.budget--
		_, logSlope := l.at(z)
		for _, known := range l.zeros {
			logSlope -= 1 / (z - known.at)
		}
		step := 1 / logSlope
		z -= step
		switch {
		case cmplx.IsNaN(z) || cmplx.Abs(z-r.centre()) > 2*r.size():
			return z, false
		case cmplx.Abs(step) <= 1e-9*cmplx.Abs(z):
			return z, true
		}
	}
	return z, false
}

// offer polishes a guess and adds it if it is a zero, lies in the rectangle and
// is new.
func (l *locator) offer(z complex128, r rectangle) {
	polished, off := l.polish(z)
	if !(off <= 1e-8*(cmplx.Abs(polished)+l.scale)) || !r.holds(polished) {
		return
	}
	for _, known := range l.zeros {
		if cmplx.Abs(polished-known.at) <= 0.1*l.blur(polished)+4*(off+known.error) {
			return
		}
	}
	l.zeros = append(l.zeros, zero{polished, off})
}

// polish repeats Newton's step as long as it shortens, and returns the last
// step: what rounding leaves.
func (l *locator) polish(z complex128) (complex128, float64) {
	best := math.Inf(1)
	for range 12 {
		*l.budget--
		_, logSlope := l.at(z)
		step := 1 / logSlope
		if size := cmplx.Abs(step); !(size < best) {
			return z, best
		} else {
			best = size
		}
		z -= step
		if best == 0 {
			break
		}
	}
	return z, best
}
