package propagate

import (
	"testing"

	"pgregory.net/rapid"
)

func TestTridiagonalAgainstDense(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		n := rapid.IntRange(1, 12).Draw(r, "rows")
		draw := func(name string) complex128 {
			return complex(rapid.Float64Range(-1, 1).Draw(r, name), rapid.Float64Range(0.1, 1).Draw(r, name))
		}
		diag, off, b, full := make([]complex128, n), make([]complex128, max(n-1, 0)), make([]complex128, n), newMatrix(n)
		for i := range n {
			diag[i], b[i] = draw("diagonal")+3i, draw("right side")
			full[i][i] = diag[i]
			if i > 0 {
				off[i-1] = draw("off")
				full[i][i-1], full[i-1][i] = off[i-1], off[i-1]
			}
		}
		want := full.solve(b)
		fast := newTridiagonal(n)
		fast.factor(diag, off)
		fast.solve(b)
		near(quiet{t, r}, "distance", distance(b, want), 0, 1e-14) // dominant diagonal
	})
}

// A pivot that vanishes does not spoil the rows that follow.
func TestTridiagonalWithoutAPivot(t *testing.T) {
	diag, off := []complex128{0, 0, 2}, []complex128{1, 1}
	b := []complex128{1, 2, 3}
	want := matrix{{0, 1, 0}, {1, 0, 1}, {0, 1, 2}}.solve(b)
	fast := newTridiagonal(3)
	fast.factor(diag, off)
	fast.solve(b)
	near(t, "distance", distance(b, want), 0, 1e-6)
}
