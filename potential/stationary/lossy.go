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
	z := complex(2*m*d*d, 0) * e
	f.mass, f.length = m, d
	f.theta = cmplx.Sqrt(z)
	if imag(f.theta) < 0 {
		f.theta = -f.theta
	}
	var c, s, sz complex128
	c, s, f.growth = cosine(f.theta, z)
	if cmplx.Abs(z) > series {
		sz = (c - s) / (2 * z)
	} else {
		sz = entireSz(z)
	}
	md := complex(m*d, 0)
	dd := complex(d, 0)
	f.m = [4]complex128{c, -md * s, z / md * s, c}
	f.d = [4]complex128{-md * dd * s, -2 * md * md * dd * sz, dd * (c + s), -md * dd * s}
}

// cosine returns cos theta and sin theta/theta, theta^2 = z, over
// exp(growth).
func cosine(theta, z complex128) (c, s complex128, growth float64) {
	if cmplx.Abs(z) <= series {
		return entireC(z), entireS(z), 0
	}
	sin, cos := math.Sincos(real(theta))
	growth = imag(theta)
	fade := math.Exp(-2 * growth)
	// exp(-i theta) leads; exp(i theta) is smaller by fade.
	c = complex(cos*(1+fade)/2, -sin*(1-fade)/2)
	s = complex(sin*(1+fade)/2, cos*(1-fade)/2) / theta
	return c, s, growth
}

// density is the integral of |u|^2 over the layer, over exp(2 growth); u and
// w stand at the right face.
func (f *lossyLayer) density(u, w complex128) float64 {
	if cmplx.Abs(f.theta) < 1 {
		return f.sampled(u, w)
	}
	// u = a exp(i theta y) + b exp(-i theta y), y from 0 at the right face to 1.
	t := complex(0, f.mass*f.length) * w / f.theta
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

// entireC, entireS and entireSz are seriesC, seriesS and seriesSz for a
// complex argument.
func entireC(z complex128) complex128 {
	return 1 - z/2*(1-z/12*(1-z/30*(1-z/56*(1-z/90*(1-z/132*(1-z/182))))))
}

func entireS(z complex128) complex128 {
	return 1 - z/6*(1-z/20*(1-z/42*(1-z/72*(1-z/110*(1-z/156*(1-z/210))))))
}

func entireSz(z complex128) complex128 {
	return -1.0/6 + z*(2.0/120-z*(3.0/5040-z*(4.0/362880-z*(5.0/39916800-z*(6.0/6227020800-z*7.0/1307674368000)))))
}
