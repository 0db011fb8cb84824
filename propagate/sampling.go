package propagate

// SamplingError is the probability of what the mesh makes of the packet beyond
// the packet itself, the integral of |interpolant - psi0|^2 over the integral
// of |psi0|^2, by a rule of twice the order. It starts out as waves of the
// grid, at energies far above the packet's.
func (p Packet) SamplingError(m *Mesh) float64 {
	finer := map[int]*refinement{}
	wrong, whole := 0.0, 0.0
	for i := m.real0; i < m.real1; i++ {
		e := m.elements[i]
		r := m.cells[e.cell].rule
		if finer[r.order] == nil {
			finer[r.order] = newRefinement(r)
		}
		dw, dv := p.interpolationError(finer[r.order], m.X[e.first:e.first+r.order+1])
		wrong += dw
		whole += dv
	}
	return wrong / whole
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

// interpolationError returns the integrals of |interpolant - psi0|^2 and of
// |psi0|^2 over the element with the given nodes.
func (p Packet) interpolationError(r *refinement, x []float64) (wrong, whole float64) {
	from, length := x[0], x[len(x)-1]-x[0]
	nodal := make([]complex128, len(x))
	for i := range x {
		nodal[i] = p.at(x[i])
	}
	for q, y := range r.nodes {
		v := p.at(from + length*y)
		d := -v
		for i, c := range r.cardinal[q] {
			d += nodal[i] * complex(c, 0)
		}
		wrong += length * r.weights[q] * square(d)
		whole += length * r.weights[q] * square(v)
	}
	return wrong, whole
}
