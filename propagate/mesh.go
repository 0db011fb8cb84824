package propagate

import (
	"math/cmplx"

	"fluxtoll/potential"
)

// cell is what equal elements share. For real shifts alpha, beta the element's
// matrix is
//
//	A = alpha kappa stiff + mu (alpha u - beta) mass
//
// with the matrices of its pencil: alpha H - beta on this element. kappa =
// 1/(m h s) and mu = h s, s the complex scale of an edge.
type cell struct {
	*pencil
	kappa, mu, u complex128
	loss         float64
}

// element is one element of the mesh.
type element struct {
	cell  int // index into Mesh.cells
	first int // its left face's node; its right face's is first+order
	layer int // layer of the structure, or -1
}

// Mesh is the grid of the packet road with its matrices. It is not changed
// after NewMesh and may be shared between goroutines.
//
// Nodes are numbered from left to right; neighbouring elements share a node.
// The first and the last node carry the wall behind the edges: psi = 0 there.
type Mesh struct {
	X         []float64 // position of each node; inside an edge, distance along it
	structure *potential.Structure
	layout    *Layout
	cells     []cell
	elements  []element
	faces     []int        // node of each face, len(elements)+1
	faceMass  []complex128 // mass summed over the elements that meet at a face
	strength  []float64    // point potential at each face
	left      int          // face index of the left plane
	right     int          // face index of the right plane
	real0     int          // first face of the real axis
	real1     int          // last face of the real axis
	layerOf   [][2]int     // element range of each layer
}

// NewMesh gives a layout its matrices.
func NewMesh(l *Layout) *Mesh {
	b := &meshBuilder{
		Mesh:    &Mesh{structure: l.structure, layout: l},
		rules:   map[int]*rule{},
		uniform: map[int]*pencil{},
		known:   map[cellKey]int{},
	}
	b.edge(l.leftEdge, l.structure.Entry, true)
	b.real0 = len(b.elements)
	for _, s := range l.stretches {
		b.stretch(s)
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

// flatCell finds or makes the cell of an element of constant height and mass.
func (b *meshBuilder) flatCell(order int, h complex128, height, mass, loss float64) int {
	if b.uniform[order] == nil {
		b.uniform[order] = uniformPencil(b.rule(order))
	}
	c := cell{
		pencil: b.uniform[order],
		kappa:  1 / (complex(mass, 0) * h), mu: h, u: complex(height, -loss), loss: loss,
	}
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
		b.push(b.flatCell(b.layout.resolution.Order, complex(h, 0)*turn, lead.Height, lead.Mass, 0), -1)
	}
}

// lengths lists the element lengths from the plane outwards.
func (e Edge) lengths() []float64 {
	out := make([]float64, e.Count)
	h := e.First
	for i := range out {
		out[i] = h
		h *= e.Growth
	}
	return out
}

// stretch appends one element of the real axis.
func (b *meshBuilder) stretch(s stretch) {
	h := complex(s.to-s.from, 0)
	switch s.segment {
	case inEntry:
		b.push(b.flatCell(s.order, h, b.structure.Entry.Height, b.structure.Entry.Mass, 0), -1)
		return
	case inExit:
		b.push(b.flatCell(s.order, h, b.structure.Exit.Height, b.structure.Exit.Mass, 0), -1)
		return
	}
	g := b.structure.Segments[s.segment]
	if potential.IsConstant(g.Height) && potential.IsConstant(g.Mass) {
		b.push(b.flatCell(s.order, h, g.Height.At(s.from), g.Mass.At(s.from), g.Loss), g.Layer)
		return
	}
	r := b.rule(s.order)
	u, m := make([]float64, s.order+1), make([]float64, s.order+1)
	for i, y := range r.nodes {
		x := s.from + (s.to-s.from)*y
		u[i], m[i] = g.Height.At(x), g.Mass.At(x)
	}
	b.cells = append(b.cells, cell{
		pencil: newPencil(r, s.to-s.from, u, m),
		kappa:  1, mu: 1, u: complex(0, -g.Loss), loss: g.Loss,
	})
	b.push(len(b.cells)-1, g.Layer)
}

func (b *meshBuilder) push(cell, layer int) {
	first := 0
	if n := len(b.elements); n > 0 {
		last := b.elements[n-1]
		first = last.first + b.cells[last.cell].order
	}
	b.elements = append(b.elements, element{cell: cell, first: first, layer: layer})
}

// finish numbers faces, places nodes, and finds planes and layers.
func (b *meshBuilder) finish() {
	last := b.elements[len(b.elements)-1]
	b.X = make([]float64, last.first+b.cells[last.cell].order+1)
	b.faces = make([]int, len(b.elements)+1)
	b.faceMass = make([]complex128, len(b.faces))
	b.strength = make([]float64, len(b.faces))
	for i, e := range b.elements {
		c := &b.cells[e.cell]
		b.faces[i+1] = e.first + c.order
		b.faceMass[i] += c.mu * complex(c.mass[0], 0)
		b.faceMass[i+1] += c.mu * complex(c.mass[c.order], 0)
	}
	b.place()
	b.points()
	b.layerOf = make([][2]int, len(b.structure.Layers))
	for i, e := range b.elements {
		if e.layer < 0 {
			continue
		}
		if r := &b.layerOf[e.layer]; r[1] == 0 {
			*r = [2]int{i, i + 1}
		} else {
			r[1] = i + 1
		}
	}
}

// place fills X and finds the faces of the planes.
func (b *meshBuilder) place() {
	x := b.layout.extent
	put := func(i int, from, to float64) {
		e := b.elements[i]
		for n, y := range b.cells[e.cell].nodes {
			b.X[e.first+n] = from + (to-from)*y
		}
	}
	at := x.Right
	for i, h := range b.layout.rightEdge.lengths() {
		put(b.real1+i, at, at+h)
		at += h
	}
	at = x.Left
	for i, h := range b.layout.leftEdge.lengths() {
		put(b.real0-1-i, at-h, at)
		at -= h
	}
	for i, s := range b.layout.stretches {
		put(b.real0+i, s.from, s.to)
		if s.from == x.PlaneLeft {
			b.left = b.real0 + i
		}
		if s.to == x.PlaneRight {
			b.right = b.real0 + i + 1
		}
	}
}

// points adds the point potentials to their faces.
func (b *meshBuilder) points() {
	for _, d := range b.structure.Deltas {
		for f := b.real0; f <= b.real1; f++ {
			if b.X[b.faces[f]] == d.X {
				b.strength[f] += d.Strength
				break
			}
		}
	}
}

// Nodes is the number of grid nodes.
func (m *Mesh) Nodes() int { return len(m.X) }

// Elements is the number of elements, edges included.
func (m *Mesh) Elements() int { return len(m.elements) }

// Order is the highest order of an element.
func (m *Mesh) Order() int { return m.layout.resolution.Order }

// RealNodes returns the range [from, to) of nodes that lie on the real axis,
// where |psi|^2 is a density.
func (m *Mesh) RealNodes() (from, to int) { return m.faces[m.real0], m.faces[m.real1] + 1 }

// PlaneNodes returns the nodes of the left and the right plane.
func (m *Mesh) PlaneNodes() (left, right int) { return m.faces[m.left], m.faces[m.right] }

// ShortestElement and LongestElement on the real axis, for the report.
func (m *Mesh) ElementLengths() (shortest, longest float64) {
	for i := m.real0; i < m.real1; i++ {
		h := m.X[m.faces[i+1]] - m.X[m.faces[i]]
		if i == m.real0 || h < shortest {
			shortest = h
		}
		longest = max(longest, h)
	}
	return shortest, longest
}

// EdgeElements is the number of elements in the left and the right edge.
func (m *Mesh) EdgeElements() (left, right int) {
	return m.layout.leftEdge.Count, m.layout.rightEdge.Count
}
