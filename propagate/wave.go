package propagate

// wave is a wave function on a mesh, as the steps use it: its values on the
// faces, and for the inside of each element the amplitudes of the element's
// modes (see pencil). The two share one slice.
type wave struct{ all, face, mode []complex128 }

func newWave(m *Mesh) wave {
	n := len(m.faces)
	all := make([]complex128, m.Nodes())
	return wave{all: all, face: all[:n:n], mode: all[n:]}
}

// project writes the wave with the given values on the nodes.
func (m *Mesh) project(psi []complex128, w wave) {
	for i, at := range m.faces {
		w.face[i] = psi[at]
	}
	for _, e := range m.elements {
		c := &m.cells[e.cell]
		n := len(c.lambda)
		c.amplitudes(psi[e.first+1:e.first+1+n], w.mode[e.mode:e.mode+n])
	}
}

// expand writes the values of a wave on the nodes.
func (m *Mesh) expand(w wave, psi []complex128) {
	for i, at := range m.faces {
		psi[at] = w.face[i]
	}
	for _, e := range m.elements {
		c := &m.cells[e.cell]
		n := len(c.lambda)
		c.values(w.mode[e.mode:e.mode+n], psi[e.first+1:e.first+1+n])
	}
}

// norm is the integral of |psi|^2 over the elements from..to-1, all of them on
// the real axis.
func (m *Mesh) norm(from, to int, w wave) float64 {
	total := 0.0
	for i := from; i < to; i++ {
		e := &m.elements[i]
		c := &m.cells[e.cell]
		total += c.norm(w.face[i], w.face[i+1], w.mode[e.mode:e.mode+len(c.lambda)])
	}
	return total
}
