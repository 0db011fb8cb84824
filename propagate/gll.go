package propagate

import "math"

// rule is the Gauss-Lobatto-Legendre rule of an order p on [0, 1]: p+1 nodes
// including both ends, weights that sum to 1, exact for polynomials of degree
// 2p-1, and the matrix that differentiates the interpolant at its own nodes.
// Nodes and weights are mirror images about 1/2 to the last bit of y = 2x-1.
//
// Nodes are the zeros of (1-y^2) P_p'(y), weights 2/(p(p+1) P_p(y)^2) on
// [-1, 1] (M. Abramowitz and I. A. Stegun, Handbook of Mathematical
// Functions, 25.4.32).
type rule struct {
	order   int
	nodes   []float64
	weights []float64
	diff    [][]float64 // diff[q][i]: derivative of cardinal function i at node q
}

func newRule(p int) *rule {
	if p < 1 {
		panic("propagate: element order below 1")
	}
	r := &rule{order: p, nodes: make([]float64, p+1), weights: make([]float64, p+1)}
	y, legendre := lobattoNodes(p), make([]float64, p+1)
	for i := range y {
		legendre[i], _ = legendreAt(p, y[i])
		r.nodes[i] = (1 + y[i]) / 2
		r.weights[i] = 1 / (float64(p*(p+1)) * legendre[i] * legendre[i])
	}
	r.diff = lobattoDerivative(y, legendre)
	return r
}

// lobattoNodes lists the nodes on [-1, 1]: the left half is computed, the
// right half mirrored.
func lobattoNodes(p int) []float64 {
	y := make([]float64, p+1)
	y[0], y[p] = -1, 1
	for i := 1; 2*i < p; i++ {
		y[i] = lobattoNode(p, i)
		y[p-i] = -y[i]
	}
	return y
}

// lobattoNode is interior node i of the left half on [-1, 1], by Newton's
// method on (1-y^2) P_p'(y), started from the Chebyshev-Lobatto node. Newton
// doubles the correct digits: six steps are two more than any order needs.
func lobattoNode(p, i int) float64 {
	y := -math.Cos(math.Pi * float64(i) / float64(p))
	for range 6 {
		value, before := legendreAt(p, y)
		// (1-y^2) P_p' = p (P_{p-1} - y P_p), whose derivative is -p(p+1) P_p.
		y += (before - y*value) / (float64(p+1) * value)
	}
	return y
}

// legendreAt returns P_p(y) and P_{p-1}(y) by the three-term recurrence, p >= 1.
func legendreAt(p int, y float64) (value, before float64) {
	before, value = 1, y
	for n := 2; n <= p; n++ {
		f := float64(n)
		before, value = value, ((2*f-1)*y*value-(f-1)*before)/f
	}
	return value, before
}

// lobattoDerivative is d/dx on [0, 1], x = (1+y)/2,
//
//	diff_qi = 2 P_p(y_q) / (P_p(y_i) (y_q - y_i)),  q != i
//
// (C. Canuto et al., Spectral Methods: Fundamentals in Single Domains, Springer
// 2006, eq. 2.3.28; from memory); its rows sum to zero to rounding because the
// diagonal is made from the rest of the row.
func lobattoDerivative(y, legendre []float64) [][]float64 {
	d := make([][]float64, len(y))
	for q := range d {
		d[q] = make([]float64, len(y))
		sum := 0.0
		for i := range d[q] {
			if i != q {
				d[q][i] = 2 * legendre[q] / legendre[i] / (y[q] - y[i])
				sum += d[q][i]
			}
		}
		d[q][q] = -sum
	}
	return d
}
