package propagate

import (
	"math"
	"math/rand/v2"
	"testing"
)

// testCells lists a cell of every kind for orders 1 to 17: uniform, in an
// edge, lossy, and of varying height and mass.
func testCells() []cell {
	var cells []cell
	for p := 1; p <= 17; p++ {
		r := newRule(p)
		uniform := uniformPencil(r)
		cells = append(cells,
			flatCell(uniform, 1.3, 0.4, 0.9, 0),
			flatCell(uniform, 0.7+0.4i, -0.3, 1.2, 0),
			flatCell(uniform, 2.1, 0.4, 1, 0.2),
		)
		u, m := make([]float64, p+1), make([]float64, p+1)
		for i, x := range r.nodes {
			u[i], m[i] = 1.5*math.Exp(-x)-0.2, 1+0.3*math.Sin(2*x)
		}
		cells = append(cells, cell{pencil: newPencil(r, 1.7, u, m), kappa: 1, mu: 1, u: -0.1i, loss: 0.1})
	}
	return cells
}

// TestModes holds the eigenmodes against the pair of matrices they belong to.
func TestModes(t *testing.T) {
	for _, c := range testCells() {
		top := 1.0
		for _, l := range c.lambda {
			top = math.Max(top, math.Abs(l))
		}
		for j, v := range c.modes {
			for i := range v {
				sum := 0.0
				for k := range v {
					sum += c.stiff[i+1][k+1] * v[k]
				}
				// The eigenproblem is solved to rounding of its largest eigenvalue.
				near(t, "K v / sqrt(M)", (sum-c.lambda[j]*c.mass[i+1]*v[i])/math.Sqrt(c.mass[i+1]), 0, 1e-14*top)
			}
			for k, w := range c.modes {
				sum, want := 0.0, 0.0
				for i := range v {
					sum += v[i] * c.mass[i+1] * w[i]
				}
				if j == k {
					want = 1
				}
				near(t, "v M w", sum, want, 1e-14)
			}
		}
	}
}

func TestMirrorModesHaveParity(t *testing.T) {
	for p := 2; p <= 17; p++ {
		c := uniformPencil(newRule(p))
		if want := p / 2; c.even != want {
			t.Errorf("order %d: %d even modes, want %d", p, c.even, want)
		}
		for j, v := range c.modes {
			sign := 1.0
			if j >= c.even {
				sign = -1
			}
			for i := range v {
				near(t, "mirrored mode", v[len(v)-1-i], sign*v[i], 1e-14)
			}
			near(t, "mirrored coupling", c.couple[1][j], sign*c.couple[0][j], 0)
		}
	}
}

// The Dirichlet eigenvalues of the uniform element tend to (n pi)^2/2.
func TestModesOfUniformElement(t *testing.T) {
	c := uniformPencil(newRule(16))
	for n, at := range []int{0, c.even, 1} {
		want := math.Pow(float64(n+1)*math.Pi, 2) / 2
		near(t, "eigenvalue", c.lambda[at]/want, 1, 1e-12)
	}
}

func TestAmplitudesAndValuesUndoEachOther(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 2))
	for _, c := range testCells() {
		n := c.order - 1
		psi, amplitudes, back := make([]complex128, n), make([]complex128, n), make([]complex128, n)
		for i := range psi {
			psi[i] = complex(random.NormFloat64(), random.NormFloat64())
		}
		c.amplitudes(psi, amplitudes)
		c.values(amplitudes, back)
		near(t, "round trip", distance(psi, back), 0, 1e-13) // n terms of size up to 1/sqrt(mass)
		sum := c.mass[0]*square(1+1i) + c.mass[c.order]*square(2)
		for i, v := range psi {
			sum += c.mass[i+1] * square(v)
		}
		near(t, "norm", c.norm(1+1i, 2, amplitudes)/(sum*real(c.mu)), 1, 1e-13)
	}
}
