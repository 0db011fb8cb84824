package scenarios

import (
	"math"
	"math/cmplx"
	"testing"
)

// TestErfc checks the continued fraction on the real axis against math.Erfc
// and off it against the integral of exp(-t^2) along a ray, by Simpson's rule.
func TestErfc(t *testing.T) {
	for _, x := range []float64{2, 2.65, 4, 9} {
		if r := real(erfc(complex(x, 0)))/math.Erfc(x) - 1; !(math.Abs(r) < 1e-6) {
			t.Errorf("erfc(%g) off by %g of itself", x, r)
		}
	}
	for _, z := range []complex128{2 + 1i, 2.65 - 3i, 4 + 6i} {
		if r := cmplx.Abs(erfc(z)/erfcByQuadrature(z) - 1); !(r < 1e-6) {
			t.Errorf("erfc(%v) off by %g of itself", z, r)
		}
	}
}

// erfcByQuadrature is 2/sqrt(pi) times the integral of exp(-s^2) from z along
// z + x, x > 0.
func erfcByQuadrature(z complex128) complex128 {
	const n, end = 20000, 12.0
	h, total := end/n, complex(0, 0)
	for i := 0; i <= n; i++ {
		w := complex(float64(2+2*(i%2)), 0)
		if i == 0 || i == n {
			w = 1
		}
		s := z + complex(h*float64(i), 0)
		total += w * cmplx.Exp(-s*s)
	}
	return total * complex(h/3*2/math.SqrtPi, 0)
}
