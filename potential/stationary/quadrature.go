package stationary

import (
	"context"
	"math"
	"slices"
)

// What is integrated over k: first these, then one dwell time for each layer.
// Those of what is transmitted are over exp(window.peak).
const (
	sumOne = iota // |phi|^2
	sumSlow
	sumT
	sumDelayT
	sumSlowInT
	sumSlowOutT
	sumR
	sumDelayR
	sumSlowR
	sumA
	sumDwell
	sums // their number
)

// quadrature is the state of one Average.
type quadrature struct {
	solver     *Solver
	spectrum   Spectrum
	options    Options
	window     window
	stretches  []*stretch
	poles      []Pole
	unresolved []gap
	panels     []*panel  // in ascending k
	rest       []float64 // bounds of what the panels do not see
	used       int
	totals     totals
}

// totals are the sums over all panels: value, error of quadrature, integral of
// the modulus, and what no refinement can mend (rounding and the rest).
type totals struct{ value, err, modulus, noise []float64 }

func (t *totals) mean(i int) Mean { return Mean{t.value[i], t.err[i]} }

// ratio is the quotient of two sums, 0 where the lower one is 0.
func (t *totals) ratio(i, j int) Mean {
	if t.value[j] == 0 {
		return Mean{}
	}
	v := t.value[i] / t.value[j]
	return Mean{v, (t.err[i] + math.Abs(v)*t.err[j]) / t.value[j]}
}

// begin lays the first panels: a few widths long, finer towards the
// resonances.
func (q *quadrature) begin(ctx context.Context) error {
	for i, st := range q.stretches {
		cuts := q.cuts(st)
		if st.sign < 0 {
			slices.Reverse(cuts)
		}
		for j := 1; j < len(cuts); j++ {
			p := &panel{stretch: st, order: i}
			p.lo, p.hi = min(cuts[j-1], cuts[j]), max(cuts[j-1], cuts[j])
			q.panels = append(q.panels, p)
		}
	}
	if err := q.evaluate(ctx, q.panels); err != nil {
		return err
	}
	var err error
	q.rest, err = q.outside()
	q.sum()
	return err
}

// cuts returns the faces of the first panels of a stretch, in ascending x.
func (q *quadrature) cuts(st *stretch) []float64 {
	const widths = 2.5
	a, _ := st.at(st.from)
	b, _ := st.at(st.to)
	lo, hi := min(a, b), max(a, b)
	n := int(math.Ceil((hi - lo) / (widths * q.spectrum.Width)))
	xs := []float64{st.from, st.to}
	for i := 1; i < n; i++ {
		xs = append(xs, st.x(lo+(hi-lo)*float64(i)/float64(n)))
	}
	for _, k := range q.ladder() {
		if k > lo && k < hi {
			xs = append(xs, st.x(k))
		}
	}
	slices.Sort(xs)
	return slices.CompactFunc(xs, func(a, b float64) bool { return math.Abs(b-a) <= 1e-14*b })
}

// ladder returns wave numbers around each narrow resonance: its centre and
// rungs at growing distances, until they are a width away or beyond the
// middle between it and the next.
func (q *quadrature) ladder() []float64 {
	const ratio = 4.0
	var ks, at, half []float64
	for _, p := range q.poles {
		if k := q.solver.incidentWave(p.Energy); k > 0 {
			at, half = append(at, k), append(half, p.Width/2*q.solver.near.Mass/k)
		}
	}
	for i, k := range at {
		farLeft, farRight := q.spectrum.Width, q.spectrum.Width
		if i > 0 {
			farLeft = min(farLeft, (k-at[i-1])/2)
		}
		if i+1 < len(at) {
			farRight = min(farRight, (at[i+1]-k)/2)
		}
		if half[i] > q.spectrum.Width/4 {
			continue
		}
		ks = append(ks, k)
		for d := half[i]; d < farLeft; d *= ratio {
			ks = append(ks, k-d)
		}
		for d := half[i]; d < farRight; d *= ratio {
			ks = append(ks, k+d)
		}
	}
	return ks
}

// refine halves panels until every sum is good enough.
func (q *quadrature) refine(ctx context.Context) error {
	for {
		marked := q.marked()
		if len(marked) == 0 {
			return nil
		}
		if q.used+2*len(kronrodNodes)*len(marked) > q.options.MaxEvaluations {
			return ErrEvaluations
		}
		var fresh []*panel
		for _, p := range marked {
			a, b := p.halves()
			fresh = append(fresh, a, b)
		}
		if err := q.evaluate(ctx, fresh); err != nil {
			return err
		}
		q.replace(marked, fresh)
		q.sum()
	}
}

// marked returns the panels whose share in an error that is still too large
// is more than an equal one, unless it is mere rounding.
func (q *quadrature) marked() []*panel {
	t := &q.totals
	wanted := make([]float64, len(t.value))
	late := false
	for j := range t.value {
		wanted[j] = math.Inf(1)
		if tolerance := max(q.options.Relative*t.modulus[j], t.noise[j]); t.err[j]-t.noise[j] > tolerance {
			wanted[j] = tolerance / float64(len(q.panels))
			late = true
		}
	}
	if !late {
		return nil
	}
	var out []*panel
	for _, p := range q.panels {
		if p.divisible() && p.exceeds(wanted) {
			out = append(out, p)
		}
	}
	return out
}

// replace puts the halves of the marked panels in their places.
func (q *quadrature) replace(marked, fresh []*panel) {
	next := make([]*panel, 0, len(q.panels)+len(marked))
	i := 0
	for _, p := range q.panels {
		if i < len(marked) && marked[i] == p {
			next = append(next, fresh[2*i], fresh[2*i+1])
			i++
		} else {
			next = append(next, p)
		}
	}
	q.panels = next
}

// sum adds the panels up, always in ascending k, and what lies outside.
func (q *quadrature) sum() {
	n := sums + q.solver.layers
	t := totals{make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)}
	var jitter [sums]float64
	for _, p := range q.panels {
		for j := range p.value {
			t.value[j] += p.value[j]
			t.err[j] += p.err[j]
			t.modulus[j] += p.modulus(j)
			if j < sums {
				t.noise[j] += p.noise.steady[j]
				jitter[j] += p.noise.jitter[j]
			} else {
				t.noise[j] += p.noise.of(j, p.value)
			}
		}
	}
	for j := range t.value {
		if j < sums {
			t.noise[j] += sigmas * math.Sqrt(jitter[j])
		}
		t.noise[j] += q.rest[j]
		t.err[j] += t.noise[j]
	}
	q.totals = t
}
