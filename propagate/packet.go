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
//
// The values are those of the L2 projection, psi_i = int psi0 phi_i dx / M_i
// with the cardinal functions phi_i, integrated by a rule of twice the order:
// sampling psi0 at the nodes would fold part of it into waves that are slower
// or move the other way.
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
	clear(psi)
	finer := map[int]*refinement{}
	for i := m.real0; i < m.real1; i++ {
		e := m.elements[i]
		c := &m.cells[e.cell]
		if finer[c.order] == nil {
			finer[c.order] = newRefinement(c.rule)
		}
		p.integrate(finer[c.order], m.X[e.first], m.X[e.first+c.order], psi[e.first:])
		for n := 1; n < c.order; n++ {
			psi[e.first+n] /= c.mu * complex(c.mass[n], 0)
		}
	}
	for f := m.real0 + 1; f < m.real1; f++ {
		psi[m.faces[f]] /= m.faceMass[f]
	}
	psi[m.faces[m.real0]], psi[m.faces[m.real1]] = 0, 0
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

// refinement is a rule of twice the order of an element's and the element's
// cardinal functions at its nodes: cardinal[q][i].
type refinement struct {
	*rule
	cardinal [][]float64
}

func newRefinement(r *rule) *refinement {
	fine := &refinement{rule: newRule(2 * r.order)}
	weights := barycentric(r.nodes)
	for _, x := range fine.nodes {
		fine.cardinal = append(fine.cardinal, cardinals(r.nodes, weights, x))
	}
	return fine
}

// cardinals are the values at x of the polynomials that are 1 at one node and
// 0 at the others, by the barycentric formula.
func cardinals(nodes, weights []float64, x float64) []float64 {
	out := make([]float64, len(nodes))
	if k := nodeAt(nodes, x); k >= 0 {
		out[k] = 1
		return out
	}
	total := 0.0
	for i := range out {
		out[i] = weights[i] / (x - nodes[i])
		total += out[i]
	}
	for i := range out {
		out[i] /= total
	}
	return out
}

// integrate adds to psi the integrals of the packet times the cardinal
// functions of the element [from, to].
func (p Packet) integrate(r *refinement, from, to float64, psi []complex128) {
	for q, y := range r.nodes {
		v := p.at(from+(to-from)*y) * complex((to-from)*r.weights[q], 0)
		if v == 0 {
			continue
		}
		for i, c := range r.cardinal[q] {
			psi[i] += v * complex(c, 0)
		}
	}
}

// at is the packet at x, not normalised.
func (p Packet) at(x float64) complex128 {
	d := x - p.Centre
	y := d / p.Length
	return complex(math.Exp(-y*y/4), 0) * cmplx.Exp(complex(0, p.K0*d))
}
