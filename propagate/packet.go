package propagate

import (
	"errors"
	"math"
	"math/cmplx"
)

// Packet is the Gaussian psi0 ~ exp(-(x-Centre)^2/(4 Length^2) + i K0 x).
// Length is the standard deviation of |psi0|^2; K0 is negative for a packet
// that moves to the left. Its phase is zero at the centre.
type Packet struct {
	Centre, Length, K0 float64
}

// Fill writes the packet on the nodes of the mesh (len(psi) = m.Nodes()), zero
// inside the edges and at their faces, scaled so that the mesh's own norm of
// it is 1. It is an error if no node lies inside the packet.
func (p Packet) Fill(m *Mesh, psi []complex128) error {
	w := newWave(m)
	if err := p.fill(m, w, psi); err != nil {
		return err
	}
	m.expand(w, psi)
	return nil
}

// fill is Fill in amplitudes; psi is scratch.
func (p Packet) fill(m *Mesh, w wave, psi []complex128) error {
	from, to := m.RealNodes()
	clear(psi)
	for i := from + 1; i < to-1; i++ {
		psi[i] = p.at(m.X[i])
	}
	m.project(psi, w)
	norm := m.norm(m.real0, m.real1, w)
	if !(norm > 0) {
		return errors.New("propagate: no node of the grid lies inside the packet")
	}
	scale := complex(1/math.Sqrt(norm), 0)
	for i := range w.all {
		w.all[i] *= scale
	}
	return nil
}

// at is the packet at x, not normalised.
func (p Packet) at(x float64) complex128 {
	d := x - p.Centre
	y := d / p.Length
	return complex(math.Exp(-y*y/4), 0) * cmplx.Exp(complex(0, p.K0*d))
}
