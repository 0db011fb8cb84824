package propagate

import (
	"math"
	"math/cmplx"
	"slices"
)

// Tail is what eigenstates of a wave will still send out, lose and hold from a
// moment on, in closed form. With psi = sum_i c_i u_i + rest,
// c_i = u_i^T M psi/(u_i^T M u_i), and lambda_ij = i (E_j - conj E_i), a
// form f (flow through a plane, absorption or probability in a layer) of what
// the states make up goes in time as
//
//	sum_ij conj(c_i) c_j f(u_i, u_j) exp(-lambda_ij t),
//
// pairs, which interfere, included. Its integral over time has 1/lambda
// instead of the exponential, its first moment 1/lambda^2. Bound states stay.
//
// Times are continued as the ledger takes them, once a step, for ever: its sums
// are of spectral accuracy because the flow vanishes at both ends, and one
// that breaks off and goes on as an integral is not. With the factor r by which
// a step multiplies a pair, the geometric series give the mean delay
// (dt/2)(1+r)/(1-r) where the integral has 1/lambda. A run in steps of one size
// takes r = exp(-lambda dt), so that no phase error of the step is carried on.
type Tail struct {
	Time        float64 // the moment
	Step        float64 // dt
	Held        []Held  // the states
	Left, Right Passage // what will pass the planes
	Lost        []float64
	Dwell       []float64
	Rest        float64 // probability between the planes of what the states do not span
	Cross       float64 // what rest and states have between the planes by interfering, each state's modulus: nobody's yet
	Error       TailError
	now         stepping
}

// Held is what a state holds at the moment of the tail.
type Held struct {
	State       *Eigenstate
	Amplitude   complex128
	Probability float64 // between the planes, of the state alone
	Bound       bool
}

// TailError bounds the error of a tail, from what is known of the eigenpairs.
type TailError struct {
	Probability           float64 // of each probability
	FirstLeft, FirstRight float64 // of the flux-weighted sums of times
	Dwell                 float64
}

// stepping is how the stepper steps at present, or, where exact, steps of the
// same length without an error of phase.
type stepping struct {
	pade       Pade
	dt, origin float64
	exact      bool
}

// change is r-1 for the pair u, v: r = conj(R(z_u)) R(z_v), R the step and
// z = -i dt (E - origin), with
//
//	r = product over the poles p of 1 + 2 Re(p) s/((z_v-p) conj(z_u-p)),
//	s = z_v + conj z_u = -lambda dt,
//
// which keeps its relative accuracy however small lambda is.
func (s stepping) change(u, v *Eigenstate) complex128 {
	z := func(w *Eigenstate) complex128 {
		return complex(-w.Width()/2*s.dt, -(real(w.Energy)-s.origin)*s.dt)
	}
	zu, zv, sum, change := z(u), z(v), -rate(u, v)*complex(s.dt, 0), complex(0, 0)
	if s.exact {
		return expm1(sum)
	}
	for _, p := range s.pade.Poles {
		w := complex(2*real(p), 0) * sum / ((zv - p) * cmplx.Conj(zu-p))
		change += w + change*w
	}
	return change
}

// expm1 is exp(x) - 1.
func expm1(x complex128) complex128 {
	if cmplx.Abs(x) > 1e-3 {
		return cmplx.Exp(x) - 1
	}
	return x * (1 + x/2*(1+x/3*(1+x/4*(1+x/5)))) // the next term is x^5/720
}

// delay is the mean delay of a pair.
func (s stepping) delay(u, v *Eigenstate) complex128 {
	c := s.change(u, v)
	return complex(-s.dt/2, 0) * (2 + c) / c
}

// stepping is that of the present gear.
func (s *Stepper) stepping() stepping { return stepping{s.Pade, s.Step, s.Origin, false} }

// splitter splits waves of one mesh into eigenstates and a rest.
type splitter struct {
	mesh   *Mesh
	states []*Eigenstate
	c      []complex128
	rest   wave
}

func newSplitter(m *Mesh, states []*Eigenstate) *splitter {
	return &splitter{mesh: m, states: states, c: make([]complex128, len(states)), rest: newWave(m)}
}

// split takes the states off psi one after the other, so that what one of them
// leaves of another by rounding is taken by that.
func (p *splitter) split(psi wave) {
	copy(p.rest.all, psi.all)
	clear(p.c)
	for range 2 {
		for i, u := range p.states {
			c := p.mesh.product(u.wave, p.rest) / u.Norm
			p.c[i] += c
			for n, v := range u.all {
				p.rest.all[n] -= c * v
			}
		}
	}
}

// remaining is the probability between the planes of the rest, and the modulus
// of what it adds to that of the states by interference.
func (p *splitter) remaining() (rest, cross float64) {
	m := p.mesh
	for i, u := range p.states {
		cross += 2 * cmplx.Abs(p.c[i]*m.overlap(m.left, m.right, p.rest, u.wave))
	}
	return m.norm(m.left, m.right, p.rest), cross
}

// flow is the mean flow through a plane over the last step that belongs to the
// states: what they had to send before it, less what they have now.
func (p *splitter) flow(now stepping, right bool) float64 {
	total := 0.0
	for i, u := range p.states {
		for j, v := range p.states[:i+1] {
			lambda, c := rate(u, v), now.change(u, v)
			if lambda == 0 {
				continue // a bound state sends nothing
			}
			f := u.left.flow(v.left)
			if right {
				f = u.right.flow(v.right)
			}
			total -= twice(i, j) * real(cmplx.Conj(p.c[i])*p.c[j]*f/lambda*c/(1+c))
		}
	}
	return total / now.dt
}

// twice counts pairs of different states in both orders.
func twice(i, j int) float64 {
	if i == j {
		return 1
	}
	return 2
}

// rate is lambda of a pair. Its real part is taken from the widths, which are
// exact to their last digits where imaginary parts of energies are not.
func rate(u, v *Eigenstate) complex128 {
	return complex((u.Width()+v.Width())/2, real(v.Energy)-real(u.Energy))
}

// tail closes the split: what the states will still do.
func (p *splitter) tail(time float64, now stepping) *Tail {
	m := p.mesh
	t := &Tail{
		Time: time, Step: now.dt, now: now, Lost: make([]float64, len(m.layerSpan)), Dwell: make([]float64, len(m.layerSpan)),
	}
	t.Rest, t.Cross = p.remaining()
	for i, u := range p.states {
		t.Held = append(t.Held, Held{u, p.c[i], square(p.c[i]) * u.Inside(), u.Bound()})
	}
	for i := range p.states {
		for j := range i + 1 {
			if !t.Held[i].Bound || !t.Held[j].Bound {
				t.pair(i, j)
			}
		}
	}
	return t
}

// pair adds what two states do together, or one with itself.
func (t *Tail) pair(i, j int) {
	u, v := t.Held[i].State, t.Held[j].State
	lambda := rate(u, v)
	a := cmplx.Conj(t.Held[i].Amplitude) * t.Held[j].Amplitude * complex(twice(i, j), 0)
	doubt := t.doubt(i, j)
	left, right := a*u.left.flow(v.left), a*u.right.flow(v.right)
	delay := t.now.delay(u, v)
	t.Left.collect(t.Time, t.Step, left/lambda, delay)
	t.Right.collect(t.Time, t.Step, right/lambda, delay)
	passed := cmplx.Abs(left/lambda) + cmplx.Abs(right/lambda)
	size := func(f complex128) float64 { return doubt * (cmplx.Abs(f/lambda)*t.Time + 2*cmplx.Abs(f/lambda*delay)) }
	t.Error.FirstLeft += size(left)
	t.Error.FirstRight += size(right)
	for n, span := range u.mesh.layerSpan {
		t.Lost[n] += real(a * u.mesh.absorption(n, u.wave, v.wave) / lambda)
		d := a * u.mesh.overlap(span[0], span[1], u.wave, v.wave) * delay
		t.Dwell[n] += real(d)
		t.Error.Dwell += doubt * cmplx.Abs(d)
		passed += cmplx.Abs(a * u.mesh.absorption(n, u.wave, v.wave) / lambda)
	}
	t.Error.Probability += doubt * passed
}

// doubt is the relative error of what a pair does: of the rates, by the
// uncertainty of its energies and widths, and of the mixing of the two
// states, by how far they are from orthogonal.
func (t *Tail) doubt(i, j int) float64 {
	u, v := t.Held[i].State, t.Held[j].State
	if i == j {
		return u.WidthError / u.Width()
	}
	mixed := cmplx.Abs(u.mesh.product(u.wave, v.wave)) / math.Sqrt(cmplx.Abs(u.Norm*v.Norm))
	return mixed + (u.EnergyError+v.EnergyError)/cmplx.Abs(rate(u, v))
}

// collect adds the probability q, real part of a term, that passes with a mean
// delay after a time, in steps dt.
func (p *Passage) collect(time, dt float64, term, delay complex128) {
	q := real(term)
	first := real(term * delay)
	second := real(term * (2*delay*delay - complex(dt*dt/4, 0)))
	p.Probability += q
	p.flux += q
	p.first += time*q + first
	p.second += time*time*q + 2*time*first + second
}

func (p Passage) less(o Passage) Passage {
	return Passage{p.Probability - o.Probability, p.flux - o.flux, p.first - o.first, p.second - o.second}
}

// Plus is what has passed in two passages.
func (p Passage) Plus(o Passage) Passage {
	return Passage{p.Probability + o.Probability, p.flux + o.flux, p.first + o.first, p.second + o.second}
}

// less is the difference of two tails in what passes the planes and in the
// dwell times.
func (t *Tail) less(o *Tail) *Tail {
	d := &Tail{Left: t.Left.less(o.Left), Right: t.Right.less(o.Right), Dwell: slices.Clone(t.Dwell)}
	for i, v := range o.Dwell {
		d.Dwell[i] -= v
	}
	return d
}

// plus adds to a tail what is owed to it; nil is nothing.
func (t *Tail) plus(owed *Tail) *Tail {
	if owed == nil {
		return t
	}
	t.Left, t.Right = t.Left.Plus(owed.Left), t.Right.Plus(owed.Right)
	for i, v := range owed.Dwell {
		t.Dwell[i] += v
	}
	return t
}

// TotalLost is what all layers will absorb.
func (t *Tail) TotalLost() float64 { return sum(t.Lost) }

// TotalDwell is the time in all layers to come.
func (t *Tail) TotalDwell() float64 { return sum(t.Dwell) }

// Trapped is what stays between the planes: the bound states and the rest.
func (t *Tail) Trapped() float64 {
	total := t.Rest
	for _, h := range t.Held {
		if h.Bound {
			total += h.Probability
		}
	}
	return total
}
