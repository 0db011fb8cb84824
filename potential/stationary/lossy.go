package stationary

import (
	"math"
	"math/cmplx"
)

// lossyLayer is flatLayer in complex arithmetic: for a layer with loss, or at
// a complex energy.
type lossyLayer struct {
	m, d         [4]complex128
	growth       float64
	theta        complex128 // sqrt z, imaginary part >= 0
	mass, length float64
}

// set fills f for complex kinetic energy e = E + i loss - V, mass m and
// thickness d.
func (f *lossyLayer) set(e complex128, m, d float64) {
	z := scaled(e, 2*m*d*d)
	f.mass, f.length = m, d
	f.theta = cmplx.Sqrt(z)
	if imag(f.theta) < 0 {
		f.theta = -f.theta
	}
	var c, s, sz complex128
	c, s, f.growth = cosine(f.theta, z)
	if square(z) > series*series {
		sz = scaled((c-s)*cmplx.Conj(z), 1/(2*square(z)))
	} else {
		sz = entire(z, &seriesOfSz)
	}
	md := m * d
	f.m = [4]complex128{c, scaled(s, -md), scaled(z*s, 1/md), c}
	f.d = [4]complex128{scaled(s, -md*d), scaled(sz, -2*md*md*d), scaled(c+s, d), scaled(s, -md*d)}
}

// scaled is x z.
func scaled(z complex128, x float64) complex128 { return complex(x*real(z), x*imag(z)) }

// cosine returns cos theta and sin theta/theta, theta^2 = z, over
// exp(growth).
func cosine(theta, z complex128) (c, s complex128, growth float64) {
	if square(z) <= series*series {
		return entire(z, &seriesOfC), entire(z, &seriesOfS), 0
	}
	sin, cos := math.Sincos(real(theta))
	growth = imag(theta)
	fade := math.Exp(-2 * growth)
	// exp(-i theta) leads; exp(i theta) is smaller by fade.
	c = complex(cos*(1+fade)/2, -sin*(1-fade)/2)
	s = complex(sin*(1+fade)/2, cos*(1-fade)/2)
	return c, scaled(s*cmplx.Conj(theta), 1/square(theta)), growth
}

// density is the integral of |u|^2 over the layer, over exp(2 growth); u and
// w stand at the right face.
func (f *lossyLayer) density(u, w complex128) float64 {
	if square(f.theta) < 1 {
		return f.sampled(u, w)
	}
	// u = a exp(i theta y) + b exp(-i theta y), y from 0 at the right face to 1.
	t := complex(0, f.mass*f.length/square(f.theta)) * w * cmplx.Conj(f.theta)
	a, b := (u+t)/2, (u-t)/2
	alpha, eta := real(f.theta), imag(f.theta)
	fade := math.Exp(-2 * eta)
	mean := 1.0
	if eta > 0 {
		mean = -math.Expm1(-2*eta) / (2 * eta)
	}
	sin, cos := math.Sincos(alpha)
	if alpha != 0 {
		sin /= alpha
	} else {
		sin = 1
	}
	mixed := a * cmplx.Conj(b) * complex(cos*sin, alpha*sin*sin)
	return f.length * (square(a)*fade*mean + square(b)*mean + 2*real(mixed)*fade)
}

// sampled is density by Gauss-Legendre quadrature, for a layer thinner than a
// radian, where the exponentials of the closed form nearly cancel. Ten
// points are exact to rounding there.
func (f *lossyLayer) sampled(u, w complex128) float64 {
	z := f.theta * f.theta
	fade := math.Exp(-2 * f.growth)
	sum := 0.0
	for i, x := range legendreNodes {
		y := (1 + x) / 2
		theta := f.theta * complex(y, 0)
		c, s, growth := cosine(theta, z*complex(y*y, 0))
		v := (c*u - complex(f.mass*f.length*y, 0)*s*w) * complex(math.Exp(growth), 0)
		sum += legendreWeights[i] * square(v)
	}
	return f.length / 2 * sum * fade
}

// square is |z|^2.
func square(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }

// The power series in z of cos sqrt z, sin sqrt z/sqrt z and the derivative of
// the latter, to rounding for |z| <= 1/4.
var (
	seriesOfC = [8]float64{1, -1.0 / 2, 1.0 / 24, -1.0 / 720, 1.0 / 40320, -1.0 / 3628800, 1.0 / 479001600, -1.0 / 87178291200}
	seriesOfS = [8]float64{1, -1.0 / 6, 1.0 / 120, -1.0 / 5040, 1.0 / 362880, -1.0 / 39916800, 1.0 / 6227020800, -1.0 / 1307674368000}

	seriesOfSz = [8]float64{-1.0 / 6, 2.0 / 120, -3.0 / 5040, 4.0 / 362880, -5.0 / 39916800, 6.0 / 6227020800, -7.0 / 1307674368000, 8.0 / 355687428096000}
)

// entire sums a series by Horner's rule.
func entire(z complex128, c *[8]float64) complex128 {
	sum := complex(c[7], 0)
	for n := 6; n >= 0; n-- {
		sum = sum*z + complex(c[n], 0)
	}
	return sum
}
