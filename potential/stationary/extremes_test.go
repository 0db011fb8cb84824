package stationary

import (
	"math"
	"math/cmplx"
	"testing"

	"fluxtoll/potential"
)

// plain is a lead of height 0 and mass 1.
var plain = potential.Lead{Mass: 1}

func flatOf(thickness, height float64) potential.Layer {
	return potential.Layer{Thickness: thickness, Shape: potential.Flat{Height: height}, Mass: 1}
}

func build(tb testing.TB, entry, exit potential.Lead, layers ...potential.Layer) *potential.Structure {
	tb.Helper()
	s, err := potential.Build(entry, exit, layers, potential.Options{Cut: 1e-16})
	if err != nil {
		tb.Fatal(err)
	}
	return s
}

func at(tb testing.TB, s *potential.Structure, fromRight bool, energy float64) (a Amplitudes) {
	tb.Helper()
	if err := New(s, fromRight).At(energy, &a); err != nil {
		tb.Fatal(err)
	}
	return a
}

// barrierLog is ln T of a rectangular barrier of height v and thickness d at
// energy e < v, masses 1 (Landau and Lifshitz, Quantum Mechanics, sec. 25,
// problem 2; from memory): T = 1/(1 + (g+1/g)^2 sinh^2(kappa d)/4).
func barrierLog(e, v, d float64) float64 {
	k, kappa := math.Sqrt(2*e), math.Sqrt(2*(v-e))
	g := kappa / k
	y := kappa * d
	logSinh := y - math.Ln2 + math.Log1p(-math.Exp(-2*y))
	x := 2 * (math.Log(g+1/g) - math.Ln2 + logSinh)
	return -x - math.Log1p(math.Exp(-x))
}

// TestThickBarriers: T keeps its relative accuracy down to underflow and ln T
// beyond.
func TestThickBarriers(t *testing.T) {
	for _, d := range []float64{1, 10, 100, 230, 320, 1e3, 1e6} {
		for _, e := range []float64{0.05, 0.5, 0.9} {
			a := at(t, build(t, plain, plain, flatOf(d, 1)), false, e)
			want := barrierLog(e, 1, d)
			// kappa d is rounded once, and so is the sum.
			tolerance := 4e-16 * (10 + math.Abs(want))
			near(t, "ln T", a.LogTransmission, want, tolerance, 0)
			near(t, "T", a.Transmission, math.Exp(want), 0, tolerance)
			if want > -700 && a.Transmission == 0 {
				t.Errorf("T underflows at ln T = %g", want)
			}
			near(t, "R", a.Reflection, 1, math.Exp(want)+4e-16, 0)
			// Hartman: the delay of a thick barrier is 2/(k kappa) (J. Appl.
			// Phys. 33, 3427 (1962)); the phase of a carries the rounding of
			// |d ln a/dE| = d/kappa.
			if d >= 100 {
				k, kappa := math.Sqrt(2*e), math.Sqrt(2*(1-e))
				near(t, "delay", a.GroupDelayTransmitted, 2/(k*kappa), 1e-15*d/kappa, 1e-13)
			}
		}
	}
}

// TestStackOfThickBarriers: two barriers that underflow apart, and a well
// between them, still give ln T, the same from both sides.
func TestStackOfThickBarriers(t *testing.T) {
	s := build(t, plain, potential.Lead{Height: 0.2, Mass: 2}, flatOf(400, 1), flatOf(3, -0.5), flatOf(500, 1.5))
	l, r := at(t, s, false, 0.4), at(t, s, true, 0.4)
	near(t, "ln T", r.LogTransmission, l.LogTransmission, 0, 1e-14)
	if !(l.LogTransmission < -1500) {
		t.Errorf("ln T = %g: not thick at all", l.LogTransmission)
	}
}

// TestThinLayers: a thin layer adds its height times its thickness, like a
// delta: T = 1/(1 + (v d)^2/(2 E)) to first order in the thickness (standard;
// from memory).
func TestThinLayers(t *testing.T) {
	const e = 0.5
	for _, d := range []float64{1e-6, 1e-8, 1e-9} {
		for _, v := range []float64{1e-3, 1, 1e3, 1e6, 1e9} {
			s := build(t, plain, plain, flatOf(d, v))
			area := v * d
			if area > 10 {
				continue // kappa d of 1 and more: no delta
			}
			a := at(t, s, false, e)
			want := 1 / (1 + area*area/(2*e))
			// Next order: kappa^2 d^2 = 2 v d^2 of the area, and k d.
			near(t, "T", a.Transmission, want, 1e-15+2*(v+e)*d*d+4*d*area, 0)
			near(t, "T+R", a.Transmission+a.Reflection, 1, 1e-15, 0)
			near(t, "dwell", a.Dwell, d/a.SpeedIn*a.Transmission, 4*d*(d+area+2*v*d*d), 1e-9)
		}
	}
}

// TestHeightsOverTwelveDecades: exact closed form for a barrier of any height,
// kappa d held at 3.
func TestHeightsOverTwelveDecades(t *testing.T) {
	for _, v := range []float64{1, 1e3, 1e6, 1e9, 1e12} {
		d := 3 / math.Sqrt(2*v)
		for _, e := range []float64{1e-6 * v, 1e-3, 0.5} {
			if e >= v {
				continue
			}
			a := at(t, build(t, plain, plain, flatOf(d, v)), false, e)
			near(t, "T", a.Transmission, math.Exp(barrierLog(e, v, d)), 0, 1e-14)
		}
	}
}

// TestThresholdOfALayer: at E = V a layer is 1/(1 + m V d^2/2), and its
// neighbours in energy join on to it (the closed forms switch there).
func TestThresholdOfALayer(t *testing.T) {
	s := build(t, plain, plain, flatOf(3, 1))
	centre := at(t, s, false, 1)
	near(t, "T", centre.Transmission, 2.0/11, 0, 4e-16)
	for _, d := range []float64{1e-15, 1e-12, 1e-9, 1e-6} {
		for _, sign := range []float64{-1, 1} {
			a := at(t, s, false, 1+sign*d)
			// dT/dE = 1.04, d(delay)/dE and d(dwell)/dE below 6 here.
			near(t, "T", a.Transmission, centre.Transmission, 1.1*d+1e-15, 0)
			near(t, "delay", a.GroupDelayTransmitted, centre.GroupDelayTransmitted, 6*d+1e-14, 0)
			near(t, "dwell", a.Dwell, centre.Dwell, 6*d+1e-14, 0)
		}
	}
	// And across the switch between closed form and series, |z| = 1/4.
	for _, sign := range []float64{-1, 1} {
		e := 1 + sign*series/18
		below, above := at(t, s, false, e*(1-1e-14)), at(t, s, false, e*(1+1e-14))
		near(t, "T", below.Transmission, above.Transmission, 1e-13, 0)
		near(t, "delay", below.GroupDelayTransmitted, above.GroupDelayTransmitted, 1e-12, 0)
		near(t, "dwell", below.Dwell, above.Dwell, 1e-12, 0)
	}
}

// TestThresholdOfTheExit: at E = V_exit nothing is transmitted, all is
// reflected, and everything is finite; the delay of reflection is the limit
// from above.
func TestThresholdOfTheExit(t *testing.T) {
	s := build(t, plain, potential.Lead{Height: 0.5, Mass: 1.5}, flatOf(1, 0.9), flatOf(2, -0.3))
	a := at(t, s, false, 0.5)
	if a.Transmission != 0 || a.SpeedOut != 0 || !math.IsInf(a.LogTransmission, -1) || a.GroupDelayTransmitted != 0 {
		t.Errorf("at threshold: %+v", a)
	}
	near(t, "R", a.Reflection, 1, 1e-15, 0)
	above := at(t, s, false, 0.5+1e-12)
	near(t, "delay of r", a.GroupDelayReflected, above.GroupDelayReflected, 1e-4, 0)
	near(t, "dwell", a.Dwell, above.Dwell, 1e-4, 0)
	below := at(t, s, false, 0.5-1e-12)
	if below.Transmission != 0 || below.SpeedOut != 0 {
		t.Errorf("below threshold: %+v", below)
	}
	near(t, "R below", below.Reflection, 1, 1e-15, 0)
}

// TestThresholdWithLoss: the same with a lossy layer, where delays diverge at
// the threshold.
func TestThresholdWithLoss(t *testing.T) {
	lossy := flatOf(1, 0.9)
	lossy.Loss = 0.1
	a := at(t, build(t, plain, potential.Lead{Height: 0.5, Mass: 1.5}, lossy), false, 0.5)
	near(t, "R+A", a.Reflection+a.Absorption, 1, 1e-15, 0)
	if a.Transmission != 0 || a.Absorption == 0 {
		t.Errorf("at threshold: %+v", a)
	}
}

// TestNarrowResonanceStaysPhysical: T <= 1 and T + R = 1 however narrow the
// resonance, at its very top.
func TestNarrowResonanceStaysPhysical(t *testing.T) {
	for _, b := range []float64{2, 4, 6, 8, 12, 20} {
		s := build(t, plain, plain, flatOf(b, 2), flatOf(3, 0), flatOf(b, 2))
		v := New(s, false)
		z, ok := v.refine(complex(0.30426289725, -3*math.Exp(-2*math.Sqrt(2*(2-0.304))*b)))
		if !ok {
			z = complex(0.30426289725223, 0)
		}
		e := real(z)
		for range 200 {
			e = math.Nextafter(e, 1)
			a := at(t, s, false, e)
			if !(a.Transmission <= 1+4e-15) {
				t.Errorf("b = %g: T - 1 = %g", b, a.Transmission-1)
			}
			near(t, "T+R", a.Transmission+a.Reflection, 1, 4e-15, 0)
		}
	}
}

// TestWeakLoss: A is computed from the layers: it holds for
// losses far below rounding of T and R. For a free layer of loss g, first
// order: A = 2 g d/v.
func TestWeakLoss(t *testing.T) {
	for _, g := range []float64{1e-20, 1e-12, 1e-6} {
		l := flatOf(2, 0)
		l.Loss = g
		a := at(t, build(t, plain, plain, l), false, 0.5)
		near(t, "A", a.Absorption, 4*g, 0, 1e-15+8*g)
		near(t, "phase", cmplx.Phase(a.T), 2, 1e-15+4*g, 0)
	}
}

// TestErrors: what At refuses.
func TestErrors(t *testing.T) {
	v := New(build(t, potential.Lead{Height: 1, Mass: 1}, plain), false)
	var a Amplitudes
	for _, e := range []float64{1, 0, math.NaN(), math.Inf(1), math.Inf(-1)} {
		if err := v.At(e, &a); err == nil {
			t.Errorf("energy %g: no error", e)
		}
	}
	// Beyond the range: an error, not a NaN.
	v = New(build(t, plain, plain, flatOf(1e200, 1e200)), false)
	if err := v.At(1, &a); err == nil {
		t.Error("a result that is not finite came without an error")
	}
}

// TestAtDoesNotAllocate: a budget kept by the machine.
func TestAtDoesNotAllocate(t *testing.T) {
	lossy := flatOf(1, 0.3)
	lossy.Loss = 0.1
	s := build(t, plain, plain, flatOf(1, 1), lossy,
		potential.Layer{Thickness: 2, Shape: potential.Ramp{Height: 0, HeightEnd: 1}, Mass: 1, Loss: 0.1},
		potential.Layer{Shape: potential.Hump{Height: 1, Width: 1}, Mass: 1},
		potential.Layer{Shape: potential.Point{Strength: 1}, Mass: 1})
	v := New(s, false)
	var a Amplitudes
	if n := testing.AllocsPerRun(20, func() {
		if err := v.At(0.7, &a); err != nil {
			t.Fatal(err)
		}
	}); n != 0 {
		t.Errorf("At allocates %g times", n)
	}
}
