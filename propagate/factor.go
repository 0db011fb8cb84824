package propagate

// factor is one factor 1 + 2 Re(p)/(z - p) of a time step, z = -i dt (H - E0),
// ready to be applied: chi solves
//
//	A chi = M psi,  A = -i dt (H - E0 M) - p M,
//
// and psi becomes psi + 2 Re(p) chi. The faces are left with a symmetric
// tridiagonal system whose elimination is made once.
type factor struct {
	mesh    *Mesh
	kernels []kernel // one for each cell of the mesh
	faces   tridiagonal
	gain    float64 // 2 Re(p)
}

// newFactor prepares the factor of pole p; mirror says whether kernels may use
// the mirror symmetry of their cells.
func newFactor(m *Mesh, dt, origin float64, pole complex128, mirror bool) *factor {
	alpha := complex(0, -dt)
	beta := pole + alpha*complex(origin, 0)
	f := &factor{mesh: m, kernels: make([]kernel, len(m.cells)), gain: 2 * real(pole)}
	for i := range m.cells {
		f.kernels[i] = newKernel(&m.cells[i], alpha, beta, f.gain, mirror)
	}
	f.eliminate(alpha)
	return f
}

// eliminate factors the tridiagonal system of the faces between the walls at
// the two ends, which hold psi = 0.
func (f *factor) eliminate(alpha complex128) {
	m := f.mesh
	diag, off := make([]complex128, len(m.faces)), make([]complex128, len(m.elements))
	for i, s := range m.strength {
		diag[i] = alpha * complex(s, 0)
	}
	for i, e := range m.elements {
		c := &f.kernels[e.cell].faces
		diag[i] += c.ll
		diag[i+1] += c.rr
		off[i] = c.lr
	}
	last := len(diag) - 1
	f.faces = newTridiagonal(last - 1)
	f.faces.factor(diag[1:last], off[1:last])
}

// solve finds chi on the faces.
func (f *factor) solve(psi wave, chi []complex128) {
	m := f.mesh
	for i, v := range psi.face {
		chi[i] = m.faceMass[i] * v
	}
	for i := range m.elements {
		e := &m.elements[i]
		k := &f.kernels[e.cell]
		left, right := k.gather(psi.mode[e.mode : e.mode+len(k.turn)])
		chi[i] -= left
		chi[i+1] -= right
	}
	last := len(chi) - 1
	chi[0], chi[last] = 0, 0
	f.faces.solve(chi[1:last])
}

// update applies the factor to psi, given chi on the faces, and adds what each
// absorbing element takes to lost.
func (f *factor) update(psi wave, chi []complex128, lost []float64) {
	m := f.mesh
	gain := complex(f.gain, 0)
	for i := range m.elements {
		e := &m.elements[i]
		k := &f.kernels[e.cell]
		c := psi.mode[e.mode : e.mode+len(k.turn)]
		if k.lossy != nil {
			lost[e.layer] += k.absorbed(&m.cells[e.cell], c, chi[i], chi[i+1])
		}
		k.advance(c, gain*chi[i], gain*chi[i+1])
	}
	for i, v := range chi {
		psi.face[i] += gain * v
	}
}

// outflow is the probability that passes a plane in this factor, outward,
// exactly: 4 Re(p) Re(conj(chi) q), q = (A chi - M psi) of the inner element
// alone at the plane. It needs chi as solve left it and psi as it was. right
// tells which plane.
func (f *factor) outflow(psi wave, chi []complex128, right bool) float64 {
	m := f.mesh
	face, inner := m.left, m.left
	if right {
		face, inner = m.right, m.right-1
	}
	e := m.elements[inner]
	k := &f.kernels[e.cell]
	q, mass, other := k.faces.ll, k.massLeft, chi[inner+1]
	passed, passedRight := k.gather(psi.mode[e.mode : e.mode+len(k.turn)])
	if right {
		q, mass, other, passed = k.faces.rr, k.massRight, chi[inner], passedRight
	}
	v := chi[face]
	q = q*v + k.faces.lr*other + passed - mass*psi.face[face]
	return 2 * f.gain * (real(v)*real(q) + imag(v)*imag(q))
}
