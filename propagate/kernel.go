package propagate

// kernel is one factor of a time step on one cell, A = -i dt (H - E0) - p. In
// the amplitudes of the modes A_ii is diagonal, so that eliminating the
// interior (static condensation) and finishing it afterwards cost a few
// operations a node, with no dense matrix.
//
// With g_j = 1/(a lambda_j + b) and the couplings l_j, r_j of mode j to the
// faces, the factor 1 + weight z/(z - p) adds to amplitude c_j
//
//	turn_j c_j - left_j x_left - right_j x_right,
//	turn_j = weight alpha (kappa lambda_j + mu (u - E0)) g_j,
//	left_j = a g_j l_j,  right_j = a g_j r_j,  x = weight p chi at the faces.
//
// What is added is small where E dt is small, so that the rounding of turn_j,
// the same in every step, does not add up.
type kernel struct {
	turn        []complex128
	left, right []complex128 // right is nil where the mirror symmetry is used
	even        int          // modes before this one are even
	mu          complex128
	faces       condensed
	massLeft    complex128
	massRight   complex128
	lossy       *lossy
}

// lossy is what the kernel of an absorbing cell needs besides.
type lossy struct {
	own    []complex128 // mu g_j
	absorb float64      // 4 Re(p) dt loss: probability absorbed per norm of chi
}

// newKernel makes the kernel of the factor on a cell. Without mirror the element is
// treated as if it had no symmetry, which costs half as much again.
func newKernel(c *cell, p pole, mirror bool) kernel {
	n := len(c.lambda)
	k := kernel{
		turn: make([]complex128, n), left: make([]complex128, n), even: c.even,
		mu: c.mu, faces: c.condense(p.alpha, p.beta()),
		massLeft:  c.mu * complex(c.mass[0], 0),
		massRight: c.mu * complex(c.mass[c.order], 0),
	}
	if !mirror || !c.mirror {
		k.right = make([]complex128, n)
	}
	if c.loss != 0 {
		k.lossy = &lossy{own: make([]complex128, n), absorb: 4 * real(p.at) * c.loss * -imag(p.alpha)}
	}
	a, b := c.shift(p.alpha, p.beta())
	_, own := c.shift(p.alpha, p.alpha*complex(p.origin, 0)) // b without the pole
	for j, lambda := range c.lambda {
		g := reciprocal(a*complex(lambda, 0) + b)
		k.turn[j] = p.weight() * (a*complex(lambda, 0) + own) * g
		k.left[j] = a * g * complex(c.couple[0][j], 0)
		if k.right != nil {
			k.right[j] = a * g * complex(c.couple[1][j], 0)
		}
		if k.lossy != nil {
			k.lossy.own[j] = c.mu * g
		}
	}
	return k
}

// gather returns what the interior passes to the faces' equations,
// A_fi inv(A_ii) M_i psi_i.
func (k *kernel) gather(c []complex128) (left, right complex128) {
	if k.right != nil {
		return k.mu * dot(k.left, c), k.mu * dot(k.right, c)
	}
	even := k.mu * dot(k.left[:k.even], c[:k.even])
	odd := k.mu * dot(k.left[k.even:], c[k.even:])
	return even + odd, even - odd
}

// dot is sum a_j c_j.
func dot(a, c []complex128) complex128 {
	c = c[:len(a)]
	var re, im float64
	for j, v := range a {
		re += real(v)*real(c[j]) - imag(v)*imag(c[j])
		im += real(v)*imag(c[j]) + imag(v)*real(c[j])
	}
	return complex(re, im)
}

// advance applies the factor to the amplitudes; left and right are x at the
// faces.
func (k *kernel) advance(c []complex128, left, right complex128) {
	if k.right != nil {
		for j, v := range c {
			c[j] = v + (k.turn[j]*v - k.left[j]*left - k.right[j]*right)
		}
		return
	}
	shear(c[:k.even], k.turn[:k.even], k.left[:k.even], left+right)
	shear(c[k.even:], k.turn[k.even:], k.left[k.even:], left-right)
}

// shear adds t_j c_j - d_j x to c_j.
func shear(c, t, d []complex128, x complex128) {
	t, d = t[:len(c)], d[:len(c)]
	xr, xi := real(x), imag(x)
	for j, v := range c {
		tr, ti, dr, di := real(t[j]), imag(t[j]), real(d[j]), imag(d[j])
		c[j] = complex(
			real(v)+(tr*real(v)-ti*imag(v)-(dr*xr-di*xi)),
			imag(v)+(tr*imag(v)+ti*real(v)-(dr*xi+di*xr)),
		)
	}
}

// absorbed is the probability that an absorbing cell takes in this factor, by
// the exact continuity equation: 4 Re(p) dt loss times the norm of chi, given
// on the faces. c are the amplitudes before the factor.
func (k *kernel) absorbed(cell *cell, c []complex128, left, right complex128) float64 {
	total := cell.mass[0]*square(left) + cell.mass[cell.order]*square(right)
	for j, v := range c {
		r := k.left[j]
		switch {
		case k.right != nil:
			r = k.right[j]
		case j >= k.even:
			r = -r
		}
		total += square(k.lossy.own[j]*v - k.left[j]*left - r*right)
	}
	return k.lossy.absorb * real(k.mu) * total
}
