package propagate

import "math"

// gear is a step size with the factors made for it.
type gear struct {
	Step    float64 // dt
	Origin  float64 // the energy from which phases are counted
	factors []*factor
}

// shift changes to a step size and energy origin, making their factors if
// they were not used before.
func (s *Stepper) shift(dt, origin float64) {
	s.ledger.mark()
	for _, g := range s.gears {
		if g.Step == dt && g.Origin == origin {
			s.gear = g
			return
		}
	}
	g := &gear{Step: dt, Origin: origin}
	for _, p := range s.Pade.Poles {
		g.factors = append(g.factors, newFactor(s.Mesh, pole{p, complex(0, -dt), origin}, s.mirror))
	}
	s.gears = append(s.gears, g)
	s.gear = g
}

// Slowest settings of a step that is lengthened: the wave that is left is
// followed to at least slowSpread standard deviations of its energy within
// phases of 1, and its decay, which goes as a power of time or slower, in
// slowParts steps for each doubling.
const (
	slowSpread = 4
	slowParts  = 32
)

// Lengthen changes to a longer step if what remains between the planes allows
// one: its energies lie ever closer together (at a threshold or a resonance)
// and its decay is ever slower. The step grows by powers of two, and phases
// are counted from the mean energy of what remains. It reports whether the
// step changed.
func (s *Stepper) Lengthen() bool {
	mean, spread := s.energy()
	dt := math.Min(1/(slowSpread*spread), s.ledger.Time/slowParts)
	if !(dt >= 2*s.Step) {
		return false
	}
	s.shift(s.Step*math.Exp2(math.Floor(math.Log2(dt/s.Step))), mean)
	return true
}

// energy is the mean and the standard deviation of the energy of what remains
// between the planes: of H psi, taken at every node between them.
func (s *Stepper) energy() (mean, spread float64) {
	m := s.Mesh
	var norm, first, second float64
	add := func(weight float64, v, hv complex128) {
		norm += weight * square(v)
		first += weight * (real(v)*real(hv) + imag(v)*imag(hv))
		second += weight * square(hv)
	}
	var carry complex128 // A psi at a face, from the element before it
	for i := m.left; i < m.right; i++ {
		e := m.elements[i]
		c := &m.cells[e.cell]
		l, r := s.psi.face[i], s.psi.face[i+1]
		a, b := c.shift(1, complex(s.Origin, 0))
		atLeft := (a*complex(c.stiff[0][0], 0)+b*complex(c.mass[0], 0))*l + a*complex(c.stiff[0][c.order], 0)*r
		atRight := (a*complex(c.stiff[c.order][c.order], 0)+b*complex(c.mass[c.order], 0))*r + a*complex(c.stiff[0][c.order], 0)*l
		for j, lambda := range c.lambda {
			v := s.psi.mode[e.mode+j]
			cl, cr := complex(c.couple[0][j], 0), complex(c.couple[1][j], 0)
			atLeft += a * cl * v
			atRight += a * cr * v
			add(real(c.mu), v, (a*(complex(lambda, 0)*v+cl*l+cr*r)+b*v)/c.mu)
		}
		if i > m.left {
			weight := real(m.faceMass[i])
			force := carry + atLeft + complex(m.strength[i], 0)*l
			add(weight, l, force/complex(weight, 0))
		}
		carry = atRight
	}
	if norm == 0 {
		return s.Origin, 0
	}
	mean = first / norm
	return s.Origin + mean, math.Sqrt(math.Max(0, second/norm-mean*mean))
}
