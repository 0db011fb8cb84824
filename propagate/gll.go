package propagate

import (
	"math"
	"math/big"
)

// rule is the Gauss-Lobatto-Legendre rule of an order p on [0, 1]: p+1 nodes
// including both ends, weights that sum to 1, exact for polynomials of degree
// 2p-1, and the matrix that differentiates the interpolant at its own nodes.
// Nodes and weights are mirror images about 1/2 to the last bit of y = 2x-1.
//
// They are computed in higher precision: nodes at the ends lie as close as
// 1/p^2, and what rounding does to their distance every element would repeat.
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
	y, legendre := lobattoNodes(p), make([]*big.Float, p+1)
	for i := range y {
		legendre[i], _ = preciseLegendre(p, y[i])
		r.nodes[i] = rounded(quotient(sumOf(precise(1), y[i]), precise(2)))
		r.weights[i] = rounded(quotient(precise(1), product(precise(float64(p*(p+1))), product(legendre[i], legendre[i]))))
	}
	r.diff = lobattoDerivative(y, legendre)
	return r
}

// lobattoNodes lists the nodes on [-1, 1]: the left half is computed, the
// right half mirrored.
func lobattoNodes(p int) []*big.Float {
	y := make([]*big.Float, p+1)
	y[0], y[p] = precise(-1), precise(1)
	if p%2 == 0 {
		y[p/2] = precise(0)
	}
	for i := 1; 2*i < p; i++ {
		y[i] = lobattoNode(p, i)
		y[p-i] = new(big.Float).Neg(y[i])
	}
	return y
}

// lobattoNode is interior node i of the left half on [-1, 1], by Newton's
// method on (1-y^2) P_p'(y), started from the Chebyshev-Lobatto node. Newton
// doubles the correct digits: six steps are two more than any order needs, and
// one more makes it precise.
func lobattoNode(p, i int) *big.Float {
	y := -math.Cos(math.Pi * float64(i) / float64(p))
	for range 6 {
		value, before := legendreAt(p, y)
		// (1-y^2) P_p' = p (P_{p-1} - y P_p), whose derivative is -p(p+1) P_p.
		y += (before - y*value) / (float64(p+1) * value)
	}
	node := precise(y)
	value, before := preciseLegendre(p, node)
	step := quotient(difference(before, product(node, value)), product(precise(float64(p+1)), value))
	return sumOf(node, step)
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
func lobattoDerivative(y, legendre []*big.Float) [][]float64 {
	d := make([][]float64, len(y))
	for q := range d {
		d[q] = make([]float64, len(y))
		sum := 0.0
		for i := range d[q] {
			if i != q {
				above := product(precise(2), legendre[q])
				d[q][i] = rounded(quotient(above, product(legendre[i], difference(y[q], y[i]))))
				sum += d[q][i]
			}
		}
		d[q][q] = -sum
	}
	return d
}
