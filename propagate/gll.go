package propagate

import "math"

// rule is the Gauss-Lobatto-Legendre rule of an order p on [0, 1]: p+1 nodes
// including both ends, exact for polynomials of degree 2p-1, and the matrix
// that differentiates the interpolant at its own nodes.
//
// Nodes are the zeros of (1-x^2) P_p'(x), weights 2/(p(p+1) P_p(x)^2) on
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
	legendre := make([]float64, p+1)
	for i := range r.nodes {
		x := lobattoNode(p, i)
		value, _ := legendreAt(p, x)
		legendre[i] = value
		r.nodes[i] = (1 + x) / 2
		r.weights[i] = 1 / (float64(p*(p+1)) * value * value)
	}
	r.diff = lobattoDerivative(r.nodes, legendre)
	return r
}

// lobattoNode is node i of the rule on [-1, 1], by Newton's method on
// (1-x^2) P_p'(x), started from the Chebyshev-Lobatto node.
func lobattoNode(p, i int) float64 {
	switch {
	case i == 0:
		return -1
	case i == p:
		return 1
	case 2*i == p:
		return 0
	}
	x := -math.Cos(math.Pi * float64(i) / float64(p))
	for range 50 {
		value, before := legendreAt(p, x)
		// (1-x^2) P_p' = p (P_{p-1} - x P_p), whose derivative is -p(p+1) P_p.
		step := (before - x*value) / (float64(p+1) * value)
		x += step
		if math.Abs(step) < 1e-17 {
			break
		}
	}
	return x
}

// legendreAt returns P_p(x) and P_{p-1}(x) by the three-term recurrence.
func legendreAt(p int, x float64) (value, before float64) {
	before, value = 1, x
	for n := 2; n <= p; n++ {
		f := float64(n)
		before, value = value, ((2*f-1)*x*value-(f-1)*before)/f
	}
	return value, before
}

// lobattoDerivative is the differentiation matrix; its rows sum to zero to
// rounding because the diagonal is made from the rest of the row.
func lobattoDerivative(nodes, legendre []float64) [][]float64 {
	d := make([][]float64, len(nodes))
	for q := range d {
		d[q] = make([]float64, len(nodes))
		sum := 0.0
		for i := range d[q] {
			if i != q {
				d[q][i] = legendre[q] / legendre[i] / (nodes[q] - nodes[i])
				sum += d[q][i]
			}
		}
		d[q][q] = -sum
	}
	return d
}
