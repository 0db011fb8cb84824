package propagate

import (
	"math"
	"testing"
)

// lobattoTable holds non-negative abscissas and their weights on [-1, 1] for
// p+1 points: M. Abramowitz and I. A. Stegun, Handbook of Mathematical
// Functions, Table 25.6 (from memory; seven decimals kept). The rows of 3 to
// 5 points agree with the closed forms 1/3, 4/3; 1/sqrt5, 5/6; sqrt(3/7),
// 49/90, 32/45.
func lobattoTable() map[int][][2]float64 {
	return map[int][][2]float64{
		2: {{1, 0.3333333}, {0, 1.3333333}},
		3: {{1, 0.1666667}, {0.4472136, 0.8333333}},
		4: {{1, 0.1}, {0.6546537, 0.5444444}, {0, 0.7111111}},
		5: {{1, 0.0666667}, {0.7650553, 0.3784750}, {0.2852315, 0.5548584}},
		6: {{1, 0.0476190}, {0.8302239, 0.2768260}, {0.4688488, 0.4317454}, {0, 0.4876190}},
		7: {{1, 0.0357143}, {0.8717401, 0.2107042}, {0.5917002, 0.3411227}, {0.2092992, 0.4124588}},
		8: {{1, 0.0277778}, {0.8997580, 0.1654954}, {0.6771863, 0.2745387}, {0.3631175, 0.3464285}, {0, 0.3715193}},
		9: {{1, 0.0222222}, {0.9195339, 0.1333060}, {0.7387739, 0.2248893}, {0.4779249, 0.2920427}, {0.1652790, 0.3275398}},
	}
}

func TestRuleAgainstHandbook(t *testing.T) {
	const half = 0.51e-7 // half a unit of the last decimal kept
	for p, rows := range lobattoTable() {
		r := newRule(p)
		for i, row := range rows {
			near(t, "abscissa", 2*r.nodes[p-i]-1, row[0], half)
			near(t, "mirrored abscissa", 2*r.nodes[i]-1, -row[0], half)
			near(t, "weight", 2*r.weights[i], row[1], half)
		}
	}
}

func TestRuleIsExactToItsDegree(t *testing.T) {
	for p := 1; p <= 24; p++ {
		r := newRule(p)
		for n := range 2*p + 1 {
			sum := 0.0
			for i, x := range r.nodes {
				sum += r.weights[i] * math.Pow(x, float64(n))
			}
			want, tol := 1/float64(n+1), 4e-15 // p+1 terms of rounding in nodes and weights
			if n == 2*p {
				if p <= 8 && !(math.Abs(sum-want) > 1e-11) {
					t.Errorf("order %d integrates degree %d exactly: %g", p, n, sum-want)
				}
				continue
			}
			near(t, "integral", sum, want, tol)
		}
	}
}

func TestRuleDifferentiatesPolynomials(t *testing.T) {
	for p := 1; p <= 24; p++ {
		r := newRule(p)
		tol := 1e-15 * math.Pow(float64(p), 3) // |D| grows as p^2, p+1 terms
		for n := range p + 1 {
			for q, row := range r.diff {
				sum, want := 0.0, 0.0
				for i, d := range row {
					sum += d * math.Pow(r.nodes[i], float64(n))
				}
				if n > 0 {
					want = float64(n) * math.Pow(r.nodes[q], float64(n-1))
				}
				near(t, "derivative", sum, want, tol)
			}
		}
	}
}

func TestRuleRefusesOrderZero(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("newRule(0) did not panic")
		}
	}()
	newRule(0)
}
