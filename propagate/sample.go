package propagate

import "math"

// Sampler evaluates a wave function between the nodes of a mesh. It holds the
// barycentric weights of every order that occurs, and one goroutine may use
// it at a time.
type Sampler struct {
	mesh    *Mesh
	weights [][]float64 // by order; nil where no element has it
	at      int         // element found last: the next is near
}

// NewSampler prepares a sampler for the mesh.
func NewSampler(m *Mesh) *Sampler {
	s := &Sampler{mesh: m, at: m.real0}
	for i := m.real0; i < m.real1; i++ {
		first, last := m.faces[i], m.faces[i+1]
		p := last - first
		for len(s.weights) <= p {
			s.weights = append(s.weights, nil)
		}
		if s.weights[p] == nil {
			s.weights[p] = barycentric(m.X[first : last+1])
		}
	}
	return s
}

// barycentric returns weights 1/prod_j (x_i - x_j) for nodes x, scaled so that
// the largest is 1: only their ratios count (J.-P. Berrut and
// L. N. Trefethen, SIAM Rev. 46, 501 (2004), eq. 3.2).
func barycentric(x []float64) []float64 {
	w := make([]float64, len(x))
	span, largest := x[len(x)-1]-x[0], 0.0
	for i := range w {
		product := 1.0
		for j := range x {
			if j != i {
				product *= 4 * (x[i] - x[j]) / span
			}
		}
		w[i] = 1 / product
		largest = math.Max(largest, math.Abs(w[i]))
	}
	for i := range w {
		w[i] /= largest
	}
	return w
}

// Ends are the ends of the real axis: psi is known between them.
func (s *Sampler) Ends() (left, right float64) {
	m := s.mesh
	return m.X[m.faces[m.real0]], m.X[m.faces[m.real1]]
}

// seek moves to the element that holds x and reports whether there is one.
func (s *Sampler) seek(x float64) bool {
	m := s.mesh
	if left, right := s.Ends(); !(x >= left && x <= right) {
		return false
	}
	for s.at > m.real0 && x < m.X[m.faces[s.at]] {
		s.at--
	}
	for s.at < m.real1-1 && x >= m.X[m.faces[s.at+1]] {
		s.at++
	}
	return true
}

// At returns psi and dpsi/dx at x from its values on the nodes
// (Stepper.Psi), and the mass there. All are 0 outside Ends. The derivative
// is good to about 1e-8 of |psi| over the element's length. Successive calls
// are fastest for neighbouring x: O(order) each.
func (s *Sampler) At(psi []complex128, x float64) (value, slope complex128, mass float64) {
	if !s.seek(x) {
		return 0, 0, 0
	}
	m := s.mesh
	first, last := m.faces[s.at], m.faces[s.at+1]
	value, slope = interpolate(m.X[first:last+1], s.weights[last-first], psi[first:last+1], x)
	return value, slope, m.layout.structure.MassAt(x)
}

// interpolate evaluates the interpolant and its derivative: with p the value
// and p[x, x_i] = (p - f_i)/(x - x_i), p'(x) is the mean of p[x, x_i] with
// weights w_i/(x - x_i), and at a node -sum_(i != k) w_i p[x_k, x_i]/w_k
// (C. Schneider and W. Werner, Math. Comp. 47, 285 (1986)).
func interpolate(nodes, w []float64, f []complex128, x float64) (value, slope complex128) {
	if k := nodeAt(nodes, x); k >= 0 {
		return f[k], nodeSlope(nodes, w, f, k)
	}
	var below float64
	for i, xi := range nodes {
		c := w[i] / (x - xi)
		below += c
		value += complex(c*real(f[i]), c*imag(f[i]))
	}
	value /= complex(below, 0)
	for i, xi := range nodes {
		c := w[i] / ((x - xi) * (x - xi))
		d := value - f[i]
		slope += complex(c*real(d), c*imag(d))
	}
	return value, slope / complex(below, 0)
}

// nodeAt is the node that x stands on, to within 1e-8 of the element, or -1.
func nodeAt(nodes []float64, x float64) int {
	reach := 1e-8 * (nodes[len(nodes)-1] - nodes[0])
	for i, xi := range nodes {
		if math.Abs(x-xi) <= reach {
			return i
		}
	}
	return -1
}

func nodeSlope(nodes, w []float64, f []complex128, k int) complex128 {
	var sum complex128
	for i, xi := range nodes {
		if i != k {
			sum -= complex(w[i]/w[k]/(nodes[k]-xi), 0) * (f[k] - f[i])
		}
	}
	return sum
}

// Flow returns the density |psi|^2 and the probability current
// Im(conj(psi) dpsi/dx)/m at x, to the right where positive.
func (s *Sampler) Flow(psi []complex128, x float64) (density, current float64) {
	value, slope, mass := s.At(psi, x)
	if mass == 0 {
		return 0, 0
	}
	return square(value), (real(value)*imag(slope) - imag(value)*real(slope)) / mass
}

// Centre is the mean position of the probability between the planes, or 0
// where there is next to none (less than 1e-12).
func (s *Sampler) Centre(psi []complex128) float64 {
	m := s.mesh
	var sum, moment float64
	for i := m.left; i < m.right; i++ {
		first, last := m.faces[i], m.faces[i+1]
		h := m.X[last] - m.X[first]
		for n, weight := range m.cells[m.elements[i].cell].weights {
			q := h * weight * square(psi[first+n])
			sum += q
			moment += q * m.X[first+n]
		}
	}
	if sum < 1e-12 {
		return 0
	}
	return moment / sum
}
