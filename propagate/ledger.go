package propagate

import (
	"math"
	"slices"
)

// Passage is what has passed a plane outward so far.
type Passage struct {
	Probability float64 // net, what lay beyond the plane at the start included
	flux        float64 // net flow through the plane
	first       float64 // flux-weighted sum of times
	second      float64 // flux-weighted sum of squared times
}

// Flux is the net probability that flowed outward through the plane.
func (p Passage) Flux() float64 { return p.flux }

// MeanTime is the flux-weighted mean time at the plane. It has no meaning
// where Flux is zero.
func (p Passage) MeanTime() float64 { return p.first / p.flux }

// Variance is the flux-weighted variance of the time at the plane.
func (p Passage) Variance() float64 {
	t := p.MeanTime()
	return p.second/p.flux - t*t
}

func (p *Passage) add(t, q float64) {
	p.Probability += q
	p.flux += q
	p.first += t * q
	p.second += t * t * q
}

// Ledger says where the probability is. What passes a plane in a step follows
// from the step's own continuity equation, so that
//
//	Left + Right + sum(Lost) + Inside = 1
//
// holds to rounding for every time step and every member of the family.
// Arrival times give each step's passage the middle of the step.
type Ledger struct {
	Time        float64
	Steps       int
	Left, Right Passage
	Lost        []float64 // absorbed so far, by layer
	Dwell       []float64 // time integral of the probability in each layer
	InLayer     []float64 // probability in each layer now
	FlowLeft    float64   // mean outward flow through the left plane in the last step, probability per time
	FlowRight   float64   // the same at the right plane
	FlowPeak    float64   // largest flow through either plane of late, forgotten by a fifth a step
	start       float64   // probability between the planes at t = 0
	since       float64   // time and number of steps when the present step size began
	sinceSteps  int
}

func newLedger(m *Mesh, psi wave) Ledger {
	n := len(m.layerSpan)
	l := Ledger{
		Lost: make([]float64, n), Dwell: make([]float64, n), InLayer: make([]float64, n),
		start: m.norm(m.left, m.right, psi),
	}
	l.Left.Probability = m.norm(m.real0, m.left, psi)
	l.Right.Probability = m.norm(m.right, m.real1, psi)
	return l
}

// forgotten is the part of a peak that is remembered a step later.
const forgotten = 0.8

// enter books one step.
func (l *Ledger) enter(dt, left, right float64, lost []float64) {
	mid := l.Time + dt/2
	l.Left.add(mid, left)
	l.Right.add(mid, right)
	for i, v := range lost {
		l.Lost[i] += v
	}
	l.FlowLeft, l.FlowRight = left/dt, right/dt
	l.FlowPeak = max(math.Abs(l.FlowLeft), math.Abs(l.FlowRight), forgotten*l.FlowPeak)
	l.Steps++
	l.Time = l.since + float64(l.Steps-l.sinceSteps)*dt
}

// mark notes that the step size changes now.
func (l *Ledger) mark() { l.since, l.sinceSteps = l.Time, l.Steps }

// TotalLost is the probability absorbed in all layers.
func (l *Ledger) TotalLost() float64 { return sum(l.Lost) }

// TotalDwell is the dwell time in all layers.
func (l *Ledger) TotalDwell() float64 { return sum(l.Dwell) }

// Remaining is what must still lie between the planes by continuity. It is
// good to rounding (1e-15); Stepper.Inside sums the wave function instead.
func (l *Ledger) Remaining() float64 { return l.start - l.Left.flux - l.Right.flux - l.TotalLost() }

// Clone returns a copy that later steps do not change.
func (l *Ledger) Clone() Ledger {
	c := *l
	c.Lost, c.Dwell, c.InLayer = slices.Clone(l.Lost), slices.Clone(l.Dwell), slices.Clone(l.InLayer)
	return c
}

func sum(v []float64) float64 {
	s := 0.0
	for _, x := range v {
		s += x
	}
	return s
}
