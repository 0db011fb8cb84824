package propagate

import (
	"fmt"
	"math"

	"fluxtoll/potential"
)

// Resolution says how finely the elements resolve the waves of a band of
// energies.
type Resolution struct {
	Order     int     // order p of the elements (thin ones may have less)
	Phase     float64 // |k| h of an element at most, k the largest in the band
	Low, High float64 // the band of energies that the packet occupies
	Height    float64 // tolerance to which an element must resolve V(x)
	MaxNodes  int     // a layout with more nodes is refused
}

// Edge is a row of Count elements behind a plane, rotated into the complex
// plane by Angle (exterior complex scaling: B. Simon, Phys. Lett. A 71, 211
// (1979)). The first has length First, each next is Growth times longer.
type Edge struct {
	Count                int
	First, Growth, Angle float64
}

// Extent places the ends of the real part of the grid and the two planes.
// Left <= PlaneLeft < 0 and Width <= PlaneRight <= Right of the structure.
type Extent struct {
	Left, PlaneLeft, PlaneRight, Right float64
}

// Lead regions take these values where an element asks for its segment.
const (
	inEntry = -1
	inExit  = -2
)

// Stretch is one element before it has matrices.
type stretch struct {
	from, to float64
	order    int
	segment  int // index into the structure's segments, inEntry or inExit
}

// Layout is the division of the real axis into elements, and the two edges.
type Layout struct {
	structure           *potential.Structure
	resolution          Resolution
	extent              Extent
	stretches           []stretch
	leftEdge, rightEdge Edge
}

// SizeError says that a layout would need more nodes than allowed.
type SizeError struct {
	Nodes float64 // estimate
	Limit int
}

func (e *SizeError) Error() string {
	return fmt.Sprintf("the packet road would need about %.2g grid nodes; the limit is %d", e.Nodes, e.Limit)
}

// NewLayout divides the axis: element faces stand on every segment face and on
// both planes. A *SizeError is returned, without building anything, where the
// nodes would exceed Resolution.MaxNodes.
func NewLayout(s *potential.Structure, r Resolution, x Extent, left, right Edge) (*Layout, error) {
	l := &Layout{structure: s, resolution: r, extent: x, leftEdge: left, rightEdge: right}
	b := s.Width()
	if !(x.Left <= x.PlaneLeft && x.PlaneLeft < 0 && x.PlaneRight > b && x.Right >= x.PlaneRight) {
		panic("propagate: planes must lie outside the structure and inside the grid")
	}
	d := &divider{Layout: l, rule: newRule(r.Order)}
	d.lead(s.Entry, inEntry, x.Left, x.PlaneLeft)
	d.lead(s.Entry, inEntry, x.PlaneLeft, 0)
	for i, g := range s.Segments {
		d.segment(g, i)
	}
	d.lead(s.Exit, inExit, b, x.PlaneRight)
	d.lead(s.Exit, inExit, x.PlaneRight, x.Right)
	d.nodes += float64((left.Count + right.Count) * r.Order)
	if d.nodes > float64(r.MaxNodes) {
		return nil, &SizeError{Nodes: d.nodes, Limit: r.MaxNodes}
	}
	return l, nil
}

// divider fills a layout and counts its nodes; past the limit it only counts.
type divider struct {
	*Layout
	rule  *rule
	nodes float64
}

func (d *divider) add(from, to float64, order, segment int) {
	d.nodes += float64(order)
	if d.nodes <= float64(d.resolution.MaxNodes) {
		d.stretches = append(d.stretches, stretch{from, to, order, segment})
	}
}

// uniform divides [from, to], in which the largest wave number is k, into
// equal elements.
func (d *divider) uniform(k, from, to float64, segment int) {
	if to <= from {
		return
	}
	n := math.Max(1, math.Ceil(k*(to-from)/d.resolution.Phase))
	if d.nodes+n*float64(d.resolution.Order) > float64(d.resolution.MaxNodes) {
		d.nodes += n * float64(d.resolution.Order)
		return
	}
	order := d.orderFor(k * (to - from) / n)
	for i := range int(n) {
		a, b := from+(to-from)*float64(i)/n, from+(to-from)*float64(i+1)/n
		if i == int(n)-1 {
			b = to
		}
		d.add(a, b, order, segment)
	}
}

// orderFor is the lowest order that resolves a phase as well as Order resolves
// Phase, by the dispersion error of order-p elements,
// (1/2) (p!/(2p)!)^2 phase^(2p)/(2p+1) (M. Ainsworth, SIAM J. Numer. Anal. 42,
// 553 (2004), Theorem 3.1; from memory).
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
// number on elements of order p.
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
	if potential.IsConstant(g.Height) && potential.IsConstant(g.Mass) {
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
	var lengths []float64
	h, room := d.resolution.Phase/k, (to-from)/2
	for room > 2*h {
		lengths = append(lengths, h)
		room -= h
		h *= 2
	}
	lengths = append(lengths, room)
	x := from
	for _, h := range lengths {
		d.add(x, x+h, d.resolution.Order, i)
		x += h
	}
	for n := len(lengths) - 1; n >= 0; n-- {
		end := x + lengths[n]
		if n == 0 {
			end = to
		}
		d.add(x, end, d.resolution.Order, i)
		x = end
	}
}

// curved halves [from, to] until an element resolves both the waves and the
// course of height and mass.
func (d *divider) curved(g potential.Segment, i int, from, to float64, depth int) {
	lo, hi := g.Height.Range(from, to)
	_, mass := g.Mass.Range(from, to)
	fits := d.waveNumber(mass, lo, hi)*(to-from) <= d.resolution.Phase &&
		d.resolved(g.Height, from, to, d.resolution.Height) &&
		d.resolved(g.Mass, from, to, mass*d.resolution.Height/(d.resolution.High-d.resolution.Low))
	if fits || depth > 40 || d.nodes > float64(d.resolution.MaxNodes) {
		d.add(from, to, d.resolution.Order, i)
		return
	}
	mid := (from + to) / 2
	d.curved(g, i, from, mid, depth+1)
	d.curved(g, i, mid, to, depth+1)
}

// resolved reports whether the upper half of the Legendre coefficients of p on
// [from, to] sum to less than tol.
func (d *divider) resolved(p potential.Profile, from, to, tol float64) bool {
	if n := p.Degree(); n >= 0 && n <= d.rule.order/2 {
		return true
	}
	tail := 0.0
	for n := d.rule.order/2 + 1; n < d.rule.order; n++ {
		c := 0.0
		for q, y := range d.rule.nodes {
			value, _ := legendreAt(n, 2*y-1)
			c += d.rule.weights[q] * value * p.At(from+(to-from)*y)
		}
		tail += math.Abs(c) * float64(2*n+1)
	}
	return tail <= tol
}

// Bytes estimates the memory of a run on the layout with five factors: the
// nodes' own arrays and, for elements of varying height, dense matrices.
func (l *Layout) Bytes() float64 {
	const factors = 5
	bytes := 0.0
	for _, s := range l.stretches {
		n := float64(s.order + 1)
		bytes += 64 * n
		if s.segment >= 0 && !potential.IsConstant(l.structure.Segments[s.segment].Height) {
			bytes += (16*factors + 24) * n * n
		}
	}
	return bytes
}
