package propagate

// cell is what equal elements share. For real shifts alpha, beta the element's
// matrix is
//
//	A = alpha kappa stiff + mu (alpha u - beta) mass
//
// with the matrices of its pencil: alpha H - beta on this element. kappa =
// 1/(m h s) and mu = h s, s the complex scale of an edge.
type cell struct {
	*pencil
	kappa, mu, u complex128
	loss         float64
}

// flatCell is the cell of an element of (complex) length h on which height,
// mass and loss are constant. uniform is the uniform pencil of its order.
func flatCell(uniform *pencil, h complex128, height, mass, loss float64) cell {
	return cell{
		pencil: uniform, kappa: 1 / (complex(mass, 0) * h), mu: h,
		u: complex(height, -loss), loss: loss,
	}
}

// shift returns the factors a, b with which the cell's matrix for
// alpha H - beta is a*stiff + b*mass.
func (c *cell) shift(alpha, beta complex128) (a, b complex128) {
	return alpha * c.kappa, c.mu * (alpha*c.u - beta)
}

// norm is the integral of |psi|^2 over the element (real axis only), from its
// values at the faces and the amplitudes of its modes.
func (c *cell) norm(left, right complex128, modes []complex128) float64 {
	total := c.mass[0]*square(left) + c.mass[c.order]*square(right)
	for _, v := range modes {
		total += square(v)
	}
	return total * real(c.mu)
}

func square(v complex128) float64 { return real(v)*real(v) + imag(v)*imag(v) }
