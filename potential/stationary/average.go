package stationary

import (
	"context"
	"errors"
	"fmt"
	"math"
)

// ErrEvaluations says that Average reached Options.MaxEvaluations. What it
// returned with it is as good as its errors say.
var ErrEvaluations = errors.New("stationary: the limit of evaluations was reached before the wanted accuracy")

// Mean is an average and the bound of its error: quadrature, truncation and
// rounding together.
type Mean struct{ Value, Error float64 }

// Averages are averages over the momentum spectrum of a packet.
//
// A mean over what is transmitted has no meaning where nothing is: then
// Transmitted.Value is 0 and so are GroupDelayTransmitted and the two
// slownesses; likewise for what is reflected. Where Transmitted merely
// underflows they hold, since they are averaged in logarithmic scale.
type Averages struct {
	// Transmitted, Reflected and Lost are the integrals of |phi|^2 {T, R, A}
	// over k from 0 to infinity.
	Transmitted, Reflected, Lost Mean
	// LogTransmitted is the natural logarithm of Transmitted, -Inf if nothing
	// is transmitted.
	LogTransmitted float64
	// Mean delays over |phi|^2 T and |phi|^2 R.
	GroupDelayTransmitted, GroupDelayReflected Mean
	// Means of 1/v in the incident (In) and far (Out) lead over |phi|^2 T, of
	// 1/v in the incident lead over |phi|^2 R and over |phi|^2 alone. Where
	// the spectrum reaches k = 0 the last two diverge logarithmically; they
	// are cut at 1e-12 of the width and their errors say what that hides.
	SlownessInTransmitted, SlownessOutTransmitted Mean
	SlownessInReflected                           Mean
	SlownessFree                                  Mean
	// Dwell is the integral of |phi|^2 times the dwell time; LayerDwell are
	// its parts and LayerLost those of Lost, in the order of the layers.
	Dwell                 Mean
	LayerDwell, LayerLost []Mean
	// Nodes are the quadrature points of the final panels, in ascending K.
	Nodes       []Node
	Evaluations int
	// Resonances are the poles found within the band, in ascending Energy.
	Resonances []Pole
	// Unresolved counts resonances too narrow for double precision; what they
	// may add is in the errors.
	Unresolved int
}

// Node is a quadrature point: Weight is |phi(K)|^2 dk. Its Amplitudes are
// without LayerDwell and LayerLoss.
type Node struct {
	K, Weight  float64
	Amplitudes Amplitudes
}

// Options of Average; the zero value is ready for use.
type Options struct {
	// Relative is the wanted relative error of each average; default 1e-10.
	Relative float64
	// MaxEvaluations bounds the number of energies; default 200000.
	MaxEvaluations int
}

func (o Options) withDefaults() Options {
	if o.Relative == 0 {
		o.Relative = 1e-10
	}
	if o.MaxEvaluations == 0 {
		o.MaxEvaluations = 200000
	}
	return o
}

// Average averages over a packet's spectrum by adaptive Gauss-Kronrod
// quadrature, one subdivision for all averages, refined until each has the
// wanted relative error or nothing but rounding is left. Thresholds and narrow
// resonances are found beforehand and the panels laid around them.
//
// If MaxEvaluations is reached it returns what it has, with its errors, and
// ErrEvaluations. The result does not depend on the number of processors.
func (s *Solver) Average(ctx context.Context, spectrum Spectrum, opt Options) (*Averages, error) {
	opt = opt.withDefaults()
	if err := spectrum.check(); err != nil {
		return nil, err
	}
	if !(opt.Relative > 0 && opt.Relative < 1) || opt.MaxEvaluations < 0 {
		return nil, fmt.Errorf("stationary: options need 0 < Relative < 1 and MaxEvaluations > 0, not %g and %d", opt.Relative, opt.MaxEvaluations)
	}
	w, count, err := s.window(spectrum, opt.Relative)
	if err != nil {
		return nil, err
	}
	q := &quadrature{solver: s, spectrum: spectrum, options: opt, window: w, used: count}
	limit := q.run(ctx)
	if limit != nil && !errors.Is(limit, ErrEvaluations) {
		return nil, limit
	}
	out, err := q.averages()
	if err != nil {
		return nil, err
	}
	return out, limit
}

// run lays the panels and refines them.
func (q *quadrature) run(ctx context.Context) error {
	limit := q.survey(ctx)
	if limit != nil && !errors.Is(limit, ErrEvaluations) {
		return limit
	}
	if err := q.begin(ctx); err != nil {
		return err
	}
	if err := q.refine(ctx); err != nil {
		return err
	}
	return limit
}

// survey looks for resonances on every stretch of the window.
func (q *quadrature) survey(ctx context.Context) error {
	s := q.solver
	q.stretches = s.stretches(q.window.lo, q.window.hi)
	widest := func(energy float64) float64 {
		const widths = 2
		return widths * q.spectrum.Width * math.Sqrt(2*(energy-s.near.Height)/s.near.Mass)
	}
	var limit error
	for _, st := range q.stretches {
		h := hunt{solver: s, stretch: st, budget: q.options.MaxEvaluations/2 - q.used}
		if err := h.search(ctx, 8); err != nil {
			return err
		}
		q.used += len(h.probes)
		q.poles = append(q.poles, h.poles(widest)...)
		q.unresolved = append(q.unresolved, h.unresolved...)
		if h.limit != nil {
			limit = h.limit
		}
	}
	q.poles = distinct(q.poles)
	for _, p := range q.poles {
		q.raise(p.Energy)
	}
	return limit
}

// raise lifts the scale of what is transmitted to its height at an energy, so
// that no resonance overflows it.
func (q *quadrature) raise(energy float64) {
	var a Amplitudes
	if q.solver.At(energy, &a) != nil {
		return // the panels will meet the error and report it
	}
	q.used++
	k := q.solver.incidentWave(energy)
	q.window.peak = max(q.window.peak, q.spectrum.logDensity(k)+a.LogTransmission)
}

// averages turns the sums into means.
func (q *quadrature) averages() (*Averages, error) {
	t := q.totals
	a := &Averages{
		Reflected: t.mean(sumR), Lost: t.mean(sumA), Dwell: t.mean(sumDwell),
		GroupDelayReflected: t.ratio(sumDelayR, sumR),
		SlownessInReflected: t.ratio(sumSlowR, sumR),
		SlownessFree:        t.ratio(sumSlow, sumOne),
		Evaluations:         q.used, Resonances: q.poles,
		LogTransmitted: math.Inf(-1),
	}
	if peak := q.window.peak; !math.IsInf(peak, -1) && t.value[sumT] > 0 {
		scale := math.Exp(peak)
		a.Transmitted = Mean{scale * t.value[sumT], scale * t.err[sumT]}
		a.LogTransmitted = peak + math.Log(t.value[sumT])
		a.GroupDelayTransmitted = t.ratio(sumDelayT, sumT)
		a.SlownessInTransmitted = t.ratio(sumSlowInT, sumT)
		a.SlownessOutTransmitted = t.ratio(sumSlowOutT, sumT)
	}
	q.fillLayers(a)
	for _, g := range q.unresolved {
		a.Unresolved += g.hidden()
	}
	for _, p := range q.panels {
		a.Nodes = append(a.Nodes, p.nodes...)
	}
	return a, a.check()
}

// fillLayers fills the parts of Dwell and Lost.
func (q *quadrature) fillLayers(a *Averages) {
	n := q.solver.layers
	a.LayerDwell, a.LayerLost = make([]Mean, n), make([]Mean, n)
	for i := range n {
		a.LayerDwell[i] = q.totals.mean(sums + i)
	}
	for i := range q.solver.elements {
		if e := &q.solver.elements[i]; e.loss > 0 {
			d := a.LayerDwell[e.layer]
			a.LayerLost[e.layer] = Mean{2 * e.loss * d.Value, 2 * e.loss * d.Error}
		}
	}
}

// check refuses what is not finite.
func (a *Averages) check() error {
	for _, m := range []Mean{
		a.Transmitted, a.Reflected, a.Lost, a.Dwell, a.GroupDelayTransmitted, a.GroupDelayReflected,
		a.SlownessInTransmitted, a.SlownessOutTransmitted, a.SlownessInReflected, a.SlownessFree,
	} {
		if v := m.Value + m.Error; math.IsNaN(v) || math.IsInf(v, 0) {
			return errors.New("stationary: an average is not finite: a height, mass or thickness is beyond the range of double precision")
		}
	}
	return nil
}
