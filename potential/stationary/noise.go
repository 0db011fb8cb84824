package stationary

import "math"

// noise is the covariance of the rounding errors of (u, w), over the square of
// the wave's scale: uu = E|eps_u|^2, ww = E|eps_w|^2 and uw + i im =
// E eps_u conj(eps_w). It is carried along with the wave: what a rounding in
// one layer does is amplified by the layers after it, and among coupled
// resonances far more than the dependence on the energy shows, since there
// the effects of one well and the next may cancel.
type noise struct{ uu, uw, im, ww float64 }

// eps is the spacing of numbers at 1.
const eps = 0x1p-52

// pass carries the noise over a layer of matrix m exp(growth) and adds its own
// roundings: of rounds units in each product of m with the pair (u, w).
func (n *noise) pass(m *[4]float64, u, w, rounds, fade float64) {
	a, b := m[0]*n.uu+m[1]*n.uw, m[0]*n.uw+m[1]*n.ww
	c, d := m[2]*n.uu+m[3]*n.uw, m[2]*n.uw+m[3]*n.ww
	n.uu = max(0, a*m[0]+b*m[1])
	n.uw = a*m[2] + b*m[3]
	n.ww = max(0, c*m[2]+d*m[3])
	n.im *= fade
	n.add(rounds*(math.Abs(m[0])*u+math.Abs(m[1])*w), rounds*(math.Abs(m[2])*u+math.Abs(m[3])*w))
}

// passLossy is pass for a complex matrix.
func (n *noise) passLossy(m *[4]complex128, u, w, rounds float64) {
	a, b, c, d := m[0], m[1], m[2], m[3]
	h := complex(n.uw, n.im)
	conj := func(z complex128) complex128 { return complex(real(z), -imag(z)) }
	uu := square(a)*n.uu + square(b)*n.ww + 2*real(a*conj(b)*h)
	ww := square(c)*n.uu + square(d)*n.ww + 2*real(c*conj(d)*h)
	h = scaled(a*conj(c), n.uu) + a*conj(d)*h + b*conj(c)*conj(h) + scaled(b*conj(d), n.ww)
	*n = noise{max(0, uu), real(h), imag(h), max(0, ww)}
	size := func(z complex128) float64 { return math.Sqrt(square(z)) }
	n.add(rounds*(size(a)*u+size(b)*w), rounds*(size(c)*u+size(d)*w))
}

// kick carries the noise over a delta, where w loses j u.
func (n *noise) kick(j, u float64) {
	n.ww = max(0, n.ww-2*j*n.uw+j*j*n.uu)
	n.uw -= j * n.uu
	n.add(0, j*u)
}

// add adds roundings of numbers of sizes u and w: evenly spread over a spacing,
// that is a standard deviation of eps/sqrt 12.
func (n *noise) add(u, w float64) {
	n.uu += eps * eps / 12 * u * u
	n.ww += eps * eps / 12 * w * w
}

// scale multiplies the errors by f.
func (n *noise) scale(f float64) {
	f *= f
	n.uu, n.uw, n.im, n.ww = n.uu*f, n.uw*f, n.im*f, n.ww*f
}

// relative is the relative standard deviation of (u - i w/v)/2, whose square
// is given.
func (n *noise) relative(v, square float64) float64 {
	return math.Sqrt((n.uu + n.ww/(v*v)) / (4 * square))
}
