package stationary

import (
	"math"
	"math/cmplx"
	"slices"
)

// Amplitudes describes the scattering state of one energy. Times are in units
// of hbar over the unit of energy.
//
// A delay of something that has no amplitude at all (of what is transmitted
// where Transmission is 0 because the far lead is closed, of what is reflected
// where Reflection is exactly 0) is given as 0. Where Transmission merely
// underflows, the delay still holds.
type Amplitudes struct {
	Energy            float64
	SpeedIn, SpeedOut float64 // k/m in the incident and the far lead; SpeedOut is 0 when the far lead is closed

	// Probabilities. Absorption is the sum of LayerLoss, computed from the
	// layers and not as what the other two leave.
	Transmission, Reflection, Absorption float64
	// LogTransmission is the natural logarithm of Transmission: finite where
	// Transmission underflows, -Inf when the far lead is closed.
	LogTransmission float64

	// T and R are the flux-normalised amplitudes: |T|^2 = Transmission,
	// |R|^2 = Reflection. The phase of T is from the near face to the far
	// face, that of R at the near face.
	T, R complex128

	// GroupDelayTransmitted is d(arg T)/dE, GroupDelayReflected d(arg R)/dE.
	GroupDelayTransmitted, GroupDelayReflected float64
	// Dwell is the integral of |psi|^2 over the structure (not the leads)
	// over the incident flux.
	Dwell float64
	// LayerDwell are its parts, LayerLoss the probability lost in each layer,
	// 2 loss LayerDwell; both in the order of the structure's layers, from
	// the left, whichever side the wave comes from.
	LayerDwell, LayerLoss []float64

	// rounding is the relative standard deviation of the amplitudes by
	// rounding, and sharpness |d(log a)/dE| with a = 1/T but for speeds: by how
	// much a relative change of the amplitudes exceeds the change of the
	// energy that makes it.
	rounding, sharpness float64
}

func (a *Amplitudes) finite() bool {
	sum := a.Transmission + a.Reflection + a.Absorption +
		a.GroupDelayTransmitted + a.GroupDelayReflected + a.Dwell
	return !math.IsNaN(sum) && !math.IsInf(sum, 0)
}

// split is the wave at the near face as incident and reflected part, of
// amplitudes in and out without the wave's common factor, with the
// logarithmic derivatives with respect to energy of v in and v out: the speed
// v in the lead turns no phase and takes away a 1/v^2 that would cancel. shift is what belongs to
// arg in' and delay to arg out' - arg in' by way of the far lead's speed.
type split struct {
	in, out             complex128
	inSquare, outSquare float64
	inLog, outLog       complex128
	speedIn, speedOut   float64
	shift, delay        float64
}

// divide splits the wave at the near face: psi = in exp(ikx) + out exp(-ikx),
// in = (u - i w/v)/2, out = (u + i w/v)/2. speedOut is 0 unless the far lead
// is open.
func (s *Solver) divide(l level) split {
	v := math.Sqrt(2 * l.near / s.near.Mass)
	w := &s.wave
	p := split{
		in:      complex((w.pu+w.qw/v)/2, (w.qu-w.pw/v)/2),
		out:     complex((w.pu-w.qw/v)/2, (w.qu+w.pw/v)/2),
		speedIn: v,
	}
	p.inSquare, p.outSquare = square(p.in), square(p.out)
	// d(v u)/dE with dv/dE = 1/(m v), over v
	du := w.du + w.u()/complex(s.near.Mass*v*v, 0)
	iw := complex(0, 1/v) * w.dw
	p.inLog = (du - iw) / 2 / p.in
	if p.outSquare > 0 {
		p.outLog = (du + iw) / 2 / p.out
	}
	if l.far > 0 {
		p.speedOut = w.speed
	}
	if w.open && !w.lossy {
		s.addThreshold(&p)
	}
	return p
}

// addThreshold adds what start left out: the derivatives by way of the speed
// in the far lead, d(speed)/dE = 1/(m speed). The wave is c + i speed s with c
// and s real, and the phases of in and out both change in proportion to
// n = Re(in_s conj(in_c)) = Re(out_s conj(out_c)), over |in|^2 and |out|^2.
//
// Where most is reflected the two nearly cancel; but |in|^2 - |out|^2 is the
// flux over the incident speed, which takes away the speed in the far lead, so
// that the delay of reflection stays finite at the threshold. Where little is
// reflected n is nearly 0 itself, and is formed with out in its place.
func (s *Solver) addThreshold(p *split) {
	w := &s.wave
	v := p.speedIn
	cu, cw := w.er*w.pu-w.ei*w.qu, w.er*w.pw-w.ei*w.qw
	su, sw := (w.er*w.qu+w.ei*w.pu)/w.speed, (w.er*w.qw+w.ei*w.pw)/w.speed
	n := (cu*su + cw*sw/(v*v)) / 4
	q := s.far.Mass * w.speed
	p.shift = n / p.inSquare / q
	switch {
	case p.outSquare > p.inSquare/2:
		p.delay = n / p.inSquare * (w.flux / q) / (v * p.outSquare)
	case p.outSquare > 0:
		out := p.out * complex(w.er, w.ei)
		p.delay = (su*real(out)+sw/v*imag(out))/(2*q*p.outSquare) - p.shift
	}
}

// resolve fills a from the wave at the near face.
func (s *Solver) resolve(l level, a *Amplitudes) {
	p := s.divide(l)
	w := &s.wave
	a.SpeedIn, a.SpeedOut = p.speedIn, p.speedOut
	a.Transmission, a.LogTransmission, a.T, a.GroupDelayTransmitted = 0, math.Inf(-1), 0, 0
	if p.speedOut > 0 {
		a.LogTransmission = math.Log(p.speedOut/p.speedIn) - 2*w.log - math.Log(p.inSquare)
		a.Transmission = math.Exp(a.LogTransmission)
		phase := p.in * complex(w.er, w.ei)
		a.T = cmplx.Conj(phase) * complex(math.Sqrt(a.Transmission)/cmplx.Abs(phase), 0)
		a.GroupDelayTransmitted = 0 - imag(p.inLog) - p.shift
	}
	a.Reflection = p.outSquare / p.inSquare
	a.R = p.out / p.in
	a.GroupDelayReflected = 0
	if p.outSquare > 0 {
		a.GroupDelayReflected = imag(p.outLog) - imag(p.inLog) + p.delay
	}
	a.sharpness = cmplx.Abs(p.inLog + complex(0, p.shift))
	a.rounding = w.noise.relative(p.speedIn, p.inSquare) + eps*(l.near*a.sharpness+math.Abs(w.log))/2
	s.tally(a, 1/(p.speedIn*p.inSquare))
}

// tally fills the dwell times and losses from what the crossing summed up.
func (s *Solver) tally(a *Amplitudes, scale float64) {
	a.LayerDwell = slices.Grow(a.LayerDwell[:0], s.layers)[:s.layers]
	a.LayerLoss = slices.Grow(a.LayerLoss[:0], s.layers)[:s.layers]
	a.Dwell, a.Absorption = 0, 0
	for i, t := range s.dwells {
		d := t.sum * scale
		if t.log != s.wave.log {
			d *= math.Exp(2 * (t.log - s.wave.log))
		}
		a.LayerDwell[i], a.LayerLoss[i] = d, 0
		a.Dwell += d
	}
	if !s.lossy {
		return
	}
	clear(a.LayerLoss)
	for i := range s.elements {
		// All segments of a layer lose alike.
		if e := &s.elements[i]; e.loss > 0 {
			a.LayerLoss[e.layer] = 2 * e.loss * a.LayerDwell[e.layer]
		}
	}
	for _, loss := range a.LayerLoss {
		a.Absorption += loss
	}
}
