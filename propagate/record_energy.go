package propagate

import (
	"math"
	"math/cmplx"
)

// Component is the part of a wave at a plane that has one energy.
type Component struct {
	// Amplitude is a(E) of psi(t) = integral of a(E) exp(-iEt) dE.
	Amplitude complex128
	// Time is d(arg a)/dE: when this energy passes the plane.
	Time float64
	// Open bounds the error of Amplitude by what the record ends before:
	// what had not passed when it ended, and what was left out where the step
	// grew. Late is when that passes, as a time that goes with Open.
	Open, Late float64
}

// Reader takes energies out of the record of a run that has ended, at one
// plane.
type Reader struct {
	record *Record
	right  bool
	states []held
}

// Reader returns the reader of the left or the right plane.
func (r *Record) Reader(right bool) *Reader {
	return &Reader{record: r, right: right, states: r.tailAt(right)}
}

// At takes one energy out of the wave at the plane. The wave is
//
//	psi_n = integral of a(E) exp(-i n theta(E)) dE,
//
// theta(E) = Pade.Phase((E-origin) dt) the phase of the very step, so that
//
//	a(E) = theta'(E)/(2 pi) sum over n of psi_n exp(i n theta(E))
//
// undoes the time steps exactly: no error of the step is left, as long as no
// two energies of the wave share a phase (dt times its band below 2 pi). Where
// the step grows, both sides count half of the sample they share. After the
// last sample the states of the run's tail go on, and what they do not make up
// is continued as it fell at last; all of that is counted in Open.
func (r *Reader) At(energy float64) Component {
	s := inversion{pade: r.record.Pade, energy: energy}
	list := r.record.Stretches
	for i := range list {
		if i == len(list)-1 && len(r.states) == 0 {
			s.early = early(list[i].trace(r.right).Psi)
		}
		if !s.add(&list[i], list[i].trace(r.right).Psi, i == 0) {
			s.rest(list[i-1:], beside(s.last[:], nil))
			break
		}
		if i == len(list)-1 {
			s.states(r.states)
			s.rest(list[i:], beside(s.last[:], r.states))
			s.compare()
		}
	}
	return s.component()
}

// inversion sums one energy out of a record.
type inversion struct {
	pade        Pade
	energy      float64
	sum, moment complex128 // of psi exp(i phase), without and with the time
	phase, time float64    // of the energy at the last sample, by the steps
	open, late  float64
	last        [2]complex128 // the last two samples
	step, slope float64       // of the last stretch that was added
	theta       float64
	origin      float64
	early       int        // sample of the last stretch at which a shorter record would end; 0: none
	shorter     *inversion // what that says
}

// add adds a stretch. It refuses one whose steps are too long for the energy,
// unless it is the first.
func (s *inversion) add(part *Stretch, psi []complex128, first bool) bool {
	theta, slope := s.pade.Phase((s.energy - part.Origin) * part.Step)
	if math.Abs(theta) >= math.Pi && !first {
		return false
	}
	slope *= part.Step
	weight := complex(slope, 0)
	turn, factor := cmplx.Exp(complex(0, theta)), cmplx.Exp(complex(0, s.phase))
	if !first {
		s.shared(part, psi[0], theta, slope)
	}
	for n, v := range psi {
		if n > 0 && n == s.early {
			s.snapshot(psi[:n+1], n, theta, slope, v*factor)
		}
		w := v * factor
		if n == 0 && !first || n == len(psi)-1 {
			w /= 2
		}
		s.sum += weight * w
		s.moment += weight * w * complex(s.time+float64(n)*slope, 0)
		factor *= turn
	}
	n := len(psi) - 1
	s.phase += float64(n) * theta
	s.time += float64(n) * slope
	s.last = [2]complex128{psi[max(0, n-1)], psi[n]}
	s.step, s.slope, s.theta, s.origin = part.Step, slope, theta, part.Origin
	return true
}

// early is the last sample of a trace that is twice as large as all of the
// last few, or 0.
func early(psi []complex128) int {
	const few = 8
	n := len(psi)
	largest := 0.0
	for _, v := range psi[max(0, n-few):] {
		largest = math.Max(largest, square(v))
	}
	for n--; n > 0 && !(square(psi[n]) > 4*largest); n-- {
	}
	return n
}

// snapshot keeps what a record says that ends at sample n.
func (s *inversion) snapshot(psi []complex128, n int, theta, slope float64, w complex128) {
	c := *s
	c.early, c.open, c.late = 0, 0, 0
	c.sum += complex(slope/2, 0) * w
	c.phase += float64(n) * theta
	c.time += float64(n) * slope
	c.last = [2]complex128{psi[n-1], psi[n]}
	c.slope, c.theta = slope, theta
	c.rest(nil, lastTwo(c.last))
	s.shorter = &c
}

// compare charges twice the difference to the shorter record, since which half
// of what was left has passed: what is left may be of several energies, of
// which its last fall tells one.
func (s *inversion) compare() {
	if s.shorter != nil {
		s.charge(2*cmplx.Abs(s.sum-s.shorter.sum), s.time)
	}
}

// shared mends the sample that two stretches share. A sum of psi_n exp(i n d)
// that ends with half of a term exp(-i n theta) ends in (1/2i) cot(d/2) of it,
// d the difference of the phases, where an integral has 1/(i d); the origin of
// the new stretch, the mean energy of what is left, stands for all of it. What
// is mended is charged.
func (s *inversion) shared(part *Stretch, psi complex128, theta, slope float64) {
	before, _ := s.pade.Phase((part.Origin - s.origin) * s.step)
	ends := s.slope*cotangent((s.theta-before)/2) - slope*cotangent(theta/2)
	mend := complex(0, ends/2) * psi * cmplx.Exp(complex(0, s.phase))
	s.sum += mend
	s.moment += mend * complex(s.time, 0)
	s.charge(cmplx.Abs(mend)+part.Step*part.Step/12*math.Abs(s.energy-part.Origin)*cmplx.Abs(psi), s.time)
}

// cotangent is cot x - 1/x for |x| < pi/2 and beyond.
func cotangent(x float64) float64 {
	if math.Abs(x) < 1e-3 {
		return -x / 3
	}
	return 1/math.Tan(x) - 1/x
}

func (s *inversion) charge(open, time float64) {
	s.open += open
	s.late += open * math.Abs(time)
}

// rest continues the wave after the last sample added as it fell at last, a
// geometric series, of which half the first term is in the sum already. Where
// the next stretch was refused its origin tells the energy of what is left.
func (s *inversion) rest(parts []Stretch, left lastTwo) {
	v := left[1]
	if v == 0 {
		return
	}
	ratio := left.fall()
	if len(parts) > 1 {
		theta, _ := s.pade.Phase((parts[1].Origin - parts[0].Origin) * s.step)
		ratio = cmplx.Exp(complex(0, -theta))
	}
	z := ratio * cmplx.Exp(complex(0, s.theta))
	const nearest = 1e-3 // of a phase: beyond it the record says nothing
	if d := cmplx.Abs(1 - z); d < nearest {
		z = 1 - nearest
	}
	more := complex(s.slope, 0) * v * cmplx.Exp(complex(0, s.phase)) * (1/(1-z) - 0.5)
	later := s.time + s.slope/cmplx.Abs(1-z)
	s.sum += more
	s.moment += more * complex(s.time, 0)
	s.charge(cmplx.Abs(more), later)
}

// component is what the sums amount to.
func (s *inversion) component() Component {
	const turn = 2 * math.Pi
	c := Component{Amplitude: s.sum / turn, Open: s.open / turn}
	if s.sum != 0 {
		c.Time = real(s.moment / s.sum)
	}
	if s.open > 0 {
		c.Late = s.late / s.open
	}
	return c
}

// Energy inverts Pade.Phase: the y with Phase(y) = theta, for |theta| below
// the member times pi.
func (p Pade) Energy(theta float64) float64 {
	y := theta
	for range 60 {
		t, slope := p.Phase(y)
		step := (t - theta) / slope
		y -= math.Max(-2, math.Min(2, step))
		if math.Abs(step) <= 1e-15*(1+math.Abs(y)) {
			break
		}
	}
	return y
}
