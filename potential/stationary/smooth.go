package stationary

import (
	"math"

	"fluxtoll/potential"
)

// number is what a Taylor series is summed in: real where energy and
// potential are, complex where there is loss or a complex energy.
type number interface{ float64 | complex128 }

// slice is a short stretch of a smooth segment: the Taylor coefficients about
// its middle, in units of half its length h, times what the equations need:
// with t = (x - middle)/h, du/dt = mass w and dw/dt = (height - 2 h energy) u.
type slice[N number] struct {
	length       float64
	double       N   // 2 h
	mass, height []N // h m_n (h/2)^n and 2 h V_n (h/2)^n
}

// smoothSegment is a segment and its slices for a range of energies. The
// slices depend on the energy only through the shortest wavelength met; they
// are made when first asked for.
type smoothSegment struct {
	segment   potential.Segment
	low, high float64 // bounds of the height
	mass      float64 // upper bound
	real      map[int][]slice[float64]
	cplx      map[int][]slice[complex128]
}

func newSmoothSegment(g potential.Segment) smoothSegment {
	s := smoothSegment{segment: g, real: map[int][]slice[float64]{}, cplx: map[int][]slice[complex128]{}}
	s.low, s.high = g.Height.Range(g.From, g.To)
	_, s.mass = g.Mass.Range(g.From, g.To)
	return s
}

// clone shares the slices made so far.
func (s smoothSegment) clone() smoothSegment {
	c := s
	c.real, c.cplx = map[int][]slice[float64]{}, map[int][]slice[complex128]{}
	for n, v := range s.real {
		c.real[n] = v
	}
	for n, v := range s.cplx {
		c.cplx[n] = v
	}
	return c
}

// rank is the number of half powers of two that holds the largest
// |k| = sqrt(2 m |E - V|).
func (s *smoothSegment) rank(energy, loss float64) int {
	e := max(math.Abs(energy-s.low), math.Abs(s.high-energy)) + loss
	return int(math.Ceil(math.Log2(2 * s.mass * e)))
}

func (s *smoothSegment) realSlices(energy float64) []slice[float64] {
	n := s.rank(energy, 0)
	if s.real[n] == nil {
		s.real[n] = cut(s.segment, math.Exp2(float64(n)/2), func(x float64) float64 { return x })
	}
	return s.real[n]
}

func (s *smoothSegment) complexSlices(energy, loss float64) []slice[complex128] {
	n := s.rank(energy, loss)
	if s.cplx[n] == nil {
		s.cplx[n] = cut(s.segment, math.Exp2(float64(n)/2), func(x float64) complex128 { return complex(x, 0) })
	}
	return s.cplx[n]
}

// A slice spans at most span/|k| and reach times the length over which the
// profile's Taylor series is useful: with half a slice on either side of the
// middle, the terms fall at least as (span/2)^n/n! and (reach/2)^n, and the
// matrix has no entry above cosh span.
const (
	span  = 2.0
	reach = 0.4
	// jetTerms is how many coefficients of a profile that is not a polynomial
	// are kept: (reach/2)^26 < 1e-18.
	jetTerms = 26
)

// cut divides a segment into slices for wave numbers up to k.
func cut[N number](g potential.Segment, k float64, convert func(float64) N) []slice[N] {
	var out []slice[N]
	for left := g.From; left < g.To; {
		h := min(span/k, reach*scale(g, left))
		// Look at the middle and the end too: the scale may shrink ahead.
		h = min(h, reach*scale(g, left+h/2), reach*scale(g, left+h))
		if n := math.Ceil((g.To - left) / h); n < 8 {
			h = (g.To - left) / n
		}
		right := left + h
		if right >= g.To || g.To-right < 1e-12*h || right <= left {
			right = g.To
		}
		out = append(out, newSlice(g, left, right, convert))
		left = right
	}
	return out
}

func scale(g potential.Segment, x float64) float64 {
	return min(g.Height.Scale(x), g.Mass.Scale(x))
}

func newSlice[N number](g potential.Segment, left, right float64, convert func(float64) N) slice[N] {
	h := right - left
	mass := jet(g.Mass, left+h/2, h, 1)
	height := jet(g.Height, left+h/2, h, 2)
	return slice[N]{
		length: h, double: convert(2 * h),
		mass:   converted(trim(mass, mass[0]), convert),
		height: converted(trim(height, 1/mass[0]), convert),
	}
}

// jet returns factor h times the Taylor coefficients of p about x in units of
// h/2.
func jet(p potential.Profile, x, h, factor float64) []float64 {
	c := make([]float64, jetTerms)
	if d := p.Degree(); d >= 0 {
		c = c[:min(d+1, jetTerms)]
	}
	p.Jet(x, c)
	factor *= h
	for i := range c {
		c[i] *= factor
		factor *= h / 2
	}
	return c
}

// trim drops the last coefficients as far as they are lost beside unit.
func trim(c []float64, unit float64) []float64 {
	const lost = 1e-20
	n := len(c)
	for n > 1 && math.Abs(c[n-1]) < lost*unit {
		n--
	}
	return c[:n]
}

func converted[N number](c []float64, convert func(float64) N) []N {
	out := make([]N, len(c))
	for i, v := range c {
		out[i] = convert(v)
	}
	return out
}
