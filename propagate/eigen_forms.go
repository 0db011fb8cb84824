package propagate

import (
	"math"
	"math/cmplx"
)

// product is u^T M v over the whole mesh, without conjugation.
func (m *Mesh) product(u, v wave) complex128 {
	total := complex(0, 0)
	for i, mass := range m.faceMass {
		total += mass * u.face[i] * v.face[i]
	}
	for _, e := range m.elements {
		c := &m.cells[e.cell]
		n := len(c.lambda)
		total += c.mu * dot(u.mode[e.mode:e.mode+n], v.mode[e.mode:e.mode+n])
	}
	return total
}

// overlap is the integral of conj(u) v over the elements from..to-1, all of
// them on the real axis.
func (m *Mesh) overlap(from, to int, u, v wave) complex128 {
	total := complex(0, 0)
	for i := from; i < to; i++ {
		e := &m.elements[i]
		c := &m.cells[e.cell]
		sum := complex(c.mass[0], 0)*cmplx.Conj(u.face[i])*v.face[i] +
			complex(c.mass[c.order], 0)*cmplx.Conj(u.face[i+1])*v.face[i+1]
		for j := e.mode; j < e.mode+len(c.lambda); j++ {
			sum += cmplx.Conj(u.mode[j]) * v.mode[j]
		}
		total += complex(real(c.mu), 0) * sum
	}
	return total
}

// absorption is the absorption form of a layer, the integral over it of
// 2 loss conj(u) v.
func (m *Mesh) absorption(layer int, u, v wave) complex128 {
	total := complex(0, 0)
	for i := m.layerSpan[layer][0]; i < m.layerSpan[layer][1]; i++ {
		if loss := m.cells[m.elements[i].cell].loss; loss != 0 {
			total += complex(2*loss, 0) * m.overlap(i, i+1, u, v)
		}
	}
	return total
}

// rim is a state at a plane: its value, and the residual
// q = (H u - E M u) there of the inner element alone, which stands for
// the derivative of u.
type rim struct{ value, force complex128 }

// flow is the flow form at a plane,
//
//	f(u, v) = -i (conj(u) q_v - v conj(q_u)),
//
// so that 2 Im(conj(psi) q), summed over the states that make up psi, is the
// probability that passes outward per time: the continuity equation of
// exp(-iHt), as outflow is that of a factor of the step.
func (u rim) flow(v rim) complex128 {
	d := cmplx.Conj(u.value)*v.force - v.value*cmplx.Conj(u.force)
	return complex(imag(d), -real(d))
}

// rims are a state's at the left and the right plane.
func (m *Mesh) rims(u wave, energy complex128) (left, right rim) {
	force := func(inner int) (atLeft, atRight complex128) {
		e := m.elements[inner]
		c := &m.cells[e.cell]
		a, b := c.shift(1, energy)
		return action{c, a, b}.faces(u.face[inner], u.face[inner+1], u.mode[e.mode:e.mode+len(c.lambda)])
	}
	left.value, right.value = u.face[m.left], u.face[m.right]
	left.force, _ = force(m.left)
	_, right.force = force(m.right - 1)
	return left, right
}

// residual is the norm of M^-1 (H - E M) u over the nodes between the planes,
// for u of norm 1 there.
func (m *Mesh) residual(u wave, energy complex128) float64 {
	sum := moments{}
	var carry complex128
	for i := m.left; i < m.right; i++ {
		e := m.elements[i]
		c := &m.cells[e.cell]
		a, b := c.shift(1, energy)
		h := action{c, a, b}
		modes := u.mode[e.mode : e.mode+len(c.lambda)]
		h.inside(u.face[i], u.face[i+1], modes, &sum)
		atLeft, atRight := h.faces(u.face[i], u.face[i+1], modes)
		if i > m.left {
			force := carry + atLeft + complex(m.strength[i], 0)*u.face[i]
			sum.add(real(m.faceMass[i]), u.face[i], force/m.faceMass[i])
		}
		carry = atRight
	}
	return math.Sqrt(sum.second)
}
