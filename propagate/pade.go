package propagate

import (
	"fmt"
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/mat"
)

// MaxPade is the highest member of the family.
const MaxPade = 5

// Pade is the diagonal Pade approximant [m/m] of exp(z), written as the
// product over its poles p_j (all with positive real part) of the factors
//
//	-(z + conj(p_j))/(z - p_j) = -(1 + 2 Re(p_j)/(z - p_j)),
//
// each of modulus 1 for imaginary z. Member 1 is the Crank-Nicolson (Cayley)
// step. The error of exp(z) is O(z^(2m+1)) (G. A. Baker and P. Graves-Morris,
// Pade Approximants, 2nd ed., Cambridge 1996, sec. 1.2).
type Pade struct {
	Member int
	Poles  []complex128
}

// NewPade returns member m, 1 <= m <= MaxPade.
func NewPade(m int) (Pade, error) {
	if m < 1 || m > MaxPade {
		return Pade{}, fmt.Errorf("propagate: Pade member %d: 1 to %d are accepted", m, MaxPade)
	}
	return Pade{Member: m, Poles: padePoles(m)}, nil
}

// padePoles finds the zeros of the denominator
// sum_k (2m-k)! / (k! (m-k)!) (-z)^k from its companion matrix, polished by
// Newton's method.
func padePoles(m int) []complex128 {
	c := make([]float64, m+1)
	for k := range c {
		c[k] = factorial(2*m-k) / (factorial(k) * factorial(m-k)) * math.Pow(-1, float64(k))
	}
	companion := mat.NewDense(m, m, nil)
	for i := range m {
		if i > 0 {
			companion.Set(i, i-1, 1)
		}
		companion.Set(i, m-1, -c[i]/c[m])
	}
	var eig mat.Eigen
	if !eig.Factorize(companion, mat.EigenNone) {
		panic("propagate: poles of the time step did not converge")
	}
	poles := eig.Values(nil)
	for i := range poles {
		for range 3 {
			value, slope := polynomialAt(c, poles[i])
			poles[i] -= value / slope
		}
	}
	return poles
}

// polynomialAt returns the value and the derivative of sum c[k] z^k.
func polynomialAt(c []float64, z complex128) (value, slope complex128) {
	for k := len(c) - 1; k >= 0; k-- {
		slope = slope*z + value
		value = value*z + complex(c[k], 0)
	}
	return value, slope
}

func factorial(n int) float64 { return math.Gamma(float64(n) + 1) }

// Phase returns theta, where the approximant of exp(-i y) is exp(-i theta),
// and its slope d(theta)/dy, for real y. The exact values are y and 1; an
// energy E is propagated by a step dt as if it were theta(E dt)/dt, so a
// time interval measured at energy E is off by the factor 1/slope.
func (p Pade) Phase(y float64) (theta, slope float64) {
	for _, pole := range p.Poles {
		a, b := real(pole), imag(pole)
		// -(z+conj p)/(z-p) at z = -i y has phase -2 arg of (a + i(y+b)) up
		// to a constant that the conjugate pole removes.
		theta += 2 * math.Atan2(y+b, a)
		slope += 2 * a / (a*a + (y+b)*(y+b))
	}
	return theta, slope
}

// SlopeError is slope - 1 of Phase, without cancellation for small y: the
// deviation of the slope is -y^(2m)/|prod (z - p_j)|^2 at z = -i y, up to
// the normalisation of the denominator.
func (p Pade) SlopeError(y float64) float64 {
	product := 1.0
	for _, pole := range p.Poles {
		v := cmplx.Abs(complex(0, -y) - pole)
		product *= v * v
	}
	return -math.Pow(y, float64(2*p.Member)) / product
}

// Step applies one whole step to a single eigenvalue: the approximant of
// exp(z).
func (p Pade) Step(z complex128) complex128 {
	v := complex(1, 0)
	for _, pole := range p.Poles {
		v *= -(z + cmplx.Conj(pole)) / (z - pole)
	}
	return v
}
