package stationary

import (
	"fmt"
	"math"
	"math/big"
	"testing"

	"fluxtoll/potential"

	"gonum.org/v1/gonum/mathext"
)

// bigSeries is cos sqrt z (first = 0) or sin sqrt z/sqrt z (first = 1) by its
// power series in 600-bit arithmetic.
func bigSeries(z float64, first int) float64 {
	const bits = 600
	sum, term := new(big.Float).SetPrec(bits), big.NewFloat(1).SetPrec(bits)
	minus := new(big.Float).SetPrec(bits).SetFloat64(-z)
	for n := 0; n < 400; n++ {
		sum.Add(sum, term)
		term.Mul(term, minus)
		term.Quo(term, new(big.Float).SetPrec(bits).SetInt64(int64((first+2*n+1)*(first+2*n+2))))
	}
	v, _ := sum.Float64()
	return v
}

// TestFlatLayer compares the matrix with the power series of cos sqrt z and
// sin sqrt z/sqrt z, and its derivative with that of the series, on both
// sides of every switch.
func TestFlatLayer(t *testing.T) {
	const m, d = 1.25, 0.5
	for _, z := range []float64{-200, -30, -3, -0.2500001, -0.2499999, -1e-3, -1e-12, 0, 1e-12, 1e-3, 0.2499999, 0.2500001, 3, 30, 200} {
		e := z / (2 * m * d * d)
		var f flatLayer
		f.set(e, m, d)
		scale := math.Exp(-f.growth)
		c, s := bigSeries(z, 0)*scale, bigSeries(z, 1)*scale
		tolerance := 2e-15 * max(1, math.Sqrt(math.Abs(z)))
		near(t, fmt.Sprintf("C(%g)", z), f.m[0], c, tolerance, 0)
		near(t, fmt.Sprintf("S(%g)", z), f.m[1]/(-m*d), s, tolerance, 0)
		near(t, "determinant", f.m[0]*f.m[3]-f.m[1]*f.m[2], f.fade, tolerance, 0)
		// Derivatives by the definition dC/dz = -S/2, dS/dz = sum of the
		// differentiated series; dz/dE = 2 m d^2.
		near(t, "dC", f.d[0], -s*m*d*d, tolerance, 0)
		h := 1e-3 * max(1, math.Abs(z))
		sz := (8*(bigSeries(z+h, 1)-bigSeries(z-h, 1)) - bigSeries(z+2*h, 1) + bigSeries(z-2*h, 1)) / (12 * h) * scale
		near(t, fmt.Sprintf("dS(%g)", z), f.d[1]/(-2*m*m*d*d*d), sz, 1e-10, 1e-9)
	}
}

// TestDensities: the integrals of |u|^2 over a layer against Gauss-Legendre
// quadrature of |u|^2, u carried to each point by the layer's own matrix; for
// real and lossy layers, thin and thick, growing and decaying.
func TestDensities(t *testing.T) {
	ran := 0
	for _, kinetic := range []float64{-8, -0.5, -1e-3, 0, 1e-3, 0.5, 8} {
		for _, d := range []float64{0.01, 0.5, 3} {
			for _, w := range []complex128{1 + 0.5i, -2 + 1i, 0.3i, -4} {
				ran++
				u := complex(0.8, 0.2)
				for _, loss := range []float64{0, 1e-9, 0.01, 1} {
					got, want := densities(kinetic, loss, d, u, w)
					near(t, fmt.Sprintf("density, E-V = %g, d = %g, loss = %g, w = %g", kinetic, d, loss, w), got, want, 0, 1e-12)
				}
			}
		}
	}
	if ran != 84 {
		t.Errorf("ran %d cases", ran)
	}
}

// densities returns the closed form over exp(2 growth) and the quadrature.
func densities(kinetic, loss, d float64, u, w complex128) (closed, sampled float64) {
	const m, panels = 1.25, 40
	var growth float64
	if loss == 0 {
		var f flatLayer
		f.set(kinetic, m, d)
		closed, growth = f.density(&wave{pu: real(u), pw: real(w), qu: imag(u), qw: imag(w)}), f.growth
	} else {
		var f lossyLayer
		f.set(complex(kinetic, loss), m, d)
		closed, growth = f.density(u, w), f.growth
	}
	for i := range panels * len(legendreNodes) {
		y, weight := legendreNodes[i%len(legendreNodes)], legendreWeights[i%len(legendreNodes)]
		x := d / panels * (float64(i/len(legendreNodes)) + (1+y)/2)
		var f lossyLayer
		f.set(complex(kinetic, loss), m, x)
		v := (f.m[0]*u + f.m[1]*w) * complex(math.Exp(f.growth-growth), 0)
		sampled += weight * d / panels / 2 * square(v)
	}
	return closed, sampled
}

// airyPair returns Ai, Ai' at x (gonum, after D. E. Amos, ACM Algorithm 644).
func airyPair(x float64) (ai, slope float64) {
	return real(mathext.AiryAi(complex(x, 0))), real(mathext.AiryAiDeriv(complex(x, 0)))
}

// TestRampAgainstAiry: one solution of the ramp, Ai((2 m F)^(1/3) (x - E/F)),
// carried from right to left by the slices.
func TestRampAgainstAiry(t *testing.T) {
	for _, c := range []struct{ slope, length, mass, energy float64 }{
		{0.5, 2, 1, 0.7}, {0.5, 2, 1, 1.4}, {2, 3, 0.7, 1}, {0.1, 20, 1.3, 0.9}, {0.01, 30, 1, 0.4},
	} {
		g := potential.Segment{To: c.length, Height: potential.Line(0, 0, c.length, c.slope*c.length), Mass: potential.Constant(c.mass)}
		beta := math.Cbrt(2 * c.mass * c.slope)
		pair := func(x float64) (u, w float64) {
			ai, d := airyPair(beta * (x - c.energy/c.slope))
			return ai, beta * d / c.mass
		}
		u, w := pair(c.length)
		seg := newSmoothSegment(g)
		var sc scratch[float64]
		slices := seg.realSlices(c.energy)
		for i := len(slices) - 1; i >= 0; i-- {
			m := sc.cross(&slices[i], c.energy).m
			u, w = m[0]*u+m[1]*w, m[2]*u+m[3]*w
		}
		wantU, wantW := pair(0)
		// gonum's Airy functions are good to about 1e-14 here.
		near(t, "Ai", u, wantU, 1e-12, 0)
		near(t, "Ai'", w, wantW, 1e-12, 0)
	}
}

// TestSlicesOfAFlatSegment: Taylor slices and closed form agree on a flat
// layer, for matrix, derivative and dwell time, with and without loss.
func TestSlicesOfAFlatSegment(t *testing.T) {
	for _, loss := range []float64{0, 0.1} {
		for _, energy := range []float64{0.3, 1, 1.7, 5} {
			l := flatOf(2.5, 1)
			l.Loss = loss
			s := build(t, plain, plain, flatOf(0.5, 0.6), l)
			closed := at(t, s, false, energy)
			// The same height, but in a form that asks for Taylor slices.
			bent := *s
			bent.Segments = append([]potential.Segment(nil), s.Segments...)
			bent.Segments[1].Height = potential.Sum{A: potential.Constant(1), B: potential.Gauss{Height: 0, Centre: 1, Width: 1}}
			taylor := at(t, &bent, false, energy)
			near(t, "T", taylor.Transmission, closed.Transmission, 0, 1e-13)
			near(t, "R", taylor.Reflection, closed.Reflection, 1e-14, 0)
			near(t, "A", taylor.Absorption, closed.Absorption, 1e-14, 1e-13)
			near(t, "delay of t", taylor.GroupDelayTransmitted, closed.GroupDelayTransmitted, 0, 1e-12)
			near(t, "delay of r", taylor.GroupDelayReflected, closed.GroupDelayReflected, 0, 1e-12)
			near(t, "dwell", taylor.LayerDwell[1], closed.LayerDwell[1], 0, 1e-12)
		}
	}
}

// TestSlowRamps: a ramp of next to no slope is a flat layer: no slope is too
// small.
func TestSlowRamps(t *testing.T) {
	want := at(t, build(t, plain, plain, flatOf(3, 0.4)), false, 0.7)
	for _, slope := range []float64{1e-18, 1e-15, 1e-12} {
		ramp := potential.Layer{Thickness: 3, Shape: potential.Ramp{Height: 0.4, HeightEnd: 0.4 + slope}, Mass: 1}
		got := at(t, build(t, plain, plain, ramp), false, 0.7)
		near(t, "T", got.Transmission, want.Transmission, slope+1e-15, 0)
		near(t, "delay", got.GroupDelayTransmitted, want.GroupDelayTransmitted, 10*slope+1e-14, 0)
	}
}
