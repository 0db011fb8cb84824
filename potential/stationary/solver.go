package stationary

import (
	"fmt"
	"math"

	"fluxtoll/potential"
)

// Solver finds the scattering states of one structure for incidence from one
// side. It has scratch of its own: use a Clone in another goroutine.
type Solver struct {
	near, far potential.Lead // incident lead and the other
	elements  []element      // from the far face to the near one
	smooths   []smoothSegment
	layers    int
	low, high float64 // bounds of the height
	lossy     bool

	wave   wave
	dwells []tally // one for each layer
	real   scratch[float64]
	cplx   scratch[complex128]
}

// New prepares a structure for incidence from its entry (left) or, fromRight,
// from its exit.
func New(s *potential.Structure, fromRight bool) *Solver {
	layers := len(s.Layers)
	layer := func(i int) int { return i }
	if fromRight {
		s = s.Mirror()
		layer = func(i int) int { return layers - 1 - i }
	}
	v := &Solver{near: s.Entry, far: s.Exit, layers: layers, lossy: s.Lossy()}
	v.low, v.high = bounds(s)
	var segments []potential.Segment
	v.elements, segments = elements(s, layer)
	v.smooths = make([]smoothSegment, len(segments))
	for i, g := range segments {
		v.smooths[i] = newSmoothSegment(g)
	}
	v.dwells = make([]tally, layers)
	return v
}

// Clone returns a solver for the same structure and side that shares what is
// immutable and has its own scratch, for another goroutine.
func (s *Solver) Clone() *Solver {
	c := &Solver{
		near: s.near, far: s.far, elements: s.elements, layers: s.layers,
		low: s.low, high: s.high, lossy: s.lossy,
		smooths: make([]smoothSegment, len(s.smooths)),
		dwells:  make([]tally, s.layers),
	}
	for i := range s.smooths {
		c.smooths[i] = s.smooths[i].clone()
	}
	return c
}

// point of energy: the total energy and the kinetic energies in the two
// leads, given apart so that nothing is lost near a threshold.
type level struct{ energy, near, far float64 }

// level checks an energy and returns it with the kinetic energies.
func (s *Solver) level(energy float64) (level, error) {
	if !(energy > s.near.Height) || math.IsInf(energy, 0) {
		return level{}, fmt.Errorf("stationary: energy %g must be finite and above the incident lead's height %g",
			energy, s.near.Height)
	}
	return level{energy, energy - s.near.Height, energy - s.far.Height}, nil
}

// At fills a for one energy, which must lie above the incident lead's height.
// It reuses a's slices and does not allocate when they are long enough.
func (s *Solver) At(energy float64, a *Amplitudes) error {
	l, err := s.level(energy)
	if err != nil {
		return err
	}
	return s.at(l, a)
}

// at is At for an energy given as a level.
func (s *Solver) at(l level, a *Amplitudes) error {
	s.cross(l, false)
	a.Energy = l.energy
	s.resolve(l, a)
	if !a.finite() {
		return fmt.Errorf("stationary: amplitudes at energy %g are not finite: a height, mass or thickness is beyond the range of double precision", l.energy)
	}
	return nil
}

// cross carries the wave from the far face to the near face; turning also
// follows its phase through whole turns.
func (s *Solver) cross(l level, turning bool) {
	w := &s.wave
	w.start(l, s.far.Mass, s.spread(l.energy), s.lossy)
	w.turning = turning
	clear(s.dwells)
	for i := range s.elements {
		e := &s.elements[i]
		switch {
		case e.kind == point:
			w.kick(e.strength)
			continue
		case e.kind == smooth:
			s.crossSmooth(e, l.energy)
		case e.loss != 0:
			s.crossLossy(e, l.energy)
		default:
			s.crossFlat(e, l.energy)
		}
	}
	w.settle()
}

// spread is 1/omega^2 with omega a typical |w/u|: the metric in which p and q
// are compared.
func (s *Solver) spread(energy float64) float64 {
	return s.near.Mass / (2 * max(energy-s.low, s.high-energy))
}

// crossFlat crosses a flat layer without loss.
func (s *Solver) crossFlat(e *element, energy float64) {
	var f flatLayer
	f.set(energy-e.height, e.mass, e.length)
	s.dwells[e.layer].add(f.density(&s.wave), s.wave.log+f.growth)
	s.wave.apply(&f.m, &f.d, f.growth, f.turns, f.rounds)
}

// crossLossy crosses a flat layer with loss: in one step, or, where the phase
// is followed, in slices short enough for it.
func (s *Solver) crossLossy(e *element, energy float64) {
	n := 1
	if s.wave.turning {
		k := math.Sqrt(2 * e.mass * math.Hypot(energy-e.height, e.loss))
		n = 1 + int(k*e.length/2)
	}
	var f lossyLayer
	f.set(complex(energy-e.height, e.loss), e.mass, e.length/float64(n))
	for range n {
		density := f.density(s.wave.u(), s.wave.w())
		s.dwells[e.layer].add(density, s.wave.log+f.growth)
		s.wave.applyLossy(&f.m, &f.d, f.growth, 2*e.loss*density, 1+math.Sqrt(square(f.theta)))
	}
}

// crossSmooth crosses a segment by Taylor series, slice by slice.
func (s *Solver) crossSmooth(e *element, energy float64) {
	if e.loss == 0 {
		slices := s.smooths[e.smooth].realSlices(energy)
		for i := len(slices) - 1; i >= 0; i-- {
			t := s.real.cross(&slices[i], energy)
			s.dwells[e.layer].add(density(t, &s.wave), s.wave.log)
			s.wave.apply(&t.m, &t.d, 0, 0, sliceRounds)
		}
		return
	}
	slices := s.smooths[e.smooth].complexSlices(energy, e.loss)
	for i := len(slices) - 1; i >= 0; i-- {
		t := s.cplx.cross(&slices[i], complex(energy, e.loss))
		density := sampledDensity(&s.cplx, s.wave.u(), s.wave.w())
		s.dwells[e.layer].add(density, s.wave.log)
		s.wave.applyLossy(&t.m, &t.d, 0, 2*e.loss*density, sliceRounds)
	}
}

// sliceRounds is how many units of rounding a slice makes: its series has
// terms of order 1.
const sliceRounds = 2

// tally is a sum of terms each given in units of exp(2 log).
type tally struct{ sum, log float64 }

func (t *tally) add(term, log float64) {
	if t.log != log {
		t.sum *= math.Exp(2 * (t.log - log))
		t.log = log
	}
	t.sum += term
}
