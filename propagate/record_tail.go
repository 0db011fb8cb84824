package propagate

import (
	"math/cmplx"
)

// TailMoments are the integrals of the flow outward through the left or the
// right plane after the tail's moment, times (t-Time)^n for n = 0 to 3, as
// sums over steps continue them (see Tail): with x = lambda dt and
// c = coth(x/2), or what the step makes of it, the means of the powers of (n + 1/2) over exp(-x n) are 1, c/2,
// c^2/2 - 1/4 and (6 c^3 - 5 c)/8.
func (t *Tail) TailMoments(right bool) [4]float64 {
	var out [4]float64
	for i := range t.Held {
		for j := range i + 1 {
			if u, v := t.Held[i], t.Held[j]; !u.Bound || !v.Bound {
				t.addMoments(&out, u, v, twice(i, j), right)
			}
		}
	}
	return out
}

// addMoments adds what two states send.
func (t *Tail) addMoments(out *[4]float64, u, v Held, count float64, right bool) {
	f := u.State.left.flow(v.State.left)
	if right {
		f = u.State.right.flow(v.State.right)
	}
	lambda, dt := rate(u.State, v.State), complex(t.Step, 0)
	q := cmplx.Conj(u.Amplitude) * v.Amplitude * complex(count, 0) * f / lambda
	c := 2 / dt * t.now.delay(u.State, v.State)
	for n, mean := range [4]complex128{1, dt * c / 2, dt * dt * (c*c/2 - 0.25), dt * dt * dt * (6*c*c*c - 5*c) / 8} {
		out[n] += real(q * mean)
	}
}

// held is a state of the tail as it is seen at a plane: psi after n more steps
// is value ratio^n.
type held struct {
	value, ratio  complex128
	energy, width float64
	doubt         float64 // error of the complex energy
}

// tailAt lists the states of the run's tail, if the record reaches up to it.
func (r *Record) tailAt(right bool) []held {
	tail := r.run.Tail()
	if tail == nil || r.Missed > 0 || len(r.Stretches) == 0 {
		return nil
	}
	m, last := r.run.Mesh, &r.Stretches[len(r.Stretches)-1]
	face := m.left
	if right {
		face = m.right
	}
	var out []held
	for _, h := range tail.Held {
		y := (h.State.Energy - complex(last.Origin, 0)) * complex(last.Step, 0)
		u := h.State
		out = append(out, held{
			value: h.Amplitude * u.face[face], ratio: r.Pade.Step(-1i * y),
			energy: real(u.Energy), width: u.Width(), doubt: u.WidthError + u.EnergyError,
		})
	}
	return out
}

// Continued is the wave at a plane after the record's first n steps, as the
// states of the tail and the last fall of what is beside them continue it;
// only a record in steps of one size has it.
func (r *Record) Continued(right bool, n int) []complex128 {
	psi := r.Stretches[0].trace(right).Psi
	states := r.tailAt(right)
	rest := beside(psi, states)
	fall := rest.fall()
	out := make([]complex128, n)
	for i := range out {
		rest[1] *= fall
		out[i] = rest[1]
		for j := range states {
			states[j].value *= states[j].ratio
			out[i] += states[j].value
		}
	}
	return out
}

// lastTwo are the last two samples of what the states do not make up.
type lastTwo [2]complex128

func beside(psi []complex128, states []held) lastTwo {
	n := len(psi) - 1
	rest := lastTwo{psi[max(0, n-1)], psi[n]}
	for _, h := range states {
		rest[0] -= h.value / h.ratio
		rest[1] -= h.value
	}
	return rest
}

// fall is the last ratio of two samples, at most 1 in modulus.
func (l lastTwo) fall() complex128 {
	if l[0] == 0 {
		return 0
	}
	q := l[1] / l[0]
	if a := cmplx.Abs(q); a > 1 {
		q /= complex(a, 0)
	}
	return q
}

// states adds the whole geometric series of every state, of which half the
// first term is in the sum already. Near a state 1 - z is taken from the
// difference of the energies, in which a width far below rounding survives.
func (s *inversion) states(list []held) {
	for _, h := range list {
		off := complex(s.energy-h.energy, h.width/2)
		d := s.away(off, h)
		more := complex(s.slope, 0) * h.value * cmplx.Exp(complex(0, s.phase))
		s.sum += more * (1/d - 0.5)
		s.moment += more * (complex(s.time, 0)*(1/d-0.5) + complex(s.slope, 0)*(1-d)/(d*d))
		s.charge(cmplx.Abs(more/d)*h.doubt/cmplx.Abs(off), s.time+s.slope/cmplx.Abs(d))
	}
}

// away is 1 - z, z = exp(i (theta(E) - theta(E_j))), E - E_j = off.
func (s *inversion) away(off complex128, h held) complex128 {
	const near = 1e-3
	if y := cmplx.Abs(off) * s.step; y < near {
		_, slope := s.pade.Phase((s.energy - real(off)/2 - s.origin) * s.step)
		w := 1i * off * complex(slope*s.step, 0)
		return -w * (1 + w/2*(1+w/3))
	}
	return 1 - h.ratio*cmplx.Exp(complex(0, s.theta))
}
