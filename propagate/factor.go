package propagate

import "math/cmplx"

// pole is one pole p of the approximant of exp(z), z = alpha (H - origin) with
// alpha = -i dt. Its factor of the step is taken as
//
//	-(p/conj(p)) (z + conj(p))/(z - p) = 1 + weight z/(z - p),
//	weight = -2 Re(p)/conj(p),
//
// which is 1 at z = 0; the constants p/conj(p) of all poles multiply to 1.
type pole struct {
	at, alpha complex128
	origin    float64
}

func (p pole) weight() complex128 { return complex(-2*real(p.at), 0) / cmplx.Conj(p.at) }

// beta is the shift with which z - p is alpha H - beta.
func (p pole) beta() complex128 { return p.at + p.alpha*complex(p.origin, 0) }

// factor is one factor of a time step, ready to be applied: chi solves
//
//	A chi = M psi,  A = -i dt (H - E0 M) - p M,
//
// and psi becomes psi + weight (psi + p chi). The faces are left with a
// symmetric tridiagonal system whose elimination is made once.
type factor struct {
	pole
	mesh    *Mesh
	kernels []kernel // one for each cell of the mesh
	faces   tridiagonal
}

// newFactor prepares the factor of a pole; mirror says whether kernels may use
// the mirror symmetry of their cells.
func newFactor(m *Mesh, p pole, mirror bool) *factor {
	f := &factor{mesh: m, pole: p, kernels: make([]kernel, len(m.cells))}
	for i := range m.cells {
		f.kernels[i] = newKernel(&m.cells[i], p, mirror)
	}
	f.eliminate()
	return f
}

// eliminate factors the tridiagonal system of the faces between the walls at
// the two ends, which hold psi = 0.
func (f *factor) eliminate() {
	m := f.mesh
	diag, off := make([]complex128, len(m.faces)), make([]complex128, len(m.elements))
	for i, s := range m.strength {
		diag[i] = f.alpha * complex(s, 0)
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
	weight := f.weight()
	x := weight * f.at
	for i := range m.elements {
		e := &m.elements[i]
		k := &f.kernels[e.cell]
		c := psi.mode[e.mode : e.mode+len(k.turn)]
		if k.lossy != nil {
			lost[e.layer] += k.absorbed(&m.cells[e.cell], c, chi[i], chi[i+1])
		}
		k.advance(c, x*chi[i], x*chi[i+1])
	}
	for i, v := range chi {
		psi.face[i] += weight * (psi.face[i] + f.at*v)
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
	return 4 * real(f.at) * (real(v)*real(q) + imag(v)*imag(q))
}
