package propagate

import (
	"fmt"

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

// Extent places the ends of the real part of the grid and the two planes:
// Left <= PlaneLeft < 0 and Width < PlaneRight <= Right, Width that of the
// structure.
type Extent struct {
	Left, PlaneLeft, PlaneRight, Right float64
}

// Lead regions take these values where an element asks for its segment.
const (
	inEntry = -1
	inExit  = -2
)

// stretch is one element before it has matrices. length is to-from, but the
// same to the last bit for all elements of one even division.
type stretch struct {
	from, to, length float64
	order            int
	segment          int // index into the structure's segments, inEntry or inExit
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
// nodes would exceed Resolution.MaxNodes. It panics where the planes are not
// outside the structure and inside the grid.
func NewLayout(s *potential.Structure, r Resolution, x Extent, left, right Edge) (*Layout, error) {
	b := s.Width()
	if !(x.Left <= x.PlaneLeft && x.PlaneLeft < 0 && x.PlaneRight > b && x.Right >= x.PlaneRight) {
		panic("propagate: planes must lie outside the structure and inside the grid")
	}
	d := &divider{
		Layout: &Layout{structure: s, resolution: r, extent: x, leftEdge: left, rightEdge: right},
		rule:   newRule(r.Order),
		nodes:  float64((left.Count+right.Count)*r.Order + 1),
	}
	d.lead(s.Entry, inEntry, x.Left, x.PlaneLeft)
	d.lead(s.Entry, inEntry, x.PlaneLeft, 0)
	for i, g := range s.Segments {
		d.segment(g, i)
	}
	d.lead(s.Exit, inExit, b, x.PlaneRight)
	d.lead(s.Exit, inExit, x.PlaneRight, x.Right)
	if d.full(0) {
		return nil, &SizeError{Nodes: d.nodes, Limit: r.MaxNodes}
	}
	return d.Layout, nil
}

// Nodes is the number of nodes that the layout's mesh will have.
func (l *Layout) Nodes() int {
	n := (l.leftEdge.Count+l.rightEdge.Count)*l.resolution.Order + 1
	for _, s := range l.stretches {
		n += s.order
	}
	return n
}

// Bytes estimates the memory of a mesh on the layout and of a run with the
// highest member of the family: the nodes' own arrays, what each element keeps
// for its faces, and the matrices of elements of varying height.
func (l *Layout) Bytes() float64 {
	const (
		perNode    = 8 + 2*16 + 16 // position, the wave in both forms, a saved state
		perElement = 64 + 16*(3+2*MaxPade)
		perMode    = 3 * 16 * MaxPade // the kernels of varying elements
	)
	edges := float64(l.leftEdge.Count + l.rightEdge.Count)
	bytes := float64(l.Nodes())*perNode + edges*(perElement+float64(l.resolution.Order)*perMode)
	for _, s := range l.stretches {
		bytes += perElement
		if s.segment >= 0 && !flatSegment(l.structure.Segments[s.segment]) {
			n := float64(s.order + 1)
			bytes += perMode*n + 2*8*n*n
		}
	}
	return bytes
}

func flatSegment(g potential.Segment) bool {
	return potential.IsConstant(g.Height) && potential.IsConstant(g.Mass)
}
