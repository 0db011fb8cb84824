package stationary

import "math"

// stretch is a range of incident wave numbers on which everything is smooth
// as a function of a coordinate x > 0: k = k0 + sign x^2 from a threshold k0,
// so that square roots become analytic. to and from are in x.
type stretch struct {
	origin   float64 // k0
	sign     float64
	exit     bool // k0 is the far lead's threshold, else that of the near one
	from, to float64
}

// at returns k and |dk/dx|.
func (st *stretch) at(x float64) (k, slope float64) {
	return st.origin + st.sign*x*x, 2 * x
}

// x is the inverse of at.
func (st *stretch) x(k float64) float64 { return math.Sqrt(max(0, st.sign*(k-st.origin))) }

// level returns the energies at x; near a threshold the kinetic energy above
// it keeps its relative accuracy.
func (s *Solver) levelAt(st *stretch, x float64) level {
	k, _ := st.at(x)
	near := k * k / (2 * s.near.Mass)
	far := near - (s.far.Height - s.near.Height)
	if st.exit {
		y := st.sign * x * x
		far = y * (2*st.origin + y) / (2 * s.near.Mass)
	}
	return level{s.near.Height + near, near, far}
}

// threshold is the incident wave number at which the far lead opens, 0 if it
// is always open.
func (s *Solver) threshold() float64 {
	return math.Sqrt(2 * s.near.Mass * max(0, s.far.Height-s.near.Height))
}

// stretches divides the wave numbers from lo > 0 to hi at the thresholds.
// Where the range starts well above zero, the square about zero is as good
// as any other smooth coordinate.
func (s *Solver) stretches(lo, hi float64) []*stretch {
	add := func(origin, sign float64, exit bool, a, b float64) *stretch {
		st := &stretch{origin: origin, sign: sign, exit: exit}
		st.from, st.to = st.x(a), st.x(b)
		if st.from > st.to {
			st.from, st.to = st.to, st.from
		}
		return st
	}
	kt := s.threshold()
	switch {
	case kt <= lo && kt > 0:
		return []*stretch{add(kt, 1, true, lo, hi)}
	case kt <= 0 || kt >= hi:
		return []*stretch{add(0, 1, false, lo, hi)}
	}
	below := []*stretch{add(kt, -1, true, lo, kt)}
	if lo < kt/2 {
		below = []*stretch{add(0, 1, false, lo, kt/2), add(kt, -1, true, kt/2, kt)}
	}
	return append(below, add(kt, 1, true, kt, hi))
}
