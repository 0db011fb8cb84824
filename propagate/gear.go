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
func (s *Stepper) Lengthen() bool { return s.lengthenFor(s.psi) }

// lengthenFor is Lengthen where a part of psi is all that counts.
func (s *Stepper) lengthenFor(part wave) bool {
	mean, spread := s.energy(s.smooth(part))
	dt := math.Min(1/(slowSpread*spread), s.ledger.Time/slowParts)
	if !(dt >= 2*s.Step) {
		return false
	}
	s.shift(s.Step*math.Exp2(math.Floor(math.Log2(dt/s.Step))), mean)
	return true
}
