package stationary

import (
	"math"
)

// wave is the solution at one face, as it is carried from the far face to the
// near one. The pair (psi, psi'/m) is
//
//	(u, w) = exp(log) (er + i ei) (p + i q),   p, q real pairs,
//
// and (du, dw) is its derivative with respect to energy over the same factor.
// flux is Im(conj(u) w) over exp(2 log): p and q span it, pu qw - qu pw.
type wave struct {
	pu, pw, qu, qw float64
	du, dw         complex128
	er, ei         float64
	flux, log      float64
	metric         float64 // |p|^2 = pu^2 + metric pw^2
	open, lossy    bool
	speed          float64 // in the far lead; of a closed one the decay rate over mass

	noise noise

	turning bool
	turn    float64 // arg u through whole turns, if turning
}

// tiny stands for the speed exactly at the threshold of the far lead.
const tiny = 1e-150

// start sets the outgoing wave at the far face, of amplitude 1, or the
// decaying one where the far lead is closed.
//
// Without loss the part of the derivative that comes from the far lead,
// d(speed)/dE = 1/q, diverges at its threshold and is left out here; resolve
// adds it in closed form.
func (w *wave) start(l level, mass, metric float64, lossy bool) {
	*w = wave{pu: 1, er: 1, metric: metric, lossy: lossy, open: l.far >= 0}
	w.speed = max(math.Sqrt(2*math.Abs(l.far)/mass), tiny)
	w.noise.add(0, w.speed)
	if !w.open {
		w.pw = -w.speed
		w.dw = complex(1/(mass*w.speed), 0)
		return
	}
	w.qw, w.flux = w.speed, w.speed
	if lossy && l.far > 0 {
		w.dw = complex(0, 1/(mass*w.speed))
	}
}

// u and w are the pair without the common factor.
func (w *wave) u() complex128 { return complex(w.pu, w.qu) }
func (w *wave) w() complex128 { return complex(w.pw, w.qw) }

// kick crosses a delta from right to left: w jumps by 2 strength u.
func (w *wave) kick(strength float64) {
	j := 2 * strength
	w.pw -= j * w.pu
	w.qw -= j * w.qu
	w.dw -= complex(j, 0) * w.du
	w.noise.kick(j, math.Abs(w.pu)+math.Abs(w.qu))
	w.balance()
}

// apply crosses a layer without loss, of matrix m exp(growth), its derivative
// d exp(growth), in which the wave makes turns half turns and less than one
// more, and rounds units of rounding.
func (w *wave) apply(m, d *[4]float64, growth float64, turns int, rounds float64) {
	pu, pw, qu, qw := w.pu, w.pw, w.qu, w.qw
	fade := 1.0
	if growth != 0 {
		fade = math.Exp(-2 * growth)
	}
	w.noise.pass(m, math.Abs(pu)+math.Abs(qu), math.Abs(pw)+math.Abs(qw), rounds, fade)
	ur, ui, wr, wi := real(w.du), imag(w.du), real(w.dw), imag(w.dw)
	w.du = complex(m[0]*ur+m[1]*wr+d[0]*pu+d[1]*pw, m[0]*ui+m[1]*wi+d[0]*qu+d[1]*qw)
	w.dw = complex(m[2]*ur+m[3]*wr+d[2]*pu+d[3]*pw, m[2]*ui+m[3]*wi+d[2]*qu+d[3]*qw)
	w.pu, w.pw = m[0]*pu+m[1]*pw, m[2]*pu+m[3]*pw
	w.qu, w.qw = m[0]*qu+m[1]*qw, m[2]*qu+m[3]*qw
	w.log += growth
	w.flux *= fade
	if w.turning {
		w.follow(complex(pu, qu), turns)
	}
	w.balance()
}

// applyLossy crosses a layer with loss, in which gain is added to the flux
// over exp(2 log) after the step.
func (w *wave) applyLossy(m, d *[4]complex128, growth, gain, rounds float64) {
	u, v := w.u(), w.w()
	w.noise.passLossy(m, math.Abs(w.pu)+math.Abs(w.qu), math.Abs(w.pw)+math.Abs(w.qw), rounds)
	w.du, w.dw = m[0]*w.du+m[1]*w.dw+d[0]*u+d[1]*v, m[2]*w.du+m[3]*w.dw+d[2]*u+d[3]*v
	nu, nw := m[0]*u+m[1]*v, m[2]*u+m[3]*v
	w.pu, w.qu, w.pw, w.qw = real(nu), imag(nu), real(nw), imag(nw)
	w.log += growth
	w.flux = w.flux*math.Exp(-2*growth) + gain
	if w.turning {
		w.follow(u, 0)
	}
	w.balance()
}

// follow adds the phase that u gained since it was before. Going left it
// falls, by turns half turns and less than one more; in a closed lead it
// falls by a half turn at every node.
func (w *wave) follow(before complex128, turns int) {
	now := w.u()
	if turns%2 == 1 {
		now = -now
	}
	dot := real(before)*real(now) + imag(before)*imag(now)
	cross := real(before)*imag(now) - imag(before)*real(now)
	angle := math.Atan2(cross, dot)
	if angle > math.Pi/2 {
		angle -= 2 * math.Pi
	}
	w.turn += angle - float64(turns)*math.Pi
}

// balance keeps the pair in range, and p and q apart where q is the smaller
// by so much that rounding of p would harm it.
func (w *wave) balance() {
	pp := w.pu*w.pu + w.metric*w.pw*w.pw
	if !(pp > 1e-40 && pp < 1e40) {
		w.rescale()
	}
	const apart = 0.01
	if w.flux*w.flux*w.metric < apart*pp*pp {
		w.settle()
	}
}

// rescale brings the pair near 1 by a power of two, which rounds nothing.
func (w *wave) rescale() {
	size := max(math.Abs(w.pu), math.Abs(w.pw), math.Abs(w.qu), math.Abs(w.qw))
	if size == 0 || math.IsNaN(size) || math.IsInf(size, 0) {
		return
	}
	_, n := math.Frexp(size)
	f := math.Ldexp(1, -n)
	w.pu, w.pw, w.qu, w.qw = w.pu*f, w.pw*f, w.qu*f, w.qw*f
	w.du, w.dw = w.du*complex(f, 0), w.dw*complex(f, 0)
	w.flux = w.flux * f * f
	w.noise.scale(f)
	w.log += float64(n) * math.Ln2
}

// settle moves the phase so that p and q become nearly orthogonal with p the
// longer, and rebuilds q from the flux.
//
// With q = beta p + o, o orthogonal to p, and rho^2 = 1 + beta^2,
// p + i q = (1 + i beta)/rho (rho p + beta/rho o + i o/rho) exactly, whatever
// beta; and o follows from p and the flux alone.
func (w *wave) settle() {
	pp := w.pu*w.pu + w.metric*w.pw*w.pw
	qq := w.qu*w.qu + w.metric*w.qw*w.qw
	if qq > pp {
		w.pu, w.pw, w.qu, w.qw = w.qu, w.qw, -w.pu, -w.pw
		w.er, w.ei = -w.ei, w.er
		w.du, w.dw = complex(imag(w.du), -real(w.du)), complex(imag(w.dw), -real(w.dw))
		pp = qq
	}
	if pp == 0 {
		return
	}
	inverse := 1 / pp
	beta := (w.pu*w.qu + w.metric*w.pw*w.qw) * inverse
	rho := math.Sqrt(1 + beta*beta)
	f := w.flux * inverse
	ou, ow := -f*w.metric*w.pw, f*w.pu
	c, s := 1/rho, beta/rho
	w.pu, w.pw = rho*w.pu+s*ou, rho*w.pw+s*ow
	w.qu, w.qw = c*ou, c*ow
	w.er, w.ei = c*w.er-s*w.ei, s*w.er+c*w.ei
	w.du, w.dw = turned(w.du, c, s), turned(w.dw, c, s)
}

// turned is z (c - i s).
func turned(z complex128, c, s float64) complex128 {
	return complex(c*real(z)+s*imag(z), c*imag(z)-s*real(z))
}
