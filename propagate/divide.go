package propagate

import (
	"math"

	"fluxtoll/potential"
)

// divider fills a layout and counts its nodes; past the limit it only counts.
type divider struct {
	*Layout
	rule  *rule
	nodes float64
}

// full reports whether n more elements of the highest order would pass the
// limit.
func (d *divider) full(n float64) bool {
	return !(d.nodes+n*float64(d.resolution.Order) <= float64(d.resolution.MaxNodes))
}

func (d *divider) add(s stretch) {
	d.nodes += float64(s.order)
	if !d.full(0) {
		d.stretches = append(d.stretches, s)
	}
}

// count is the number of elements that [from, to] needs for wave number k.
func (d *divider) count(k, from, to float64) float64 {
	return math.Max(1, math.Ceil(k*(to-from)/d.resolution.Phase))
}

// uniform divides [from, to], in which the largest wave number is k, into
// equal elements.
func (d *divider) uniform(k, from, to float64, segment int) {
	if to <= from {
		return
	}
	n := d.count(k, from, to)
	if d.full(n) {
		d.nodes += n * float64(d.resolution.Order)
		return
	}
	length := (to - from) / n
	order := d.orderFor(k * length)
	at := from
	for i := range int(n) {
		next := from + (to-from)*float64(i+1)/n
		if i == int(n)-1 {
			next = to
		}
		d.add(stretch{at, next, length, order, segment})
		at = next
	}
}

// orderFor is the lowest order that resolves a phase as well as Order resolves
// Phase.
func (d *divider) orderFor(phase float64) int {
	goal := dispersionError(d.resolution.Order, d.resolution.Phase)
	for p := 2; p < d.resolution.Order; p++ {
		if dispersionError(p, phase) <= goal {
			return p
		}
	}
	return d.resolution.Order
}

// dispersionError is the natural logarithm of the relative error of the wave
// number on elements of order p, (1/2) (p!/(2p)!)^2 phase^(2p)/(2p+1)
// (M. Ainsworth, SIAM J. Numer. Anal. 42, 553 (2004), Theorem 3.1; from
// memory).
func dispersionError(p int, phase float64) float64 {
	a, _ := math.Lgamma(float64(p) + 1)
	b, _ := math.Lgamma(2*float64(p) + 1)
	return 2*(a-b) + 2*float64(p)*math.Log(phase) - math.Log(float64(4*p+2))
}

func (d *divider) lead(l potential.Lead, segment int, from, to float64) {
	d.uniform(d.waveNumber(l.Mass, l.Height, l.Height), from, to, segment)
}

// waveNumber is the largest |k| of the band for heights in [lo, hi].
func (d *divider) waveNumber(mass, lo, hi float64) float64 {
	e := math.Max(math.Abs(d.resolution.High-lo), math.Abs(d.resolution.Low-hi))
	return math.Sqrt(2 * mass * e)
}

func (d *divider) segment(g potential.Segment, i int) {
	if flatSegment(g) {
		d.flat(g, i)
		return
	}
	d.curved(g, i, g.From, g.To, 0)
}

// deadDepth is the depth, in decay lengths, beyond which a wave no longer
// matters: exp(-40) = 4e-18.
const deadDepth = 40

// flat divides a flat segment: evenly, or, where the whole band decays within
// it over many decay lengths, evenly near both faces and in ever longer
// elements between.
func (d *divider) flat(g potential.Segment, i int) {
	v, m := g.Height.At(g.From), g.Mass.At(g.From)
	k := d.waveNumber(m, v, v)
	if v > d.resolution.High {
		slowest := math.Sqrt(2 * m * (v - d.resolution.High))
		if skin := deadDepth / slowest; 2.5*skin < g.Length() {
			d.uniform(k, g.From, g.From+skin, i)
			d.middle(k, g.From+skin, g.To-skin, i)
			d.uniform(k, g.To-skin, g.To, i)
			return
		}
	}
	d.uniform(k, g.From, g.To, i)
}

// middle fills the dead inside of a thick barrier with elements that double
// in length towards its centre.
func (d *divider) middle(k, from, to float64, i int) {
	lengths := doubling(d.resolution.Phase/k, (to-from)/2)
	order, last := d.resolution.Order, len(lengths)-1
	x := from
	for _, h := range lengths {
		d.add(stretch{x, x + h, h, order, i})
		x += h
	}
	for n := last; n > 0; n-- {
		d.add(stretch{x, x + lengths[n], lengths[n], order, i})
		x += lengths[n]
	}
	d.add(stretch{x, to, to - x, order, i})
}

// doubling divides room into h, 2h, 4h ...; the last takes what is left.
func doubling(h, room float64) []float64 {
	var lengths []float64
	for room > 2*h {
		lengths = append(lengths, h)
		room -= h
		h *= 2
	}
	return append(lengths, room)
}

// mostHalvings ends the halving of a segment that no element resolves (a kink
// in a table, or rounding).
const mostHalvings = 40

// curved halves [from, to] until an element resolves both the waves and the
// course of height and mass. Past the limit it only counts, by the waves.
func (d *divider) curved(g potential.Segment, i int, from, to float64, depth int) {
	lo, hi := g.Height.Range(from, to)
	_, mass := g.Mass.Range(from, to)
	k := d.waveNumber(mass, lo, hi)
	if d.full(1) {
		d.nodes += d.count(k, from, to) * float64(d.resolution.Order)
		return
	}
	tolerance := d.resolution.Height
	if depth >= mostHalvings || k*(to-from) <= d.resolution.Phase &&
		d.resolved(g.Height, from, to, tolerance) &&
		d.resolved(g.Mass, from, to, mass*tolerance/(d.resolution.High-d.resolution.Low)) {
		d.add(stretch{from, to, to - from, d.resolution.Order, i})
		return
	}
	mid := (from + to) / 2
	d.curved(g, i, from, mid, depth+1)
	d.curved(g, i, mid, to, depth+1)
}

// resolved reports whether the upper quarter of the Legendre coefficients of p on
// [from, to] sum to less than tol.
func (d *divider) resolved(p potential.Profile, from, to, tol float64) bool {
	if n := p.Degree(); n >= 0 && n <= 3*d.rule.order/4 {
		return true
	}
	tail := 0.0
	for n := 3*d.rule.order/4 + 1; n < d.rule.order; n++ {
		c := 0.0
		for q, y := range d.rule.nodes {
			value, _ := legendreAt(n, 2*y-1)
			c += d.rule.weights[q] * value * p.At(from+(to-from)*y)
		}
		tail += math.Abs(c) * float64(2*n+1)
	}
	return tail <= tol
}
