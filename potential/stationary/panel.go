package stationary

import (
	"context"
	"math"
	"runtime"
	"sync"
	"sync/atomic"
)

// panel is one interval of a stretch with the rule's sums over it.
type panel struct {
	stretch *stretch
	order   int
	lo, hi  float64 // in x
	value   []float64
	err     []float64 // of the quadrature
	size    [sums]float64
	noise   rounding
	nodes   []Node
}

func (p *panel) divisible() bool { return p.hi-p.lo > 1e-14*p.hi }

// modulus is the integral of the integrand's modulus; those of the layers are
// positive.
func (p *panel) modulus(j int) float64 {
	if j < sums {
		return p.size[j]
	}
	return p.value[j]
}

func (p *panel) exceeds(wanted []float64) bool {
	for j, w := range wanted {
		if p.err[j] > w && p.err[j] > caution*p.noise.of(j, p.value) {
			return true
		}
	}
	return false
}

// halves returns the two halves, in ascending k.
func (p *panel) halves() (a, b *panel) {
	mid := p.lo + (p.hi-p.lo)/2
	a = &panel{stretch: p.stretch, order: p.order, lo: p.lo, hi: mid}
	b = &panel{stretch: p.stretch, order: p.order, lo: mid, hi: p.hi}
	if p.stretch.sign < 0 {
		return b, a
	}
	return a, b
}

// evaluate fills the panels, on all processors where that pays. Which
// processor takes which panel does not matter to the result.
func (q *quadrature) evaluate(ctx context.Context, panels []*panel) error {
	q.used += len(panels) * len(kronrodNodes)
	workers := min(runtime.GOMAXPROCS(0), len(panels))
	// About 0.2 us an element: below this a goroutine costs what it saves.
	const worth = 1000
	if len(panels)*len(kronrodNodes)*(len(q.solver.elements)+20*len(q.solver.smooths)) < worth {
		workers = 1
	}
	errs := make([]error, len(panels))
	var next atomic.Int64
	work := func(s *Solver) {
		r := rule{quadrature: q, solver: s, rows: make([]float64, len(kronrodNodes)*(sums+s.layers))}
		for i := int(next.Add(1)) - 1; i < len(panels); i = int(next.Add(1)) - 1 {
			if errs[i] = ctx.Err(); errs[i] == nil {
				errs[i] = r.fill(panels[i])
			}
		}
	}
	var group sync.WaitGroup
	for range workers - 1 {
		clone := q.solver.Clone()
		group.Go(func() { work(clone) })
	}
	work(q.solver)
	group.Wait()
	for _, err := range errs {
		if err != nil {
			return err
		}
	}
	return nil
}

// rule applies the Gauss-Kronrod rule to panels, one after the other.
type rule struct {
	quadrature *quadrature
	solver     *Solver
	rows       []float64 // integrands at the nodes
	a          Amplitudes
}

// fill computes a panel's sums and errors.
func (r *rule) fill(p *panel) error {
	n := sums + r.solver.layers
	half := (p.hi - p.lo) / 2
	p.value, p.err = make([]float64, n), make([]float64, n)
	p.nodes = make([]Node, len(kronrodNodes))
	for i, y := range kronrodNodes {
		at := i
		if p.stretch.sign < 0 {
			at = len(kronrodNodes) - 1 - i
		}
		x := p.lo + half*(1+y)
		if err := r.node(p, x, half*kronrodWeights[i], r.rows[i*n:(i+1)*n], &p.nodes[at]); err != nil {
			return err
		}
	}
	for j := range p.value {
		r.estimate(p, j, n, half)
	}
	return nil
}

// node evaluates the integrands at x into row, the node for the record, and
// adds to the panel's rounding; weight is the rule's in x.
func (r *rule) node(p *panel, x, weight float64, row []float64, node *Node) error {
	s, a := r.solver, &r.a
	if err := s.at(s.levelAt(p.stretch, x), a); err != nil {
		return err
	}
	k, dk := p.stretch.at(x)
	spectrum := r.quadrature.spectrum
	logDensity := spectrum.logDensity(k)
	g := dk * math.Exp(logDensity)
	t := 0.0
	if a.SpeedOut > 0 {
		t = dk * math.Exp(logDensity+a.LogTransmission-r.quadrature.window.peak)
	}
	integrands(row, a, g, t)
	p.noise.add(a, weight*g, weight*t, k*math.Abs(k-spectrum.K0)/(spectrum.Width*spectrum.Width))
	*node = Node{K: k, Weight: weight * g, Amplitudes: *a}
	node.Amplitudes.LayerDwell, node.Amplitudes.LayerLoss = nil, nil
	return nil
}

// integrands fills row from the amplitudes; g is |phi|^2 and t |phi|^2 T.
func integrands(row []float64, a *Amplitudes, g, t float64) {
	row[sumOne] = g
	row[sumSlow] = g / a.SpeedIn
	row[sumT], row[sumDelayT], row[sumSlowInT], row[sumSlowOutT] = 0, 0, 0, 0
	if t > 0 {
		row[sumT] = t
		row[sumDelayT] = t * a.GroupDelayTransmitted
		row[sumSlowInT] = t / a.SpeedIn
		row[sumSlowOutT] = t / a.SpeedOut
	}
	row[sumR] = g * a.Reflection
	row[sumDelayR] = g * a.Reflection * a.GroupDelayReflected
	row[sumSlowR] = g * a.Reflection / a.SpeedIn
	row[sumA] = g * a.Absorption
	row[sumDwell] = g * a.Dwell
	for i, d := range a.LayerDwell {
		row[sums+i] = g * d
	}
}

// caution is by how much the difference of the two rules is multiplied where
// it is not small enough for more to be read into it.
const caution = 4

// estimate sets value, error and modulus of sum j. The error is the difference
// between the two rules with some caution, or, where that is small, the
// measure of QUADPACK, which takes into account that the larger rule is then
// far better than the difference.
func (r *rule) estimate(p *panel, j, n int, half float64) {
	kronrod, gauss, modulus := 0.0, 0.0, 0.0
	for i, w := range kronrodWeights {
		f := r.rows[i*n+j]
		kronrod += w * f
		modulus += w * math.Abs(f)
		if i%2 == 1 {
			gauss += legendreWeights[i/2] * f
		}
	}
	spread := 0.0
	for i, w := range kronrodWeights {
		spread += w * math.Abs(r.rows[i*n+j]-kronrod/2)
	}
	difference := math.Abs(kronrod - gauss)
	if spread > 0 {
		difference = min(caution*difference, spread*math.Pow(200*difference/spread, 1.5))
	}
	p.value[j], p.err[j] = half*kronrod, half*difference
	if j < sums {
		p.size[j] = half * modulus
	}
}
