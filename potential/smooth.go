package potential

import "math"

// Logistic is the profile Low + (High-Low)/(1+exp(-(x-Centre)/Width)): the
// smooth step. A negative Width turns it round.
type Logistic struct {
	Low, High     float64
	Centre, Width float64
}

// At returns the value at x.
func (p Logistic) At(x float64) float64 {
	return p.Low + (p.High-p.Low)*sigmoid((x-p.Centre)/p.Width)
}

// Jet fills c from s' = s(1-s)/Width.
func (p Logistic) Jet(x float64, c []float64) {
	sigmoidJet((x-p.Centre)/p.Width, 1/p.Width, c)
	for n := range c {
		c[n] *= p.High - p.Low
	}
	c[0] += p.Low
}

// Degree is -1.
func (p Logistic) Degree() int { return -1 }

// Scale is the distance to the poles at Centre +- i pi Width.
func (p Logistic) Scale(x float64) float64 { return math.Hypot(x-p.Centre, math.Pi*p.Width) }

// Range is exact: the profile is monotone.
func (p Logistic) Range(a, b float64) (lo, hi float64) {
	va, vb := p.At(a), p.At(b)
	return min(va, vb), max(va, vb)
}

// Mirror reflects about sum/2.
func (p Logistic) Mirror(sum float64) Profile {
	return Logistic{p.Low, p.High, sum - p.Centre, -p.Width}
}

// Sech2 is the profile Height/cosh^2((x-Centre)/Width) (G. Poeschl and
// E. Teller, Z. Phys. 83, 143 (1933)).
type Sech2 struct{ Height, Centre, Width float64 }

// At returns the value at x.
func (p Sech2) At(x float64) float64 {
	s := sigmoid(2 * (x - p.Centre) / p.Width)
	r := sigmoid(-2 * (x - p.Centre) / p.Width)
	return 4 * p.Height * s * r
}

// Jet fills c from 1/cosh^2 y = 4 s(1-s) = 2 ds/dy, s the logistic function
// of 2y.
func (p Sech2) Jet(x float64, c []float64) {
	s := make([]float64, len(c)+1)
	sigmoidJet(2*(x-p.Centre)/p.Width, 2/p.Width, s)
	for n := range c {
		c[n] = 2 * p.Height * p.Width * float64(n+1) * s[n+1]
	}
}

// Degree is -1.
func (p Sech2) Degree() int { return -1 }

// Scale is the distance to the poles at Centre +- i pi Width/2.
func (p Sech2) Scale(x float64) float64 { return math.Hypot(x-p.Centre, math.Pi*p.Width/2) }

// Range is exact.
func (p Sech2) Range(a, b float64) (lo, hi float64) { return hump(p, p.Centre, a, b) }

// Mirror reflects about sum/2.
func (p Sech2) Mirror(sum float64) Profile { return Sech2{p.Height, sum - p.Centre, p.Width} }

// Gauss is the profile Height exp(-(x-Centre)^2/(2 Width^2)).
type Gauss struct{ Height, Centre, Width float64 }

// At returns the value at x.
func (p Gauss) At(x float64) float64 {
	y := (x - p.Centre) / p.Width
	return p.Height * math.Exp(-y*y/2)
}

// Jet fills c from f' = -(x-Centre) f/Width^2.
func (p Gauss) Jet(x float64, c []float64) {
	d, w2, before := x-p.Centre, p.Width*p.Width, 0.0
	c[0] = p.At(x)
	for n := 1; n < len(c); n++ {
		c[n] = -(d*c[n-1] + before) / (w2 * float64(n))
		before = c[n-1]
	}
}

// Degree is -1.
func (p Gauss) Degree() int { return -1 }

// Scale is Width: the function is entire, but grows fast off the axis.
func (p Gauss) Scale(float64) float64 { return p.Width }

// Range is exact.
func (p Gauss) Range(a, b float64) (lo, hi float64) { return hump(p, p.Centre, a, b) }

// Mirror reflects about sum/2.
func (p Gauss) Mirror(sum float64) Profile { return Gauss{p.Height, sum - p.Centre, p.Width} }

// Sum is the sum of two profiles: a shape under bias.
type Sum struct{ A, B Profile }

// At returns the value at x.
func (p Sum) At(x float64) float64 { return p.A.At(x) + p.B.At(x) }

// Jet adds the two jets.
func (p Sum) Jet(x float64, c []float64) {
	other := make([]float64, len(c))
	p.A.Jet(x, c)
	p.B.Jet(x, other)
	for n, v := range other {
		c[n] += v
	}
}

// Degree is the larger degree, or -1.
func (p Sum) Degree() int {
	if p.A.Degree() < 0 || p.B.Degree() < 0 {
		return -1
	}
	return max(p.A.Degree(), p.B.Degree())
}

// Scale is the shorter of the two.
func (p Sum) Scale(x float64) float64 { return min(p.A.Scale(x), p.B.Scale(x)) }

// Range adds the bounds of the parts.
func (p Sum) Range(a, b float64) (lo, hi float64) {
	la, ha := p.A.Range(a, b)
	lb, hb := p.B.Range(a, b)
	return la + lb, ha + hb
}

// Mirror mirrors both parts.
func (p Sum) Mirror(sum float64) Profile { return Sum{p.A.Mirror(sum), p.B.Mirror(sum)} }

// hump bounds a profile that is monotone on either side of its centre.
func hump(p Profile, centre, a, b float64) (lo, hi float64) {
	va, vb := p.At(a), p.At(b)
	lo, hi = min(va, vb), max(va, vb)
	if a < centre && centre < b {
		vc := p.At(centre)
		lo, hi = min(lo, vc), max(hi, vc)
	}
	return lo, hi
}

// sigmoid is 1/(1+exp(-y)) without overflow.
func sigmoid(y float64) float64 {
	if y >= 0 {
		return 1 / (1 + math.Exp(-y))
	}
	e := math.Exp(y)
	return e / (1 + e)
}

// sigmoidJet fills s with the Taylor coefficients in h of sigmoid(y + rate h).
// s(1-s) is carried as s*r with r = 1-s kept apart, so that neither tail
// cancels.
func sigmoidJet(y, rate float64, s []float64) {
	if len(s) == 0 {
		return
	}
	r := make([]float64, len(s))
	s[0], r[0] = sigmoid(y), sigmoid(-y)
	for n := 0; n+1 < len(s); n++ {
		product := 0.0
		for k := 0; k <= n; k++ {
			product += s[k] * r[n-k]
		}
		s[n+1] = rate * product / float64(n+1)
		r[n+1] = -s[n+1]
	}
}
