package stationary

import "math"

// flatLayer is the closed form of a flat layer without loss: the matrix that
// carries (u, w) from its right face to its left face, and its derivative
// with respect to energy, both over exp(growth).
//
// With z = 2 m (E - V) d^2 and the entire functions C = cos sqrt z,
// S = sin sqrt z/sqrt z, the matrix is ((C, -m d S), (z S/(m d), C)).
type flatLayer struct {
	m, d       [4]float64
	growth     float64
	turns      int     // whole half waves
	rounds     float64 // units of rounding: the root of z carries its own size of them
	rate       float64 // kappa/m of a barrier, else 0
	length     float64
	cc, cs, ss float64 // integrals of the products of the two basis solutions
	fade       float64 // exp(-2 growth)
}

// series says below which |z| power series stand for the closed forms.
const series = 0.25

// set fills f for kinetic energy e = E - V, mass m and thickness d.
func (f *flatLayer) set(e, m, d float64) {
	z := 2 * m * e * d * d
	var c, s, sz float64
	f.length, f.fade, f.rounds = d, 1, 1
	switch {
	case z > series:
		theta := math.Sqrt(z)
		sine, cosine := math.Sincos(theta)
		c, s = cosine, sine/theta
		sz = (c - s) / (2 * z)
		f.turns, f.rounds = int(theta/math.Pi), 1+theta
		f.products(c, s, (1-c*s)/(2*z), m, d)
	case z < -series:
		y := math.Sqrt(-z)
		f.fade = math.Exp(-2 * y)
		c, s = (1+f.fade)/2, (1-f.fade)/(2*y)
		sz = (c - s) / (2 * z)
		f.growth, f.rate, f.rounds = y, y/(m*d), 1+y
	default:
		c, s, sz = seriesC(z), seriesS(z), seriesSz(z)
		f.products(c, s, seriesG(z), m, d)
	}
	md := m * d
	f.m = [4]float64{c, -md * s, z / md * s, c}
	f.d = [4]float64{-md * d * s, -2 * md * md * d * sz, d * (c + s), -md * d * s}
}

// products fills the integrals of c^2, -c s, s^2 over the layer, c and s the
// solutions that start as (1, 0) and (0, 1) at the right face; g is
// (1 - C S)/(2 z).
func (f *flatLayer) products(c, s, g, m, d float64) {
	f.cc = d * (1 + c*s) / 2
	f.cs = -m * d * d * s * s / 2
	f.ss = m * m * d * d * d * g
}

// density is the integral of |u|^2 over the layer, over exp(2 log) after the
// step; w stands at the right face.
func (f *flatLayer) density(w *wave) float64 {
	if f.rate == 0 {
		return f.cc*(w.pu*w.pu+w.qu*w.qu) + 2*f.cs*(w.pu*w.pw+w.qu*w.qw) + f.ss*(w.pw*w.pw+w.qw*w.qw)
	}
	return f.decay(w.pu, w.pw) + f.decay(w.qu, w.qw)
}

// decay is the integral of u^2 in a barrier, u = A exp(-kappa x) + B exp(kappa x)
// with x from the right face to the left: written so that it keeps its
// accuracy where B is small, on a resonance.
func (f *flatLayer) decay(u, w float64) float64 {
	a, b := (u+w/f.rate)/2, (u-w/f.rate)/2
	half := f.length * (1 - f.fade) / (2 * f.growth)
	return half*(a*a*f.fade+b*b) + 2*a*b*f.length*f.fade
}

// seriesC is cos sqrt z for small |z|.
func seriesC(z float64) float64 {
	return 1 - z/2*(1-z/12*(1-z/30*(1-z/56*(1-z/90*(1-z/132*(1-z/182))))))
}

// seriesS is sin sqrt z/sqrt z for small |z|.
func seriesS(z float64) float64 {
	return 1 - z/6*(1-z/20*(1-z/42*(1-z/72*(1-z/110*(1-z/156*(1-z/210))))))
}

// seriesSz is the derivative of sin sqrt z/sqrt z, (C - S)/(2 z), for small
// |z|.
func seriesSz(z float64) float64 {
	return -1.0/6 + z*(2.0/120-z*(3.0/5040-z*(4.0/362880-z*(5.0/39916800-z*(6.0/6227020800-z*7.0/1307674368000)))))
}

// seriesG is (1 - C S)/(2 z) = (1 - sin(2 sqrt z)/(2 sqrt z))/(2 z) for small
// |z|: the sum over n of 2 (-4 z)^n/(2 n + 3)!.
func seriesG(z float64) float64 {
	y := 4 * z
	return (1 - y/20*(1-y/42*(1-y/72*(1-y/110*(1-y/156*(1-y/210*(1-y/272*(1-y/342)))))))) / 3
}
