package propagate

import (
	"math"
	"math/cmplx"
	"testing"
)

// numerators holds the coefficients of the numerator of the [m/m] approximant
// of exp(z), lowest first; the denominator has them with alternating signs
// (G. A. Baker and P. Graves-Morris, Pade Approximants, 2nd ed., Cambridge
// 1996, sec. 1.2; numbers from memory).
func numerators() map[int][]float64 {
	return map[int][]float64{
		1: {2, 1},
		2: {12, 6, 1},
		3: {120, 60, 12, 1},
		4: {1680, 840, 180, 20, 1},
		5: {30240, 15120, 3360, 420, 30, 1},
	}
}

func published(m int, z complex128) complex128 {
	up, down, power, sign := complex(0, 0), complex(0, 0), complex(1, 0), complex(1, 0)
	for _, c := range numerators()[m] {
		up += complex(c, 0) * power
		down += sign * complex(c, 0) * power
		power *= z
		sign = -sign
	}
	return up / down
}

func pade(t testing.TB, m int) Pade {
	t.Helper()
	p, err := NewPade(m)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func TestPadeAgainstPublished(t *testing.T) {
	for _, m := range members() {
		p := pade(t, m)
		for _, z := range []complex128{0, 0.3i, -2i, 7i, -25i, -0.4 - 1.3i, -3 + 2i} {
			got, want := p.Step(z), published(m, z)
			if !(cmplx.Abs(got-want) <= 2e-14*(1+cmplx.Abs(want))) { // m products, poles good to 1e-15
				t.Errorf("member %d at %v: %v, want %v", m, z, got, want)
			}
		}
	}
}

func TestPadePoles(t *testing.T) {
	near(t, "pole of member 1", real(pade(t, 1).Poles[0]), 2, 1e-15)
	for _, pole := range pade(t, 2).Poles {
		near(t, "real part, member 2", real(pole), 3, 4e-15)
		near(t, "imaginary part, member 2", math.Abs(imag(pole)), math.Sqrt(3), 4e-15)
	}
	for _, m := range members() {
		p, sum := pade(t, m), complex(0, 0)
		for _, pole := range p.Poles {
			sum += pole
			if !(real(pole) > 0) {
				t.Errorf("member %d has a pole %v on the wrong side", m, pole)
			}
		}
		// Vieta: the poles sum to the ratio of the two highest coefficients, m(m+1).
		near(t, "sum of poles", real(sum), float64(m*(m+1)), 1e-13)
		near(t, "sum of poles, imaginary", imag(sum), 0, 1e-13)
	}
}

func TestPadeRefusesOtherMembers(t *testing.T) {
	for _, m := range []int{-1, 0, MaxPade + 1} {
		if _, err := NewPade(m); err == nil {
			t.Errorf("member %d was accepted", m)
		}
	}
}

func TestPadeFactorsAreUnitary(t *testing.T) {
	for _, m := range members() {
		for _, pole := range pade(t, m).Poles {
			for _, y := range []float64{-40, -1, 0, 0.2, 3, 1e4} {
				z := complex(0, -y)
				near(t, "|factor|", cmplx.Abs(1+complex(2*real(pole), 0)/(z-pole)), 1, 1e-15)
			}
		}
	}
}

// The leading error of the approximant is (-1)^m (m!)^2/((2m)!(2m+1)!)
// z^(2m+1) (Baker and Graves-Morris, sec. 1.2; from memory).
func TestPadeOrderInZ(t *testing.T) {
	for _, m := range members() {
		f := func(n int) float64 { return math.Gamma(float64(n + 1)) }
		leading := math.Pow(-1, float64(m)) * f(m) * f(m) / (f(2*m) * f(2*m+1))
		// Sizes at which the error is far above rounding and the next term,
		// of relative size z^2/12 at most, is small.
		for _, y := range map[int][]float64{
			1: {0.01, 0.02, 0.05}, 2: {0.05, 0.1, 0.2}, 3: {0.3, 0.4, 0.5}, 4: {0.6, 0.8, 1}, 5: {1.2, 1.4, 1.6},
		}[m] {
			z := complex(0, y)
			e := (1 - pade(t, m).Step(z)*cmplx.Exp(-z)) / cmplx.Pow(z, complex(float64(2*m+1), 0)) / complex(leading, 0)
			if !(cmplx.Abs(e-1) < 0.2*y*y) {
				t.Errorf("member %d, y = %g: error is %v times the leading term", m, y, e)
			}
		}
	}
}

func TestPadePhase(t *testing.T) {
	for _, m := range members() {
		p := pade(t, m)
		base, _ := p.Phase(0)
		for _, y := range []float64{-9, -1.5, -0.1, 0.01, 0.7, 2, 12} {
			theta, slope := p.Phase(y)
			got, want := cmplx.Exp(complex(0, -(theta-base))), published(m, complex(0, -y))
			if !(cmplx.Abs(got-want) < 1e-13) { // sums of m arctangents up to 2 pi m
				t.Errorf("member %d, y = %g: exp(-i theta) = %v, want %v", m, y, got, want)
			}
			near(t, "phase at zero", base, 0, 1e-14)
			const h = 1e-4
			up, _ := p.Phase(y + h)
			down, _ := p.Phase(y - h)
			near(t, "slope", slope, (up-down)/(2*h), 1e-8) // h^2/6 and rounding/h
			near(t, "slope error", p.SlopeError(y), slope-1, 1e-14)
		}
	}
}

// SlopeError keeps its digits where slope-1 has none: its leading term is
// -y^(2m)/|prod p_j|^2, and prod p_j = (2m)!/m!.
func TestPadeSlopeErrorOfSmallPhase(t *testing.T) {
	for _, m := range members() {
		y := 1e-3
		product := math.Gamma(float64(2*m+1)) / math.Gamma(float64(m+1))
		want := -math.Pow(y, float64(2*m)) / (product * product)
		near(t, "slope error", pade(t, m).SlopeError(y)/want, 1, 1e-6) // next term y^2
	}
}
