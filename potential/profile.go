package potential

// Profile is a real quantity (a height or a mass) that is analytic in x on the
// segment it belongs to.
type Profile interface {
	// At returns the value at x.
	At(x float64) float64
	// Jet fills c with the Taylor coefficients about x, so that the value at
	// x+h is the sum over n of c[n] h^n.
	Jet(x float64, c []float64)
	// Degree is the degree of the polynomial the profile is, or -1 if it is
	// not a polynomial.
	Degree() int
	// Scale is a length over which the Taylor series about x is useful: the
	// distance to the nearest singularity in the complex plane, the width of
	// a Gaussian, +Inf for a polynomial.
	Scale(x float64) float64
	// Range returns bounds of the value on [a, b]; they may be wider than
	// the values taken.
	Range(a, b float64) (lo, hi float64)
	// Mirror returns the profile as a function of sum-x: reflected about
	// sum/2.
	Mirror(sum float64) Profile
}

// Constant returns the profile that is v everywhere.
func Constant(v float64) Polynomial { return Polynomial{C: []float64{v}} }

// IsConstant reports whether p is a polynomial of degree zero.
func IsConstant(p Profile) bool { return p.Degree() == 0 }
