package propagate

// condensed is an element with its interior eliminated: the symmetric matrix
// that joins its two faces.
type condensed struct{ ll, lr, rr complex128 }

// shift returns the factors a, b with which the cell's matrix for
// alpha H - beta is a*stiff + b*mass.
func (c *cell) shift(alpha, beta complex128) (a, b complex128) {
	return alpha * c.kappa, c.mu * (alpha*c.u - beta)
}

// condense eliminates the interior of alpha H - beta.
func (c *cell) condense(alpha, beta complex128) condensed {
	a, b := c.shift(alpha, beta)
	p := c.order
	out := condensed{
		ll: a*complex(c.stiff[0][0], 0) + b*complex(c.mass[0], 0),
		lr: a * complex(c.stiff[0][p], 0),
		rr: a*complex(c.stiff[p][p], 0) + b*complex(c.mass[p], 0),
	}
	for j, lambda := range c.lambda {
		f := a * a / (a*complex(lambda, 0) + b)
		l, r := c.couple[0][j], c.couple[1][j]
		out.ll -= f * complex(l*l, 0)
		out.lr -= f * complex(l*r, 0)
		out.rr -= f * complex(r*r, 0)
	}
	return out
}

// weigh returns two quadratic forms of the element over its face values, for
// H - energy: bilinear, with which -psi^T W psi is the derivative of the
// condensed matrix with respect to energy, and hermitian, with which
// psi^H W psi is the integral of |psi|^2 over the element (real axis only).
func (c *cell) weigh(energy complex128) (bilinear condensed, hermitian condensed) {
	a, b := c.shift(1, energy)
	p := c.order
	bilinear = condensed{ll: complex(c.mass[0], 0), rr: complex(c.mass[p], 0)}
	hermitian = bilinear
	for j, lambda := range c.lambda {
		g := a / (a*complex(lambda, 0) + b)
		square, norm := g*g, complex(real(g)*real(g)+imag(g)*imag(g), 0)
		l, r := c.couple[0][j], c.couple[1][j]
		for _, t := range []struct {
			to *condensed
			f  complex128
		}{{&bilinear, square}, {&hermitian, norm}} {
			t.to.ll += t.f * complex(l*l, 0)
			t.to.lr += t.f * complex(l*r, 0)
			t.to.rr += t.f * complex(r*r, 0)
		}
	}
	bilinear.scale(c.mu)
	hermitian.scale(c.mu)
	return bilinear, hermitian
}

func (c *condensed) scale(f complex128) {
	c.ll *= f
	c.lr *= f
	c.rr *= f
}
