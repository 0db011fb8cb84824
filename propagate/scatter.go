package propagate

import (
	"math"
	"math/cmplx"

	"fluxtoll/potential"
)

// Scattered is the stationary scattering of one energy on the elements of a
// mesh: what the grid itself makes of the structure, to be held against the
// exact amplitudes.
type Scattered struct {
	Transmission, Reflection float64
	// PhaseTimeTransmitted and PhaseTimeReflected are d(arg)/dE of the wave
	// that leaves at the far and at the near plane, for a wave that enters
	// at the near plane with phase zero: flight outside the structure
	// included.
	PhaseTimeTransmitted, PhaseTimeReflected float64
	Dwell                                    float64 // in the layers, per unit incident flux
	EdgeNear, EdgeFar                        complex128
}

// Scatterer solves stationary scattering on a mesh. It has scratch space of
// its own: one for each goroutine.
type Scatterer struct {
	mesh                 *Mesh
	cells                []condensed // of each cell, at the energy at hand
	bilinear, hermitian  []condensed
	diag, off, sol, grad []complex128
}

// NewScatterer returns a scatterer for the mesh.
func NewScatterer(m *Mesh) *Scatterer {
	n := m.right - m.left + 1
	return &Scatterer{
		mesh: m, cells: make([]condensed, len(m.cells)),
		bilinear: make([]condensed, len(m.cells)), hermitian: make([]condensed, len(m.cells)),
		diag: make([]complex128, n), off: make([]complex128, n),
		sol: make([]complex128, n), grad: make([]complex128, n),
	}
}

// admittance is what stands in for everything behind a plane: the term it
// adds to the plane's equation, and that term's derivative.
type admittance struct{ value, slope complex128 }

// wave is the wave number in a lead (i kappa where closed), its derivative
// with respect to energy, and the lead's mass.
type wave struct {
	k, slope complex128
	mass     float64
}

func leadWave(l potential.Lead, energy float64) wave {
	k := cmplx.Sqrt(complex(2*l.Mass*(energy-l.Height), 0))
	return wave{k: k, slope: complex(l.Mass, 0) / k, mass: l.Mass}
}

// open is the admittance of an endless lead, -ik/(2m).
func (w wave) open() admittance {
	f := complex(0, -1/(2*w.mass))
	return admittance{f * w.k, f * w.slope}
}

// reflect is the amplitude with which an admittance sends back a wave, the
// phase referred to its plane.
func (w wave) reflect(a admittance) complex128 {
	open := w.open().value
	return -(a.value - open) / (a.value + open)
}

// edge returns the admittance of the elements beyond a plane, edge included,
// up to the wall.
func (s *Scatterer) edge(right bool) admittance {
	m := s.mesh
	first, last, step := 0, m.left, 1
	if right {
		first, last, step = len(m.elements)-1, m.right-1, -1
	}
	a := admittance{}
	for i := first; i != last; i += step {
		c, w := s.cells[m.elements[i].cell], s.bilinear[m.elements[i].cell]
		if right {
			c.ll, c.rr, w.ll, w.rr = c.rr, c.ll, w.rr, w.ll
		}
		// c.ll belongs to the outer face, c.rr to the inner.
		if i == first {
			a = admittance{c.rr, -w.rr}
			continue
		}
		gain := c.lr / (c.ll + a.value)
		a = admittance{
			value: c.rr - c.lr*gain,
			slope: -w.rr + 2*w.lr*gain + (a.slope-w.ll)*gain*gain,
		}
	}
	return a
}

// prepare condenses every cell at an energy.
func (s *Scatterer) prepare(energy float64) {
	e := complex(energy, 0)
	for i := range s.mesh.cells {
		c := &s.mesh.cells[i]
		s.cells[i] = c.condense(1, e)
		s.bilinear[i], s.hermitian[i] = c.weigh(e)
	}
}

// At scatters a wave of the given energy that comes from the left or the
// right, first with exact outgoing waves behind both planes (the error left is
// that of the elements) and then with the mesh's own edges.
func (s *Scatterer) At(energy float64, fromRight bool) (exact, edged Scattered) {
	s.prepare(energy)
	m := s.mesh
	left, right := leadWave(m.structure.Entry, energy), leadWave(m.structure.Exit, energy)
	leftEdge, rightEdge := s.edge(false), s.edge(true)
	exact = s.solve(energy, fromRight, left, right, left.open(), right.open())
	edged = s.solve(energy, fromRight, left, right, leftEdge, rightEdge)
	near, far := left.reflect(leftEdge), right.reflect(rightEdge)
	if fromRight {
		near, far = far, near
	}
	edged.EdgeNear, edged.EdgeFar = near, far
	return exact, edged
}

// solve finds the wave between the planes for given admittances behind them.
func (s *Scatterer) solve(energy float64, fromRight bool, left, right wave, la, ra admittance) Scattered {
	s.assemble(la, ra)
	in, out, n := left, right, len(s.diag)
	near, far, behind := 0, n-1, la
	if fromRight {
		in, out, near, far, behind = right, left, n-1, 0, ra
	}
	open := in.open()
	clear(s.sol)
	s.sol[near] = behind.value + open.value
	s.factor()
	s.back(s.sol)
	s.derivative(la, ra)
	s.grad[near] += behind.slope + open.slope
	s.back(s.grad)
	return s.read(in, out, near, far)
}

// read turns the wave and its derivative into what is asked for.
func (s *Scatterer) read(in, out wave, near, far int) Scattered {
	r, t := s.sol[near]-1, s.sol[far]
	result := Scattered{
		Reflection:         real(r)*real(r) + imag(r)*imag(r),
		PhaseTimeReflected: imag(s.grad[near] / r),
	}
	speedIn := real(in.k) / in.mass
	if speed := real(out.k) / out.mass; speed > 0 {
		result.Transmission = speed / speedIn * (real(t)*real(t) + imag(t)*imag(t))
		result.PhaseTimeTransmitted = imag(s.grad[far] / t)
	}
	for i := s.mesh.left; i < s.mesh.right; i++ {
		e := s.mesh.elements[i]
		if e.layer < 0 {
			continue
		}
		w := s.hermitian[e.cell]
		a, b := s.sol[i-s.mesh.left], s.sol[i+1-s.mesh.left]
		result.Dwell += real(cmplx.Conj(a)*(w.ll*a+w.lr*b)+cmplx.Conj(b)*(w.lr*a+w.rr*b)) / speedIn
	}
	return result
}

// assemble builds the tridiagonal system over the faces between the planes.
func (s *Scatterer) assemble(la, ra admittance) {
	m := s.mesh
	clear(s.diag)
	for f := range s.diag {
		s.diag[f] = complex(m.strength[m.left+f], 0)
	}
	for i := m.left; i < m.right; i++ {
		c, f := s.cells[m.elements[i].cell], i-m.left
		s.diag[f] += c.ll
		s.off[f] = c.lr
		s.diag[f+1] += c.rr
	}
	s.diag[0] += la.value
	s.diag[len(s.diag)-1] += ra.value
}

// factor eliminates from the left; diag becomes the inverses of the pivots.
func (s *Scatterer) factor() {
	for f := range s.diag {
		if f > 0 {
			s.diag[f] -= s.off[f-1] * s.off[f-1] * s.diag[f-1]
		}
		if s.diag[f] == 0 {
			s.diag[f] = complex(math.SmallestNonzeroFloat32, 0)
		}
		s.diag[f] = 1 / s.diag[f]
	}
}

// back solves with the factors made by factor.
func (s *Scatterer) back(b []complex128) {
	n := len(b)
	for f := 1; f < n; f++ {
		b[f] -= s.off[f-1] * s.diag[f-1] * b[f-1]
	}
	b[n-1] *= s.diag[n-1]
	for f := n - 2; f >= 0; f-- {
		b[f] = (b[f] - s.off[f]*b[f+1]) * s.diag[f]
	}
}

// derivative fills grad with -(dA/dE) sol.
func (s *Scatterer) derivative(la, ra admittance) {
	m, n := s.mesh, len(s.grad)
	clear(s.grad)
	for i := m.left; i < m.right; i++ {
		w, f := s.bilinear[m.elements[i].cell], i-m.left
		s.grad[f] += w.ll*s.sol[f] + w.lr*s.sol[f+1]
		s.grad[f+1] += w.lr*s.sol[f] + w.rr*s.sol[f+1]
	}
	s.grad[0] -= la.slope * s.sol[0]
	s.grad[n-1] -= ra.slope * s.sol[n-1]
}
