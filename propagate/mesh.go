package propagate

// element is one element of the mesh.
type element struct {
	cell  int // index into Mesh.cells
	first int // its left face's node; its right face's is first+order
	mode  int // where the amplitudes of its modes begin
	layer int // layer of the structure, or -1
}

// Mesh is the grid of the packet road with its matrices. It is not changed
// after NewMesh and may be shared between goroutines.
//
// Nodes are numbered from left to right; neighbouring elements share a node.
// The first and the last node carry the wall behind the edges: psi = 0 there.
type Mesh struct {
	X         []float64 // position of each node; inside an edge, distance along it
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
	layerSpan [][2]int     // element range of each layer
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

// ElementLengths returns the lengths of the shortest and the longest element
// on the real axis.
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
