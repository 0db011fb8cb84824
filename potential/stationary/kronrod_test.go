package stationary

import (
	"math"
	"testing"
)

// TestKronrod: the rule is exact to degree 31 and its inner one to degree 19,
// and neither a degree further; that settles every digit of nodes and weights.
func TestKronrod(t *testing.T) {
	integral := func(nodes, weights []float64, n int) float64 {
		sum := 0.0
		for i, x := range nodes {
			sum += weights[i] * math.Pow(x, float64(n))
		}
		return sum
	}
	for n := 0; n <= 31; n += 2 {
		want := 2 / float64(n+1)
		near(t, "Kronrod", integral(kronrodNodes[:], kronrodWeights[:], n), want, 1e-15, 0)
		if n <= 19 {
			near(t, "Gauss", integral(legendreNodes[:], legendreWeights[:], n), want, 1e-15, 0)
		}
	}
	if off := integral(kronrodNodes[:], kronrodWeights[:], 32) - 2.0/33; math.Abs(off) < 1e-12 {
		t.Errorf("degree 32 is exact to %g: not the rule it is said to be", off)
	}
	if off := integral(legendreNodes[:], legendreWeights[:], 20) - 2.0/21; math.Abs(off) < 1e-9 {
		t.Errorf("degree 20 is exact to %g: not the rule it is said to be", off)
	}
	for i := range legendreNodes {
		if legendreNodes[i] != kronrodNodes[2*i+1] {
			t.Errorf("inner node %d is not one of the outer rule", i)
		}
	}
}
