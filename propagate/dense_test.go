package propagate

import (
	"math"
	"math/cmplx"
	"testing"
)

// matrix is a full complex matrix: the plain way that the fast one is held
// against.
type matrix [][]complex128

func newMatrix(n int) matrix {
	m := make(matrix, n)
	for i := range m {
		m[i] = make([]complex128, n)
	}
	return m
}

// solve returns the solution of m x = b by Gaussian elimination with partial
// pivoting; m and b are left as they were.
func (m matrix) solve(b []complex128) []complex128 {
	n := len(b)
	a := newMatrix(n)
	x := append([]complex128(nil), b...)
	for i := range m {
		copy(a[i], m[i])
	}
	for c := range n {
		best := c
		for r := c; r < n; r++ {
			if cmplx.Abs(a[r][c]) > cmplx.Abs(a[best][c]) {
				best = r
			}
		}
		a[c], a[best] = a[best], a[c]
		x[c], x[best] = x[best], x[c]
		for r := c + 1; r < n; r++ {
			f := a[r][c] / a[c][c]
			for k := c; k < n; k++ {
				a[r][k] -= f * a[c][k]
			}
			x[r] -= f * x[c]
		}
	}
	for r := n - 1; r >= 0; r-- {
		for k := r + 1; k < n; k++ {
			x[r] -= a[r][k] * x[k]
		}
		x[r] /= a[r][r]
	}
	return x
}

// times is m x.
func (m matrix) times(x []complex128) []complex128 {
	y := make([]complex128, len(m))
	for i, row := range m {
		for j, v := range row {
			y[i] += v * x[j]
		}
	}
	return y
}

// full is the element matrix alpha H - beta of a cell on all its nodes.
func (c *cell) full(alpha, beta complex128) matrix {
	a, b := c.shift(alpha, beta)
	m := newMatrix(c.order + 1)
	for i := range m {
		for j := range m {
			m[i][j] = a * complex(c.stiff[i][j], 0)
		}
		m[i][i] += b * complex(c.mass[i], 0)
	}
	return m
}

// inside is the interior of a wave on the cell with the given values at the
// faces that has no source: A_ii psi_i = -A_if psi_f.
func (c *cell) inside(a matrix, left, right complex128) []complex128 {
	n := c.order - 1
	inner, b := newMatrix(n), make([]complex128, n)
	for i := range n {
		copy(inner[i], a[i+1][1:1+n])
		b[i] = -a[i+1][0]*left - a[i+1][c.order]*right
	}
	return inner.solve(b)
}

// full is the matrix alpha H - beta of a whole mesh, the walls left out, and
// mass the mesh's mass matrix.
func (m *Mesh) full(alpha, beta complex128) (a matrix, mass []complex128) {
	n := m.Nodes()
	a, mass = newMatrix(n), make([]complex128, n)
	for _, e := range m.elements {
		c := &m.cells[e.cell]
		for i, row := range c.full(alpha, beta) {
			for j, v := range row {
				a[e.first+i][e.first+j] += v
			}
			mass[e.first+i] += c.mu * complex(c.mass[i], 0)
		}
	}
	for f, at := range m.faces {
		a[at][at] += alpha * complex(m.strength[f], 0)
	}
	return a, mass
}

// plainStep takes one step of a stepper the plain way, by the factors
// -(1 + 2 Re(p)/(z-p)) of the approximant, and returns psi.
func plainStep(s *Stepper) []complex128 {
	psi := append([]complex128(nil), s.Psi()...)
	alpha := complex(0, -s.Step)
	for _, pole := range s.Pade.Poles {
		a, mass := s.Mesh.full(alpha, pole+alpha*complex(s.Origin, 0))
		b := make([]complex128, len(psi))
		for i := range b {
			b[i] = mass[i] * psi[i]
		}
		last := len(b) - 1
		for _, wall := range []int{0, last} {
			clear(a[wall])
			a[wall][wall], b[wall] = 1, 0
		}
		for i, v := range a.solve(b) {
			psi[i] = -psi[i] - complex(2*real(pole), 0)*v
		}
	}
	return psi
}

// distance is the largest difference of two waves.
func distance(a, b []complex128) float64 {
	d := 0.0
	for i := range a {
		d = math.Max(d, cmplx.Abs(a[i]-b[i]))
		if cmplx.IsNaN(a[i] - b[i]) {
			return math.NaN()
		}
	}
	return d
}

func TestDenseSolverItself(t *testing.T) {
	a := matrix{{0, 2i, 1}, {1, 1, 1i}, {3, -1i, 2}}
	want := []complex128{1 - 2i, 3, -0.5i}
	near(t, "distance", distance(a.solve(a.times(want)), want), 0, 1e-15)
}
