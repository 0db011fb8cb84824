package propagate

import (
	"math/cmplx"
	"testing"
)

// faceForm is psi^T W phi over the faces, for W a condensed matrix.
func (c condensed) faceForm(l, r, l2, r2 complex128) complex128 {
	return l*(c.ll*l2+c.lr*r2) + r*(c.lr*l2+c.rr*r2)
}

func closeTo(t testing.TB, what string, got, want complex128, tol float64) {
	t.Helper()
	if !(cmplx.Abs(got-want) <= tol*(1+cmplx.Abs(want))) {
		t.Errorf("%s = %v, want %v within %.2g", what, got, want, tol)
	}
}

func TestCondenseAgainstDense(t *testing.T) {
	for _, c := range testCells() {
		for _, shift := range [][2]complex128{{1, 1.7}, {-0.3i, 2 + 1i - 0.6i}, {-2i, 4.8}} {
			a, got := c.full(shift[0], shift[1]), c.condense(shift[0], shift[1])
			for _, f := range [][2]complex128{{1, 0}, {0, 1}, {0.3 + 1i, -2}} {
				psi := append(append([]complex128{f[0]}, c.inside(a, f[0], f[1])...), f[1])
				rows := a.times(psi)
				tol := 2e-12 // rows cancel from |stiff| of order p^2..p^3 to order 1
				closeTo(t, "left face", got.ll*f[0]+got.lr*f[1], rows[0], tol)
				closeTo(t, "right face", got.lr*f[0]+got.rr*f[1], rows[c.order], tol)
			}
		}
	}
}

func TestViewIsTheCondensedMatrix(t *testing.T) {
	for _, c := range testCells() {
		for _, e := range []complex128{0.3, 2.9, 1 - 0.4i} {
			v, want := c.view(e).matrix, c.condense(1, e)
			closeTo(t, "ll", v.ll, want.ll, 1e-12)
			closeTo(t, "lr", v.lr, want.lr, 1e-12)
			closeTo(t, "rr", v.rr, want.rr, 1e-12)
		}
	}
}

// The bilinear form is the energy derivative: held against five-point
// differences, whose error is about h^4 and 1e-13/h.
func TestBilinearFormIsTheDerivative(t *testing.T) {
	const h = 5e-4
	for _, c := range testCells() {
		e := 1.3 + 0.2i // clear of poles, where differences would fail
		for _, f := range [][2]complex128{{1, 0}, {0, 1}, {1, 1i}} {
			at := func(shift float64) complex128 {
				return c.condense(1, e+complex(shift, 0)).faceForm(f[0], f[1], f[0], f[1])
			}
			slope := (8*(at(h)-at(-h)) - (at(2*h) - at(-2*h))) / (12 * h)
			closeTo(t, "derivative", c.view(e).bilinear.faceForm(f[0], f[1], f[0], f[1]), -slope, 1e-9)
		}
	}
}

func TestHermitianFormIsTheNorm(t *testing.T) {
	for _, c := range testCells() {
		if imag(c.mu) != 0 {
			continue
		}
		a := c.full(1, 1.9)
		w := c.view(1.9).hermitian
		for _, f := range [][2]complex128{{1, 0}, {0, 1}, {1 - 1i, 0.4i}} {
			inside := c.inside(a, f[0], f[1])
			amplitudes := make([]complex128, len(inside))
			c.amplitudes(inside, amplitudes)
			got := w.faceForm(cmplx.Conj(f[0]), cmplx.Conj(f[1]), f[0], f[1])
			closeTo(t, "norm", got, complex(c.norm(f[0], f[1], amplitudes), 0), 1e-11)
		}
	}
}

// An energy on an eigenvalue of the interior must not make the matrix useless.
func TestCondenseOnAPole(t *testing.T) {
	c := flatCell(uniformPencil(newRule(8)), 1, 0, 1, 0)
	for _, lambda := range c.lambda[:4] {
		v := c.view(complex(lambda, 0))
		if cmplx.IsNaN(v.matrix.ll) || cmplx.IsInf(v.matrix.ll) {
			t.Errorf("energy %g: condensed matrix is %v", lambda, v.matrix)
		}
	}
}
