package stationary

import (
	"context"
	"fmt"
	"math"
	"math/cmplx"
	"slices"
)

// Pole is a pole of t and r at the energy Energy - i Width/2.
type Pole struct{ Energy, Width float64 }

// Resonances returns the poles with energies between from and to, both above
// the incident lead's height, as far as a real energy of the window can feel
// them: a pole much wider than its distance to the lead's height, or hidden
// behind another, may be missing. Unresolved counts those that are known to be
// there by the phase of t but too narrow for double precision. Beyond budget
// energies it gives up with what it has and ErrEvaluations.
func (s *Solver) Resonances(ctx context.Context, from, to float64, budget int) (poles []Pole, unresolved int, err error) {
	if !(from > s.near.Height && to > from) || math.IsInf(to, 0) {
		return nil, 0, fmt.Errorf("stationary: the window from %g to %g must lie above the incident lead's height %g", from, to, s.near.Height)
	}
	widest := func(energy float64) float64 { return max(energy-s.near.Height, to-from) }
	for _, st := range s.stretches(s.incidentWave(from), s.incidentWave(to)) {
		h := hunt{solver: s, stretch: st, budget: budget}
		if err := h.search(ctx, 8); err != nil {
			return nil, 0, err
		}
		if h.limit != nil {
			err = h.limit
		}
		for _, g := range h.unresolved {
			unresolved += g.hidden()
		}
		poles = append(poles, h.poles(widest)...)
	}
	return distinct(poles), unresolved, err
}

// probe is what the search for resonances knows at one energy: the phase of
// t (of sqrt r where the far lead is closed), through whole turns, and its
// derivative with respect to the stretch coordinate x.
type probe struct {
	x, energy    float64
	phase, slope float64
	logSlope     complex128 // d(log in)/dE; in has its zeros at the poles
}

// probe evaluates the wave at x.
func (s *Solver) probe(st *stretch, x float64) probe {
	l := s.levelAt(st, x)
	s.cross(l, true)
	p := s.divide(l)
	k, dk := st.at(x)
	logSlope := p.inLog + complex(0, p.shift)
	return probe{
		x: x, energy: l.energy,
		phase:    -(s.wave.turn + cmplx.Phase(p.in*cmplx.Conj(s.wave.u()))),
		slope:    -imag(logSlope) * k / s.near.Mass * st.sign * dk,
		logSlope: logSlope,
	}
}

// hunt is the search for resonances over one stretch.
//
// The amplitude of the incident wave for a given outgoing one, in(E), has a
// zero at every pole, so that the phase of t = 1/in rises by pi over the
// width of a resonance, however narrow it is. The phase is known through
// whole turns and so is its derivative; where the one is not the integral of
// the other between two energies, something is hidden between them. Intervals
// are halved until that is so nowhere.
type hunt struct {
	solver     *Solver
	stretch    *stretch
	probes     []probe
	unresolved []gap
	budget     int
	limit      error // ErrEvaluations once the budget is spent
}

// gap is an interval in which a pole is hidden, or several. It is blind where
// the search had to stop; else two numbers next to each other bound it.
type gap struct {
	from, to probe
	blind    bool
}

// hidden is the number of poles a gap hides, by the half turns of the phase.
func (g gap) hidden() int {
	return max(1, int(math.Round(math.Abs(g.to.phase-g.from.phase)/math.Pi)))
}

// Bounds within which a phase step counts as accounted for: by the trapezoidal
// rule to mismatch, and short of a half turn, which a hidden pole would add.
const (
	mismatch = 0.25
	longest  = 2.0
)

// search fills the probes, in order of x.
func (h *hunt) search(ctx context.Context, pieces int) error {
	st := h.stretch
	from := max(st.from, 1e-6*st.to)
	last := h.solver.probe(st, from)
	h.probes = append(h.probes, last)
	for i := 1; i <= pieces; i++ {
		next := h.solver.probe(st, from+(st.to-from)*float64(i)/float64(pieces))
		if err := h.between(ctx, last, next); err != nil {
			return err
		}
		last = next
	}
	return nil
}

// between appends the probes after a up to b.
func (h *hunt) between(ctx context.Context, a, b probe) error {
	rise := b.phase - a.phase
	told := (a.slope + b.slope) / 2 * (b.x - a.x)
	if math.Abs(rise) <= longest && math.Abs(rise-told) <= mismatch {
		h.probes = append(h.probes, b)
		return nil
	}
	if err := ctx.Err(); err != nil {
		return err
	}
	if h.budget <= 0 {
		h.limit = ErrEvaluations
	}
	if b.x-a.x <= 1e-15*b.x || h.limit != nil {
		h.unresolved = append(h.unresolved, gap{a, b, h.limit != nil})
		h.probes = append(h.probes, b)
		return nil
	}
	h.budget--
	mid := h.solver.probe(h.stretch, a.x+(b.x-a.x)/2)
	if err := h.between(ctx, a, mid); err != nil {
		return err
	}
	return h.between(ctx, mid, b)
}

// poles refines what the probes point at, as far as it is narrower than widest
// at its energy. A probe near a pole knows it: the zero of in nearest to E is
// E - 1/(d(log in)/dE) when no other is near.
func (h *hunt) poles(widest func(energy float64) float64) []Pole {
	var found []Pole
	for i, p := range h.probes {
		guess := complex(p.energy, 0) - 1/p.logSlope
		a, b := h.probes[max(i-1, 0)].energy, h.probes[min(i+1, len(h.probes)-1)].energy
		between := real(guess) >= min(a, b) && real(guess) <= max(a, b)
		if !between || imag(guess) >= 0 || -2*imag(guess) > widest(p.energy) || known(found, guess) {
			continue
		}
		if !h.confirmed(guess) {
			continue
		}
		if z, ok := h.solver.refine(guess); ok {
			found = append(found, Pole{real(z), -2 * imag(z)})
		}
	}
	return found
}

// confirmed reports whether the wave at the guess's own energy points at much
// the same pole: cheap beside Newton's method in the complex plane, and where
// nothing resonates the guesses follow the energy and fail it.
func (h *hunt) confirmed(guess complex128) bool {
	s := h.solver
	near := real(guess) - s.near.Height
	if near <= 0 {
		return false
	}
	s.cross(level{real(guess), near, real(guess) - s.far.Height}, false)
	p := s.divide(level{real(guess), near, real(guess) - s.far.Height})
	again := complex(real(guess), 0) - 1/(p.inLog+complex(0, p.shift))
	return cmplx.Abs(again-guess) <= math.Abs(imag(guess))
}

// known reports whether a guess is as good as a pole already found.
func known(found []Pole, guess complex128) bool {
	for _, p := range found {
		if cmplx.Abs(guess-complex(p.Energy, -p.Width/2)) < 1e-3*p.Width {
			return true
		}
	}
	return false
}

// refine takes Newton's method to the zero of in near z. It gives up where
// that leads away from z: what z pointed at was no pole, or one that another
// probe knows better.
func (s *Solver) refine(z complex128) (complex128, bool) {
	const steps = 30
	start, reach := z, 4*math.Abs(imag(z))+1e-9*math.Abs(real(z))
	for range steps {
		in, slope, _ := s.Incoming(z)
		step := in / slope
		z -= step
		if !(cmplx.Abs(z-start) <= reach) {
			return z, false
		}
		if cmplx.Abs(step) <= 1e-14*(math.Abs(real(z))+s.high-s.low)+1e-10*math.Abs(imag(z)) {
			return z, imag(z) < 0 && real(z) > s.near.Height
		}
	}
	return z, false
}

// distinct sorts poles by energy and drops those found twice.
func distinct(poles []Pole) []Pole {
	slices.SortFunc(poles, func(a, b Pole) int {
		switch {
		case a.Energy < b.Energy:
			return -1
		case a.Energy > b.Energy:
			return 1
		}
		return 0
	})
	return slices.CompactFunc(poles, func(a, b Pole) bool {
		return math.Abs(a.Energy-b.Energy) <= 1e-6*min(a.Width, b.Width)+1e-13*math.Abs(a.Energy) &&
			math.Abs(a.Width-b.Width) <= 1e-3*max(a.Width, b.Width)+1e-13*math.Abs(a.Energy)
	})
}
