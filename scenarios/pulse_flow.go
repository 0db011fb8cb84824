package scenarios

import (
	"math"

	"gonum.org/v1/gonum/dsp/fourier"

	"fluxtoll/potential"
	"fluxtoll/propagate"
)

// outgoing is what passed one plane, as a band of energies: the discrete
// Fourier transform of psi over the steps of the first size, over which all
// but little passes. Each of its frequencies theta is one energy, by the very
// phase of the step.
type outgoing struct {
	lead    potential.Lead
	stretch *propagate.Stretch
	psi     []complex128 // transform, by frequency 2 pi j/len
	smooth  []complex128 // the same of psi that goes on and fades instead of breaking off
	origin  float64
	pade    propagate.Pade
	late    float64 // probability that passed in longer steps
	flowed  float64 // probability that passed before, or passes in a tail, by continuity
}

// out transforms the record at a plane.
func (t *Trial) out(far bool) outgoing {
	right := far == (t.Plan.side == FromLeft)
	near, beyond := t.Scenario.leads()
	lead := near
	if far {
		lead = beyond
	}
	r := t.record
	first := &r.Stretches[0]
	trace := traceAt(first, right)
	o := outgoing{lead: lead, stretch: first, origin: first.Origin, pade: r.Pade}
	for i := range r.Stretches {
		p := &r.Stretches[i]
		for _, q := range traceAt(p, right).Flow {
			if i == 0 {
				o.flowed += q * p.Step
			} else {
				o.late += q * p.Step
			}
		}
	}
	if tail := t.Run.Tail(); tail != nil {
		o.flowed += tail.TailMoments(right)[0]
	}
	padded := make([]complex128, powerOfTwo(2*len(trace.Psi)))
	copy(padded, trace.Psi)
	fft := fourier.NewCmplxFFT(len(padded))
	o.psi = fft.Coefficients(nil, padded)
	fade(padded[len(trace.Psi):], r.Continued(right, len(padded)-len(trace.Psi)))
	o.smooth = fft.Coefficients(nil, padded)
	return o
}

// fade writes a wave that fades: a series that broke off would ring.
func fade(out, wave []complex128) {
	for i, v := range wave {
		c := math.Cos(math.Pi / 2 * float64(i+1) / float64(len(wave)+1))
		out[i] = v * complex(c*c, 0)
	}
}

func traceAt(s *propagate.Stretch, right bool) *propagate.Trace {
	if right {
		return &s.Right
	}
	return &s.Left
}

// powerOfTwo is the least that is not below n.
func powerOfTwo(n int) int {
	p := 1
	for p < n {
		p *= 2
	}
	return p
}

// signed is the frequency of a coefficient, from -len/2 to len/2.
func (o *outgoing) signed(j int) int {
	if j > len(o.psi)/2 {
		return j - len(o.psi)
	}
	return j
}

// energy is that of a coefficient, and d(theta)/dE: psi goes as
// exp(-i n theta), and the transform as exp(-2 pi i j n/len).
func (o *outgoing) energy(j int) (e, slope float64) {
	y := o.pade.Energy(-2 * math.Pi * float64(o.signed(j)) / float64(len(o.psi)))
	_, s := o.pade.Phase(y)
	return o.origin + y/o.stretch.Step, s * o.stretch.Step
}

// energyMeans are means over what passed the plane: probability, energy and
// square of its distance from a reference, and 1/v in a lead.
type energyMeans struct{ probability, energy, spread, slowness float64 }

// energies sums v theta' |psi|^2/len over the frequencies: by Parseval's
// theorem 2 pi times the integral of v |a(E)|^2 over E.
func (o *outgoing) energies(slow potential.Lead) energyMeans {
	var sum, first, second, slowness float64
	for j, c := range o.psi {
		e, slope := o.energy(j)
		k := wave(o.lead, e)
		p := k / o.lead.Mass * slope * square(c) / float64(len(o.psi))
		d := e - o.origin
		sum += p
		first += p * d
		second += p * d * d
		if q := wave(slow, e); q > 0 {
			slowness += p * slow.Mass / q
		}
	}
	return newEnergies(sum, first, second, slowness, o.origin)
}

// energiesOf are the means over what passed; where states of a tail go on after
// the last step, over the amplitudes at the energies that the averages are
// taken at.
func (t *Trial) energiesOf(o *outgoing, slow potential.Lead, far bool) energyMeans {
	if t.Run.Tail() == nil {
		return o.energies(slow)
	}
	s := t.shooter()
	reader := s.back
	if far {
		reader = s.through
	}
	var sum, first, second, slowness float64
	for _, n := range t.Averages.Nodes {
		e := n.Amplitudes.Energy
		q := wave(o.lead, e)
		if q == 0 {
			continue
		}
		a := square(reader.At(e).Amplitude / s.incoming(n.K))
		p := n.Weight * a * q * s.near.Mass / (n.K * o.lead.Mass)
		d := e - o.origin
		sum += p
		first += p * d
		second += p * d * d
		if v := wave(slow, e); v > 0 {
			slowness += p * slow.Mass / v
		}
	}
	return newEnergies(sum, first, second, slowness, o.origin)
}

func newEnergies(sum, first, second, slowness, origin float64) energyMeans {
	mean := ratio(first, sum)
	return energyMeans{
		probability: sum, energy: origin + mean,
		spread:   math.Sqrt(math.Max(0, ratio(second, sum)-mean*mean)),
		slowness: ratio(slowness, sum),
	}
}

// Most points of a fine series, and how many go to a step where few are
// enough.
const (
	finePoints = 1 << 18
	finePart   = 16
)

// series is a flow at equal intervals.
type series struct {
	step float64
	flow []float64
}

// at is the time of a point.
func (s series) at(i int) float64 { return s.step * float64(i) }

// fine is the flow Re(conj(psi) k psi)/m outward between the steps, of a wave
// that has no energies but those of the record: its band-limited interpolation.
func (o *outgoing) fine() series {
	n := len(o.psi)
	finer := 1
	for finer < finePart && finer*n < finePoints {
		finer *= 2
	}
	psi, pull := make([]complex128, finer*n), make([]complex128, finer*n)
	for j, c := range o.smooth {
		e, _ := o.energy(j)
		at := o.signed(j)
		if at < 0 {
			at += finer * n
		}
		psi[at] = c
		pull[at] = c * complex(wave(o.lead, e)/o.lead.Mass, 0)
	}
	fft := fourier.NewCmplxFFT(finer * n)
	psi, pull = fft.Sequence(nil, psi), fft.Sequence(nil, pull)
	out := series{step: o.stretch.Step / float64(finer), flow: make([]float64, finer*len(o.stretch.Left.Flow)+1)}
	scale := 1 / (float64(n) * float64(n))
	for i := range out.flow {
		out.flow[i] = scale * (real(psi[i])*real(pull[i]) + imag(psi[i])*imag(pull[i]))
	}
	return out
}
