package potential

import "math"

// Polynomial is the profile sum over n of C[n] (x-Origin)^n. C has at least
// one coefficient.
type Polynomial struct {
	Origin float64
	C      []float64
}

// Line returns the straight profile that is v0 at x0 and v1 at x1.
func Line(x0, v0, x1, v1 float64) Polynomial {
	if v0 == v1 {
		return Constant(v0)
	}
	return Polynomial{Origin: x0, C: []float64{v0, (v1 - v0) / (x1 - x0)}}
}

// At returns the value at x by Horner's rule.
func (p Polynomial) At(x float64) float64 {
	d, v := x-p.Origin, 0.0
	for n := len(p.C) - 1; n >= 0; n-- {
		v = v*d + p.C[n]
	}
	return v
}

// Jet fills c with the Taylor coefficients about x by repeated synthetic
// division.
func (p Polynomial) Jet(x float64, c []float64) {
	d := x - p.Origin
	work := make([]float64, len(p.C))
	copy(work, p.C)
	for n := range c {
		c[n] = 0
		if n >= len(work) {
			continue
		}
		for j := len(work) - 2; j >= n; j-- {
			work[j] += d * work[j+1]
		}
		c[n] = work[n]
	}
}

// Degree is the highest power whose coefficient is not zero.
func (p Polynomial) Degree() int {
	for n := len(p.C) - 1; n > 0; n-- {
		if p.C[n] != 0 {
			return n
		}
	}
	return 0
}

// Scale is +Inf: the series ends.
func (p Polynomial) Scale(float64) float64 { return math.Inf(1) }

// Range bounds the polynomial on [a, b]: exactly to degree one, by the Taylor
// coefficients about the middle above that.
func (p Polynomial) Range(a, b float64) (lo, hi float64) {
	if p.Degree() <= 1 {
		va, vb := p.At(a), p.At(b)
		return min(va, vb), max(va, vb)
	}
	c := make([]float64, len(p.C))
	p.Jet((a+b)/2, c)
	half, power, spread := (b-a)/2, 1.0, 0.0
	for _, v := range c[1:] {
		power *= half
		spread += math.Abs(v) * power
	}
	return c[0] - spread, c[0] + spread
}

// Mirror returns the polynomial in sum-x.
func (p Polynomial) Mirror(sum float64) Profile {
	c := make([]float64, len(p.C))
	for n, v := range p.C {
		if n%2 == 1 {
			v = -v
		}
		c[n] = v
	}
	return Polynomial{Origin: sum - p.Origin, C: c}
}

// plus returns p with a second polynomial added.
func (p Polynomial) plus(q Polynomial) Polynomial {
	c := make([]float64, max(len(p.C), len(q.C)))
	q.Jet(p.Origin, c)
	for n, v := range p.C {
		c[n] += v
	}
	return Polynomial{Origin: p.Origin, C: c}
}
