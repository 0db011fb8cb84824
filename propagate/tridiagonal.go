package propagate

// tridiagonal is a complex symmetric tridiagonal matrix as its factors
// L D L^T: step[i] couples row i+1 to row i in L, inverse holds 1/D.
type tridiagonal struct{ step, inverse []complex128 }

// newTridiagonal returns factors for n rows, yet to be made.
func newTridiagonal(n int) tridiagonal {
	return tridiagonal{step: make([]complex128, max(n-1, 0)), inverse: make([]complex128, n)}
}

// factor makes the factors from the diagonal and the off-diagonal (off[i]
// couples rows i and i+1). A pivot that all but vanishes, at an energy at which
// the rows so far stand on their own, is moved to nearPole times its coupling.
func (t tridiagonal) factor(diag, off []complex128) {
	for i, d := range diag {
		if i > 0 {
			t.step[i-1] = off[i-1] * t.inverse[i-1]
			d -= off[i-1] * t.step[i-1]
		}
		if i < len(off) && square(d) < nearPole*nearPole*square(off[i]) {
			d = complex(nearPole, 0) * off[i]
		}
		t.inverse[i] = 1 / d
	}
}

// solve replaces b by the solution.
func (t tridiagonal) solve(b []complex128) {
	n := len(t.inverse)
	b = b[:n]
	x := complex(0, 0)
	for i, s := range t.step {
		x = b[i] - x
		b[i] = x * t.inverse[i]
		x *= s
	}
	x = (b[n-1] - x) * t.inverse[n-1]
	b[n-1] = x
	for i := n - 2; i >= 0; i-- {
		x = b[i] - t.step[i]*x
		b[i] = x
	}
}
