package propagate

import (
	"math/cmplx"

	"fluxtoll/potential"
)

// NewMesh gives a layout its matrices. Elements that are equal share them.
func NewMesh(l *Layout) *Mesh {
	b := &meshBuilder{
		Mesh:    &Mesh{layout: l},
		rules:   map[int]*rule{},
		uniform: map[int]*pencil{},
		known:   map[cellKey]int{},
	}
	b.edge(l.leftEdge, l.structure.Entry, true)
	b.real0 = len(b.elements)
	for _, s := range l.stretches {
		b.push(b.cellOf(s))
	}
	b.real1 = len(b.elements)
	b.edge(l.rightEdge, l.structure.Exit, false)
	b.finish()
	return b.Mesh
}

type cellKey struct {
	order        int
	kappa, mu, u complex128
}

// meshBuilder is a mesh in the making, and what its elements have in common.
type meshBuilder struct {
	*Mesh
	rules   map[int]*rule
	uniform map[int]*pencil
	known   map[cellKey]int
}

func (b *meshBuilder) rule(p int) *rule {
	if b.rules[p] == nil {
		b.rules[p] = newRule(p)
	}
	return b.rules[p]
}

// flat finds or makes the cell of an element of constant height and mass.
func (b *meshBuilder) flat(order int, h complex128, height, mass, loss float64) int {
	if b.uniform[order] == nil {
		b.uniform[order] = uniformPencil(b.rule(order))
	}
	c := flatCell(b.uniform[order], h, height, mass, loss)
	key := cellKey{order, c.kappa, c.mu, c.u}
	at, ok := b.known[key]
	if !ok {
		at = len(b.cells)
		b.cells = append(b.cells, c)
		b.known[key] = at
	}
	return at
}

// edge appends the elements of one edge, longest outermost.
func (b *meshBuilder) edge(e Edge, lead potential.Lead, left bool) {
	turn := cmplx.Exp(complex(0, e.Angle))
	lengths := e.lengths()
	for i := range lengths {
		h := lengths[i]
		if left {
			h = lengths[len(lengths)-1-i]
		}
		b.push(b.flat(b.layout.resolution.Order, complex(h, 0)*turn, lead.Height, lead.Mass, 0), -1)
	}
}

// cellOf finds or makes the cell of one element of the real axis and says in
// which layer it lies.
func (b *meshBuilder) cellOf(s stretch) (cell, layer int) {
	h, structure := complex(s.length, 0), b.layout.structure
	switch s.segment {
	case inEntry:
		return b.flat(s.order, h, structure.Entry.Height, structure.Entry.Mass, 0), -1
	case inExit:
		return b.flat(s.order, h, structure.Exit.Height, structure.Exit.Mass, 0), -1
	}
	g := structure.Segments[s.segment]
	if flatSegment(g) {
		return b.flat(s.order, h, g.Height.At(s.from), g.Mass.At(s.from), g.Loss), g.Layer
	}
	return b.varying(s, g), g.Layer
}

// varying makes the cell of an element whose height or mass varies.
func (b *meshBuilder) varying(s stretch, g potential.Segment) int {
	r := b.rule(s.order)
	u, m := make([]float64, s.order+1), make([]float64, s.order+1)
	for i, y := range r.nodes {
		x := s.from + (s.to-s.from)*y
		u[i], m[i] = g.Height.At(x), g.Mass.At(x)
	}
	b.cells = append(b.cells, cell{
		pencil: newPencil(r, s.length, u, m),
		kappa:  1, mu: 1, u: complex(0, -g.Loss), loss: g.Loss,
	})
	return len(b.cells) - 1
}

func (b *meshBuilder) push(cell, layer int) {
	e := element{cell: cell, layer: layer}
	if n := len(b.elements); n > 0 {
		last := b.elements[n-1]
		order := b.cells[last.cell].order
		e.first, e.mode = last.first+order, last.mode+order-1
	}
	b.elements = append(b.elements, e)
}

// finish numbers faces, places nodes, and finds planes and layers.
func (b *meshBuilder) finish() {
	last := b.elements[len(b.elements)-1]
	b.X = make([]float64, last.first+b.cells[last.cell].order+1)
	b.faces = make([]int, len(b.elements)+1)
	b.faceMass = make([]complex128, len(b.faces))
	b.strength = make([]float64, len(b.faces))
	b.layerSpan = make([][2]int, len(b.layout.structure.Layers))
	for i, e := range b.elements {
		c := &b.cells[e.cell]
		b.faces[i+1] = e.first + c.order
		b.faceMass[i] += c.mu * complex(c.mass[0], 0)
		b.faceMass[i+1] += c.mu * complex(c.mass[c.order], 0)
		b.extend(e.layer, i)
	}
	b.place()
	b.points()
}

// extend adds element i to the span of its layer.
func (b *meshBuilder) extend(layer, i int) {
	if layer < 0 {
		return
	}
	span := &b.layerSpan[layer]
	if span[1] == 0 {
		span[0] = i
	}
	span[1] = i + 1
}

// place fills X and finds the faces of the planes.
func (b *meshBuilder) place() {
	x := b.layout.extent
	at := x.Right
	for i, h := range b.layout.rightEdge.lengths() {
		b.put(b.real1+i, at, at+h)
		at += h
	}
	at = x.Left
	for i, h := range b.layout.leftEdge.lengths() {
		b.put(b.real0-1-i, at-h, at)
		at -= h
	}
	for i, s := range b.layout.stretches {
		b.put(b.real0+i, s.from, s.to)
		if s.from == x.PlaneLeft {
			b.left = b.real0 + i
		}
		if s.to == x.PlaneRight {
			b.right = b.real0 + i + 1
		}
	}
}

// put places the nodes of element i on [from, to]. Faces keep their exact
// positions.
func (b *meshBuilder) put(i int, from, to float64) {
	e := b.elements[i]
	c := &b.cells[e.cell]
	for n, y := range c.nodes {
		b.X[e.first+n] = from + (to-from)*y
	}
	b.X[e.first+c.order] = to
}

// points adds the point potentials to their faces.
func (b *meshBuilder) points() {
	for _, d := range b.layout.structure.Deltas {
		for f := b.real0; f <= b.real1; f++ {
			if b.X[b.faces[f]] == d.X {
				b.strength[f] += d.Strength
				break
			}
		}
	}
}
