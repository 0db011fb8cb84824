package propagate

import "math"

// moments sums the first moments of a distribution of energy.
type moments struct{ norm, first, second float64 }

// add adds a node of the given mass with values psi and H psi.
func (m *moments) add(mass float64, psi, h complex128) {
	m.norm += mass * square(psi)
	m.first += mass * (real(psi)*real(h) + imag(psi)*imag(h))
	m.second += mass * square(h)
}

// meanAndSpread is <psi|H psi>/<psi|psi> and the standard deviation,
// <H psi|H psi>/<psi|psi> - mean^2 rooted; zero for nothing.
func (m *moments) meanAndSpread() (mean, spread float64) {
	if m.norm == 0 {
		return 0, 0
	}
	mean = m.first / m.norm
	return mean, math.Sqrt(math.Max(0, m.second/m.norm-mean*mean))
}

// smooth returns (z-p)^-2 psi for a wave psi, z = -i dt (H-origin), p a pole of the step: the
// wave without what lies far above the energies that the step follows, such as
// the waves of the grid that sampling a packet leaves behind.
func (s *Stepper) smooth(psi wave) wave {
	f, w, lost := s.factors[0], newWave(s.Mesh), make([]float64, len(s.lost))
	copy(w.all, psi.all)
	before := make([]complex128, len(w.all))
	for range 2 {
		copy(before, w.all)
		f.solve(w, s.chi)
		f.update(w, s.chi, lost)
		for i, v := range before {
			w.all[i] = ((w.all[i]-v)/f.weight() - v) / f.at
		}
	}
	return w
}

// energy is the mean and the standard deviation of the energy of a wave between
// the planes: of H psi, taken at every node between them.
func (s *Stepper) energy(psi wave) (mean, spread float64) {
	m, sum := s.Mesh, moments{}
	var carry complex128 // M H psi at a face, from the element before it
	for i := m.left; i < m.right; i++ {
		e := m.elements[i]
		h := newAction(&m.cells[e.cell], s.Origin)
		left, right := psi.face[i], psi.face[i+1]
		modes := psi.mode[e.mode : e.mode+len(h.cell.lambda)]
		h.inside(left, right, modes, &sum)
		atLeft, atRight := h.faces(left, right, modes)
		if i > m.left {
			mass := real(m.faceMass[i])
			force := carry + atLeft + complex(m.strength[i], 0)*left
			sum.add(mass, left, force/complex(mass, 0))
		}
		carry = atRight
	}
	mean, spread = sum.meanAndSpread()
	return s.Origin + mean, spread
}

// action is H - origin on one cell of the real axis: a*stiff + b*mass.
type action struct {
	cell *cell
	a, b complex128
}

func newAction(c *cell, origin float64) action {
	a, b := c.shift(1, complex(origin, 0))
	return action{c, a, b}
}

// inside adds the interior of the cell to the moments.
func (h action) inside(left, right complex128, modes []complex128, sum *moments) {
	c := h.cell
	for j, v := range modes {
		pull := complex(c.couple[0][j], 0)*left + complex(c.couple[1][j], 0)*right
		sum.add(real(c.mu), v, (h.a*(complex(c.lambda[j], 0)*v+pull)+h.b*v)/c.mu)
	}
}

// faces is the cell's part of M (H - origin) psi at its two faces.
func (h action) faces(left, right complex128, modes []complex128) (atLeft, atRight complex128) {
	c := h.cell
	f := c.bare(h.a, h.b)
	atLeft, atRight = f.ll*left+f.lr*right, f.lr*left+f.rr*right
	for j, v := range modes {
		atLeft += h.a * complex(c.couple[0][j], 0) * v
		atRight += h.a * complex(c.couple[1][j], 0) * v
	}
	return atLeft, atRight
}
