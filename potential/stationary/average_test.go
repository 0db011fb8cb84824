package stationary

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"reflect"
	"runtime"
	"testing"

	"fluxtoll/potential"
)

func average(tb testing.TB, s *potential.Structure, p Spectrum) *Averages {
	tb.Helper()
	a, err := New(s, false).Average(context.Background(), p, Options{})
	if err != nil {
		tb.Fatal(err)
	}
	return a
}

// honest fails where a mean is further from want than its error and slack
// (the error of want), or its error is larger than useless.
func honest(tb testing.TB, what string, got Mean, want, slack, useless float64) {
	tb.Helper()
	if !(math.Abs(got.Value-want) <= got.Error+slack) {
		tb.Errorf("%s = %.17g +- %.2g, want %.17g: off by %.3g", what, got.Value, got.Error, want, got.Value-want)
	}
	if !(got.Error <= useless) {
		tb.Errorf("%s: error %.2g, want at most %.2g", what, got.Error, useless)
	}
}

// trapezoid averages f over the spectrum by the trapezoidal rule, which
// converges faster than any power for a Gaussian times something analytic:
// a rule that shares nothing with the one under test.
func trapezoid(p Spectrum, from, to float64, n int, f func(k float64) float64) float64 {
	h := (to - from) / float64(n)
	sum := 0.0
	for i := 1; i < n; i++ {
		k := from + h*float64(i)
		sum += math.Exp(p.logDensity(k)) * f(k)
	}
	return sum * h
}

// TestDeepTunnelling: the average of T through thick barriers is ruled by the
// tail of the Gaussian, many widths above the mean; it must still have its
// relative accuracy. Reference: the closed form of T under the trapezoidal
// rule.
func TestDeepTunnelling(t *testing.T) {
	ran := 0
	for _, c := range []struct{ d, k0, length float64 }{
		{5, 1, 5}, {20, 1, 10}, {60, 1, 20}, {120, 1, 60}, {200, 0.8, 100}, {300, 1, 400},
	} {
		ran++
		p := Spectrum{c.k0, 1 / (2 * c.length)}
		s := build(t, plain, plain, flatOf(c.d, 1))
		a := average(t, s, p)
		v := New(s, false)
		var amp Amplitudes
		want := trapezoid(p, 0, c.k0+40*p.Width, 40000, func(k float64) float64 {
			if err := v.At(k*k/2, &amp); err != nil {
				t.Fatal(err)
			}
			return amp.Transmission
		})
		if !(want > 0) {
			t.Fatalf("d = %g: the reference underflows", c.d)
		}
		honest(t, fmt.Sprintf("T, d = %g", c.d), a.Transmitted, want, 1e-12*want, 1e-9*want)
		near(t, "ln T", a.LogTransmitted, math.Log(want), 1e-9, 0)
	}
	if ran != 6 {
		t.Errorf("ran %d cases", ran)
	}
}

// TestUnderflow: where T is too small for a number its mean delays still hold:
// 2/(k kappa) of Hartman, averaged over next to one energy.
func TestUnderflow(t *testing.T) {
	a := average(t, build(t, plain, plain, flatOf(2000, 1)), Spectrum{0.9, 1e-5})
	if a.Transmitted.Value != 0 || math.IsInf(a.LogTransmitted, 0) {
		t.Errorf("transmitted %v, logarithm %g", a.Transmitted, a.LogTransmitted)
	}
	kappa := math.Sqrt(2 - 0.81)
	near(t, "delay", a.GroupDelayTransmitted.Value, 2/(0.9*kappa), 1e-3, 0)
}

// TestNothingTransmitted: a closed exit gives zeros, never NaN.
func TestNothingTransmitted(t *testing.T) {
	a := average(t, build(t, plain, potential.Lead{Height: 50, Mass: 1}, flatOf(1, 2)), Spectrum{1, 0.02})
	if a.Transmitted != (Mean{}) || a.GroupDelayTransmitted != (Mean{}) || a.SlownessOutTransmitted != (Mean{}) {
		t.Errorf("%+v", a)
	}
	honest(t, "R", a.Reflected, 1, 0, 1e-12)
}

// twin is a twin barrier of height 2 about a well of width 3.
func twin(tb testing.TB, left, right float64) *potential.Structure {
	return build(tb, plain, plain, flatOf(left, 2), flatOf(3, 0), flatOf(right, 2))
}

// TestNarrowResonances: widths from 1e-2 to 1e-10 of the energy. References:
// the Breit-Wigner area of T, 2 pi W_L W_R/W (W_L = W_R here), exact to first
// order in the width over the energy; and a dense midpoint rule in s, e =
// E_r + (W/2) sinh s.
func TestNarrowResonances(t *testing.T) {
	ran := 0
	for _, b := range []float64{1, 1.5, 2, 3, 4, 5, 6} {
		ran++
		s := twin(t, b, b)
		p := Spectrum{0.77, 1.0 / 60}
		a := average(t, s, p)
		if len(a.Resonances) != 1 {
			t.Fatalf("b = %g: resonances %v, want one", b, a.Resonances)
		}
		r := a.Resonances[0]
		k := math.Sqrt(2 * r.Energy)
		area := math.Pi / 2 * r.Width * math.Exp(p.logDensity(k)) / k
		near(t, fmt.Sprintf("T by area, b = %g", b), a.Transmitted.Value, area, a.Transmitted.Error, 40*r.Width/r.Energy)
		want, dwell := stretched(t, s, p, r)
		// The energy itself is rounded: each point of either rule is off by
		// eps E/W of its share, at random.
		rounding := 1e-15 * r.Energy / r.Width
		honest(t, fmt.Sprintf("T, b = %g", b), a.Transmitted, want, (1e-12+rounding)*want, (1e-9+10*rounding)*want)
		honest(t, fmt.Sprintf("dwell, b = %g", b), a.Dwell, dwell, (1e-12+rounding)*dwell, (1e-9+10*rounding)*dwell)
		near(t, "T+R", a.Transmitted.Value+a.Reflected.Value, 1, a.Transmitted.Error+a.Reflected.Error+1e-15, 0)
	}
	if ran != 7 {
		t.Errorf("ran %d cases", ran)
	}
}

// stretched integrates T and the dwell time densely around one resonance.
func stretched(tb testing.TB, s *potential.Structure, p Spectrum, r Pole) (transmitted, dwell float64) {
	v := New(s, false)
	var a Amplitudes
	half := r.Width / 2
	lo, hi := -math.Asinh(r.Energy*(1-1e-9)/half), math.Asinh(3/half)
	const n = 40000
	h := (hi - lo) / n
	for i := range n {
		x := lo + h*(float64(i)+0.5)
		e := r.Energy + half*math.Sinh(x)
		if err := v.At(e, &a); err != nil {
			tb.Fatal(err)
		}
		k := math.Sqrt(2 * e)
		w := h * half * math.Cosh(x) / k * math.Exp(p.logDensity(k))
		transmitted += w * a.Transmission
		dwell += w * a.Dwell
	}
	return transmitted, dwell
}

// TestUnresolvedResonances: a resonance below double precision is counted, and
// the errors cover what it hides: the Breit-Wigner areas of its widths.
func TestUnresolvedResonances(t *testing.T) {
	for _, b := range []float64{10, 15, 20} {
		p := Spectrum{0.77, 1.0 / 60}
		a := average(t, twin(t, b, b), p)
		if a.Unresolved != 1 {
			t.Errorf("b = %g: %d unresolved", b, a.Unresolved)
		}
		k := math.Sqrt(2 * 0.30426289725223)
		hidden := math.Pi * math.Exp(p.logDensity(k)) / k // 2 pi W_L/W
		if !(a.Dwell.Error >= hidden) {
			t.Errorf("b = %g: dwell error %g does not cover %g", b, a.Dwell.Error, hidden)
		}
	}
}

// TestResonanceAboveADeepFloor: between resonances T is below the smallest
// number, on them near 1; the scale must hold both.
func TestResonanceAboveADeepFloor(t *testing.T) {
	layers := []potential.Layer{flatOf(4, 2)}
	for range 60 {
		layers = append(layers, flatOf(3, 0), flatOf(4, 2))
	}
	s := build(t, plain, plain, layers...)
	if floor := at(t, s, false, 0.25); !(floor.LogTransmission < -750) {
		t.Fatalf("ln T = %g between resonances: not deep", floor.LogTransmission)
	}
	a := average(t, s, Spectrum{0.77, 0.02})
	if len(a.Resonances)+a.Unresolved != 60 {
		t.Errorf("%d resonances and %d unresolved, want 60 in all", len(a.Resonances), a.Unresolved)
	}
	if !(a.Transmitted.Value > 1e-12) {
		t.Errorf("transmitted %v", a.Transmitted)
	}
}

// TestConfinedByTheLead: a well between a barrier and a closed exit has
// resonances though no second barrier stands there.
func TestConfinedByTheLead(t *testing.T) {
	s := build(t, plain, potential.Lead{Height: 5, Mass: 1}, flatOf(4, 2), flatOf(3, 0))
	a := average(t, s, Spectrum{0.8, 0.02})
	if len(a.Resonances) != 1 || a.Resonances[0].Width > 1e-6 {
		t.Fatalf("resonances %v, want a narrow one", a.Resonances)
	}
	r := a.Resonances[0]
	// All of what tunnels in stays for 1/W: the area of the delay of r is 2 pi.
	// So the mean delay exceeds that without resonance by its weight.
	k := math.Sqrt(2 * r.Energy)
	extra := 2 * math.Pi * math.Exp(Spectrum{0.8, 0.02}.logDensity(k)) / k
	wall := average(t, build(t, plain, plain, flatOf(60, 2)), Spectrum{0.8, 0.02})
	near(t, "delay of r", a.GroupDelayReflected.Value, wall.GroupDelayReflected.Value+extra, 1e-4, 1e-4)
}

// TestTenCoupledWells: a miniband of ten resonances, found all, with the
// average against a trapezoid fine enough for the narrowest.
func TestTenCoupledWells(t *testing.T) {
	layers := []potential.Layer{flatOf(1.2, 2)}
	for range 10 {
		layers = append(layers, flatOf(3, 0), flatOf(1.2, 2))
	}
	s := build(t, plain, plain, layers...)
	p := Spectrum{0.77, 0.04}
	a := average(t, s, p)
	band := 0
	for _, r := range a.Resonances {
		if r.Energy > 0.2 && r.Energy < 0.4 {
			band++
		}
	}
	if band != 10 {
		t.Errorf("found %d resonances in the miniband, want 10: %v", band, a.Resonances)
	}
	v := New(s, false)
	var amp Amplitudes
	n := int(30 * 2 * p.Width / (a.Resonances[0].Width / 4))
	want := trapezoid(p, 0.4, 1.2, n, func(k float64) float64 {
		if err := v.At(k*k/2, &amp); err != nil {
			t.Fatal(err)
		}
		return amp.Transmission
	})
	// exp(-2 pi (W/2)/h) and the cut of the Gaussian at 9 widths.
	honest(t, "T", a.Transmitted, want, 1e-11, 1e-9)
}

// TestLossyAverage: T + R + A = 1 for averages, and the losses of the layers
// add up.
func TestLossyAverage(t *testing.T) {
	lossy := flatOf(2, 0.2)
	lossy.Loss = 0.05
	a := average(t, build(t, plain, potential.Lead{Height: 0.3, Mass: 1.3}, flatOf(1, 1.5), lossy, flatOf(1, 1.5)), Spectrum{1, 0.05})
	total := a.Transmitted.Value + a.Reflected.Value + a.Lost.Value
	near(t, "T+R+A", total, 1, a.Transmitted.Error+a.Reflected.Error+a.Lost.Error+1e-15, 0)
	if len(a.LayerLost) != 3 || a.LayerLost[0] != (Mean{}) || !(a.Lost.Value > 0.01) {
		t.Errorf("losses %v of %v", a.LayerLost, a.Lost)
	}
	near(t, "lost", a.LayerLost[1].Value, a.Lost.Value, 0, 1e-14)
	sum := 0.0
	for _, d := range a.LayerDwell {
		sum += d.Value
	}
	near(t, "dwell", sum, a.Dwell.Value, 0, 1e-14)
}

// TestThresholdSpectrum: a packet astride the top of a step. Reference: R of
// the sharp step, ((k-q)/(k+q))^2, in closed form under a rule of its own on
// either side of the threshold, k = k_t +- u^2.
func TestThresholdSpectrum(t *testing.T) {
	p := Spectrum{1.4, 0.05}
	a := average(t, build(t, plain, potential.Lead{Height: 1, Mass: 1}), p)
	kt := math.Sqrt2
	want, slow := 0.0, 0.0
	const panels, width = 60, 0.9 / 60 // up to 16 widths above
	for i := range panels * len(legendreNodes) {
		y, weight := legendreNodes[i%len(legendreNodes)], legendreWeights[i%len(legendreNodes)]
		u := width * (float64(i/len(legendreNodes)) + (1+y)/2)
		k := kt + u*u
		q := u * math.Sqrt(2*kt+u*u)
		w := width / 2 * weight * 2 * u * math.Exp(p.logDensity(k)) * 4 * k * q / ((k + q) * (k + q))
		want += w
		slow += w / q
	}
	honest(t, "T", a.Transmitted, want, 1e-14, 1e-9)
	honest(t, "slowness out", a.SlownessOutTransmitted, slow/want, 1e-13, 1e-8)
}

// TestBothSides: mean T and delay are the same from both sides for equal
// leads, and layers keep their order.
func TestBothSides(t *testing.T) {
	s := build(t, plain, plain, flatOf(1, 1.5), flatOf(2, 0), flatOf(0.5, 2.5))
	l := average(t, s, Spectrum{1, 0.05})
	r, err := New(s, true).Average(context.Background(), Spectrum{1, 0.05}, Options{})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "T", r.Transmitted.Value, l.Transmitted.Value, l.Transmitted.Error+r.Transmitted.Error, 0)
	near(t, "delay", r.GroupDelayTransmitted.Value, l.GroupDelayTransmitted.Value, l.GroupDelayTransmitted.Error+r.GroupDelayTransmitted.Error, 0)
	m := average(t, s.Mirror(), Spectrum{1, 0.05})
	for i := range r.LayerDwell {
		near(t, "layer dwell", r.LayerDwell[i].Value, m.LayerDwell[2-i].Value, 0, 1e-13)
	}
}

// TestWorkersDoNotMatter: the same bits on one processor and on several.
func TestWorkersDoNotMatter(t *testing.T) {
	var layers []potential.Layer
	for i := range 60 {
		layers = append(layers, flatOf(0.5+0.01*float64(i), float64(i%2)))
	}
	s := build(t, plain, plain, layers...)
	before := runtime.GOMAXPROCS(1)
	defer runtime.GOMAXPROCS(before)
	one := average(t, s, Spectrum{1.2, 0.05})
	runtime.GOMAXPROCS(4)
	four := average(t, s, Spectrum{1.2, 0.05})
	if !reflect.DeepEqual(one, four) {
		t.Error("averages depend on the number of processors")
	}
}

// TestLimits: what Average does when it is stopped or asked for nonsense.
func TestLimits(t *testing.T) {
	s := twin(t, 4, 4)
	v := New(s, false)
	a, err := v.Average(context.Background(), Spectrum{0.77, 0.05}, Options{MaxEvaluations: 100})
	if !errors.Is(err, ErrEvaluations) {
		t.Fatalf("error %v", err)
	}
	full := average(t, s, Spectrum{0.77, 0.05})
	if a == nil || !(math.Abs(a.Transmitted.Value-full.Transmitted.Value) <= a.Transmitted.Error+full.Transmitted.Error) {
		t.Errorf("cut short %+v, full %+v", a.Transmitted, full.Transmitted)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := v.Average(ctx, Spectrum{0.77, 0.05}, Options{}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
	for _, p := range []Spectrum{{}, {1, 0}, {0, 1}, {-1, 1}, {math.NaN(), 1}, {1, math.Inf(1)}} {
		if _, err := v.Average(context.Background(), p, Options{}); err == nil {
			t.Errorf("spectrum %v: no error", p)
		}
	}
	for _, o := range []Options{{Relative: -1}, {Relative: 2}, {Relative: math.NaN()}, {MaxEvaluations: -1}} {
		if _, err := v.Average(context.Background(), Spectrum{1, 0.1}, o); err == nil {
			t.Errorf("options %v: no error", o)
		}
	}
}

// TestNodes: the recorded nodes ascend, carry the spectrum and reproduce the
// averages.
func TestNodes(t *testing.T) {
	for _, exit := range []potential.Lead{plain, {Height: 0.5, Mass: 1}} {
		a := average(t, build(t, plain, exit, flatOf(1, 1)), Spectrum{1, 0.05})
		weight, transmitted, last := 0.0, 0.0, 0.0
		for _, n := range a.Nodes {
			if !(n.K > last) {
				t.Fatalf("nodes do not ascend: %g after %g", n.K, last)
			}
			last = n.K
			weight += n.Weight
			transmitted += n.Weight * n.Amplitudes.Transmission
			near(t, "energy", n.Amplitudes.Energy, n.K*n.K/2, 0, 1e-15)
		}
		near(t, "weight", weight, 1, 1e-14, 0)
		near(t, "T", transmitted, a.Transmitted.Value, 0, 1e-13)
	}
}

// TestThousandsOfLayers: a chirped stack of 1,000 layers, with its identity
// checked, and one energy through 100,000.
func TestThousandsOfLayers(t *testing.T) {
	stack := func(n int) *potential.Structure {
		layers := make([]potential.Layer, n)
		for i := range layers {
			layers[i] = flatOf(0.3+0.2*math.Sin(float64(i)*0.01), 0.4*float64(i%2))
		}
		return build(t, plain, plain, layers...)
	}
	a := average(t, stack(1000), Spectrum{1.2, 0.01})
	near(t, "T+R", a.Transmitted.Value+a.Reflected.Value, 1, a.Transmitted.Error+a.Reflected.Error+1e-12, 0)
	b := at(t, stack(100000), false, 0.72)
	near(t, "T+R", b.Transmission+b.Reflection, 1, 1e-11, 0)
	sum := b.Transmission*b.GroupDelayTransmitted + b.Reflection*b.GroupDelayReflected + imag(b.R)/(b.SpeedIn*b.SpeedIn)
	near(t, "dwell", sum, b.Dwell, 0, 1e-9)
	if cmplx.Abs(b.R) == 0 {
		t.Error("nothing is reflected at all")
	}
}
