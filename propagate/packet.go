package propagate

import (
	"fmt"
	"math"
	"math/cmplx"
)

// Packet is the Gaussian psi0 ~ exp(-(x-Centre)^2/(4 Length^2) + i K0 x).
// K0 is negative for a packet that moves to the left.
type Packet struct {
	Centre, Length, K0 float64
}

// Fill writes the packet on the nodes of the mesh, zero inside the edges and
// at their faces, scaled so that the mesh's own norm of it is 1.
func (p Packet) Fill(m *Mesh, psi []complex128) error {
	from, to := m.RealNodes()
	clear(psi)
	for i := from + 1; i < to-1; i++ {
		d := (m.X[i] - p.Centre) / p.Length
		psi[i] = complex(math.Exp(-d*d/4), 0) * cmplx.Exp(complex(0, p.K0*(m.X[i]-p.Centre)))
	}
	norm := 0.0
	for i := m.real0; i < m.real1; i++ {
		norm += m.elementNorm(i, psi)
	}
	if !(norm > 0) {
		return fmt.Errorf("propagate: no node of the grid lies inside the packet")
	}
	scale := complex(1/math.Sqrt(norm), 0)
	for i := from; i < to; i++ {
		psi[i] *= scale
	}
	return nil
}

// elementNorm is the integral of |psi|^2 over one element of the real axis.
func (m *Mesh) elementNorm(i int, psi []complex128) float64 {
	e := m.elements[i]
	c := &m.cells[e.cell]
	sum := 0.0
	for n, v := range psi[e.first : e.first+c.order+1] {
		sum += c.mass[n] * (real(v)*real(v) + imag(v)*imag(v))
	}
	return sum * real(c.mu)
}

// norm sums elementNorm over a range of elements.
func (m *Mesh) norm(from, to int, psi []complex128) float64 {
	sum := 0.0
	for i := from; i < to; i++ {
		sum += m.elementNorm(i, psi)
	}
	return sum
}
