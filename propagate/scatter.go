package propagate

import "math/cmplx"

// Scattered is the stationary scattering of one energy on the elements of a
// mesh: what the grid itself makes of the structure, to be held against the
// exact amplitudes.
type Scattered struct {
	Transmission, Reflection float64 // probabilities
	// PhaseTimeTransmitted and PhaseTimeReflected are d(arg)/dE of the wave
	// that leaves at the far and at the near plane, for a wave that enters
	// at the near plane with phase zero: flight outside the structure
	// included.
	PhaseTimeTransmitted, PhaseTimeReflected float64
	Dwell                                    float64    // in the layers, per unit incident flux
	EdgeNear, EdgeFar                        complex128 // reflection amplitudes of the mesh's edges
}

// Scatterer solves stationary scattering on a mesh. It has scratch space of
// its own: one for each goroutine.
type Scatterer struct {
	mesh      *Mesh
	views     []view // of each cell, at the energy at hand
	faces     tridiagonal
	diag, off []complex128
	psi, grad []complex128 // the wave on the faces between the planes, d/dE
}

// NewScatterer returns a scatterer for the mesh.
func NewScatterer(m *Mesh) *Scatterer {
	n := m.right - m.left + 1
	return &Scatterer{
		mesh: m, views: make([]view, len(m.cells)), faces: newTridiagonal(n),
		diag: make([]complex128, n), off: make([]complex128, n-1),
		psi: make([]complex128, n), grad: make([]complex128, n),
	}
}

// At scatters a wave of the given energy that comes from the left or the
// right, first with exact outgoing waves behind both planes (the error left is
// that of the elements) and then with the mesh's own edges. The energy lies
// above the lead from which the wave comes.
func (s *Scatterer) At(energy float64, fromRight bool) (exact, edged Scattered) {
	m, structure := s.mesh, s.mesh.layout.structure
	for i := range m.cells {
		s.views[i] = m.cells[i].view(complex(energy, 0))
	}
	left, right := waveIn(structure.Entry, energy), waveIn(structure.Exit, energy)
	leftEdge, rightEdge := s.edge(false), s.edge(true)
	exact = s.solve(fromRight, left, right, left.open(), right.open())
	edged = s.solve(fromRight, left, right, leftEdge, rightEdge)
	near, far := left.reflect(leftEdge.value), right.reflect(rightEdge.value)
	if fromRight {
		near, far = far, near
	}
	edged.EdgeNear, edged.EdgeFar = near, far
	return exact, edged
}

// edge returns the admittance of the elements beyond a plane, edge included,
// up to the wall.
func (s *Scatterer) edge(right bool) admittance {
	m := s.mesh
	if right {
		a := admittance{}
		for i := len(m.elements) - 1; i >= m.right; i-- {
			v := &s.views[m.elements[i].cell]
			a = a.behind(v.matrix.turned(), v.bilinear.turned(), i == len(m.elements)-1)
		}
		return a
	}
	a := admittance{}
	for i := range m.left {
		v := &s.views[m.elements[i].cell]
		a = a.behind(v.matrix, v.bilinear, i == 0)
	}
	return a
}

// behind is the admittance seen through one more element, c.ll belonging to
// its outer face and c.rr to its inner; -w is the derivative of c. Behind the
// outermost element stands the wall, psi = 0.
func (a admittance) behind(c, w condensed, wall bool) admittance {
	if wall {
		return admittance{c.rr, -w.rr}
	}
	gain := c.lr / (c.ll + a.value)
	return admittance{
		value: c.rr - c.lr*gain,
		slope: -w.rr + 2*w.lr*gain + (a.slope-w.ll)*gain*gain,
	}
}

// solve finds the wave between the planes for given admittances behind them,
// and its derivative with respect to energy. The wave sent in has amplitude 1
// at the near plane: what it would be without reflection enters as the source
// of the plane's equation.
func (s *Scatterer) solve(fromRight bool, left, right leadWave, la, ra admittance) Scattered {
	in, out, behind := left, right, la
	near, far := 0, len(s.diag)-1
	if fromRight {
		in, out, behind = right, left, ra
		near, far = far, near
	}
	s.assemble(la.value, ra.value)
	open := in.open()
	clear(s.psi)
	s.psi[near] = behind.value + open.value
	s.faces.solve(s.psi)
	s.derivative(la.slope, ra.slope)
	s.grad[near] += behind.slope + open.slope
	s.faces.solve(s.grad)
	return s.read(in, out, near, far)
}

// assemble builds the system over the faces between the planes and factors it.
func (s *Scatterer) assemble(la, ra complex128) {
	m := s.mesh
	for f := range s.diag {
		s.diag[f] = complex(m.strength[m.left+f], 0)
	}
	for i := m.left; i < m.right; i++ {
		c, f := &s.views[m.elements[i].cell].matrix, i-m.left
		s.diag[f] += c.ll
		s.off[f] = c.lr
		s.diag[f+1] += c.rr
	}
	s.diag[0] += la
	s.diag[len(s.diag)-1] += ra
	s.faces.factor(s.diag, s.off)
}

// derivative fills grad with -(dA/dE) psi.
func (s *Scatterer) derivative(la, ra complex128) {
	m, n := s.mesh, len(s.grad)
	clear(s.grad)
	for i := m.left; i < m.right; i++ {
		w, f := &s.views[m.elements[i].cell].bilinear, i-m.left
		s.grad[f] += w.ll*s.psi[f] + w.lr*s.psi[f+1]
		s.grad[f+1] += w.lr*s.psi[f] + w.rr*s.psi[f+1]
	}
	s.grad[0] -= la * s.psi[0]
	s.grad[n-1] -= ra * s.psi[n-1]
}

// read turns the wave and its derivative into what is asked for.
func (s *Scatterer) read(in, out leadWave, near, far int) Scattered {
	r, t := s.psi[near]-1, s.psi[far]
	result := Scattered{
		Reflection:         square(r),
		PhaseTimeReflected: imag(s.grad[near] / r),
		Dwell:              s.inLayers() / in.speed(),
	}
	if out.speed() > 0 {
		result.Transmission = out.speed() / in.speed() * square(t)
		result.PhaseTimeTransmitted = imag(s.grad[far] / t)
	}
	return result
}

// inLayers is the integral of |psi|^2 over the layers.
func (s *Scatterer) inLayers() float64 {
	m, total := s.mesh, 0.0
	for i := m.left; i < m.right; i++ {
		e := m.elements[i]
		if e.layer < 0 {
			continue
		}
		w := &s.views[e.cell].hermitian
		a, b := s.psi[i-m.left], s.psi[i+1-m.left]
		total += real(cmplx.Conj(a)*(w.ll*a+w.lr*b) + cmplx.Conj(b)*(w.lr*a+w.rr*b))
	}
	return total
}
