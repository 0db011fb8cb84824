package propagate

// condensed is an element with its interior eliminated: the symmetric matrix
// that joins its two faces.
type condensed struct{ ll, lr, rr complex128 }

// condense eliminates the interior of alpha H - beta:
//
//	A_ff - A_fi inv(A_ii) A_if.
func (c *cell) condense(alpha, beta complex128) condensed {
	a, b := c.shift(alpha, beta)
	out, inverse := c.bare(a, b), newResolvent(a, b)
	if c.mirror {
		even := -a * a * c.joined(inverse, 0, c.even)
		odd := -a * a * c.joined(inverse, c.even, len(c.lambda))
		return condensed{out.ll + even + odd, out.lr + even - odd, out.rr + even + odd}
	}
	for j, lambda := range c.lambda {
		out.add(-a*a*inverse.at(lambda), c.couple[0][j], c.couple[1][j])
	}
	return out
}

// joined is the sum over the modes from..to-1 of couple_0j^2/(a lambda_j + b).
func (c *cell) joined(inverse resolvent, from, to int) complex128 {
	couple, total := c.couple[0][from:to], complex(0, 0)
	for j, lambda := range c.lambda[from:to] {
		g, l := inverse.at(lambda), couple[j]
		total += complex(real(g)*l*l, imag(g)*l*l)
	}
	return total
}

// bare is the faces' own part of a*stiff + b*mass.
func (c *cell) bare(a, b complex128) condensed {
	p := c.order
	return condensed{
		ll: a*complex(c.stiff[0][0], 0) + b*complex(c.mass[0], 0),
		lr: a * complex(c.stiff[0][p], 0),
		rr: a*complex(c.stiff[p][p], 0) + b*complex(c.mass[p], 0),
	}
}

// view is a cell as the scattering at one energy sees it: the condensed matrix
// of H - energy and two quadratic forms over the face values. With bilinear,
// -psi^T W psi is the derivative of the condensed matrix with respect to the
// energy; with hermitian, psi^H W psi is the integral of |psi|^2 over the
// element (real axis only).
type view struct{ matrix, bilinear, hermitian condensed }

// view condenses the cell at an energy.
func (c *cell) view(energy complex128) view {
	a, b := c.shift(1, energy)
	faces := condensed{ll: complex(c.mass[0], 0), rr: complex(c.mass[c.order], 0)}
	v, inverse := view{matrix: c.bare(a, b), bilinear: faces, hermitian: faces}, newResolvent(a, b)
	for j, lambda := range c.lambda {
		g := a * inverse.at(lambda)
		l, r := c.couple[0][j], c.couple[1][j]
		v.matrix.add(-a*g, l, r)
		v.bilinear.add(g*g, l, r)
		v.hermitian.add(complex(square(g), 0), l, r)
	}
	v.bilinear.scale(c.mu)
	v.hermitian.scale(c.mu)
	return v
}

// nearPole is how close a real energy may come to an eigenvalue of an
// element's interior, as a part of it. Nearer, where the condensed matrix
// would lose its digits, it is moved to this distance: at the square root of
// the rounding unit the shift costs no more than the rounding it avoids.
const nearPole = 1.5e-8

// resolvent is the function 1/(a lambda + b), kept away from a pole on the
// real axis.
type resolvent struct {
	a, b  complex128
	least float64 // square of the smallest denominator
}

func newResolvent(a, b complex128) resolvent {
	return resolvent{a, b, nearPole * nearPole * square(b)}
}

func (r resolvent) at(lambda float64) complex128 {
	d := complex(real(r.a)*lambda+real(r.b), imag(r.a)*lambda+imag(r.b))
	if square(d) < r.least {
		d += complex(nearPole, 0) * r.b
	}
	return reciprocal(d)
}

// reciprocal is 1/d for values whose squares neither overflow nor vanish.
func reciprocal(d complex128) complex128 {
	s := 1 / square(d)
	return complex(real(d)*s, -imag(d)*s)
}

// add adds f (l, r)(l, r)^T.
func (c *condensed) add(f complex128, l, r float64) {
	re, im := real(f), imag(f)
	c.ll += complex(re*(l*l), im*(l*l))
	c.lr += complex(re*(l*r), im*(l*r))
	c.rr += complex(re*(r*r), im*(r*r))
}

func (c *condensed) scale(f complex128) {
	c.ll *= f
	c.lr *= f
	c.rr *= f
}

// turned is the element seen from the other side.
func (c condensed) turned() condensed { return condensed{ll: c.rr, lr: c.lr, rr: c.ll} }
