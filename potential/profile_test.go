package potential

import (
	"fmt"
	"math"
	"testing"

	"pgregory.net/rapid"
)

// profiles are one of each kind, with mirrored and added ones.
func profiles() map[string]Profile {
	p := map[string]Profile{
		"constant":    Constant(1.5),
		"line":        Line(1, 0.5, 3, -1),
		"cubic":       Polynomial{Origin: 0.7, C: []float64{1, -0.5, 0.25, 0.3}},
		"logistic":    Logistic{Low: -0.5, High: 2, Centre: 0.6, Width: 0.4},
		"falling":     Logistic{Low: -0.5, High: 2, Centre: 0.6, Width: -0.4},
		"sech2":       Sech2{Height: 1.5, Centre: 0.4, Width: 0.7},
		"gauss":       Gauss{Height: -1.2, Centre: 0.5, Width: 0.6},
		"tilted hump": Sum{Sech2{Height: 1.5, Centre: 0.4, Width: 0.7}, Line(0, 0, 1, -0.3)},
	}
	for name, q := range p {
		p["mirrored "+name] = q.Mirror(1.3)
	}
	return p
}

// TestJets: the Taylor series about x gives the values beside x, within a
// fifth of the scale, to rounding; coefficient by coefficient that is a check
// against At.
func TestJets(t *testing.T) {
	const terms = 40
	ran := 0
	for name, p := range profiles() {
		for _, x := range []float64{-6, -1, 0.1, 0.4, 0.6, 2, 7} {
			ran++
			c := make([]float64, terms)
			p.Jet(x, c)
			h := min(0.2*p.Scale(x), 1)
			if !(h > 0) {
				t.Fatalf("%s: scale %g at %g", name, p.Scale(x), x)
			}
			for _, y := range []float64{-h, -h / 3, 0, h / 2, h} {
				sum := 0.0
				for n := terms - 1; n >= 0; n-- {
					sum = sum*y + c[n]
				}
				// 0.2^40 by truncation; a few roundings, more for large cubics.
				want := p.At(x + y)
				near(t, fmt.Sprintf("%s about %g at %+g", name, x, y), sum, want, 4e-15*(1+math.Abs(want)))
			}
		}
	}
	if ran != 16*7 {
		t.Errorf("ran %d cases", ran)
	}
}

// TestShortJets: a jet may be as short as one.
func TestShortJets(t *testing.T) {
	for name, p := range profiles() {
		for n := 1; n < 4; n++ {
			c, long := make([]float64, n), make([]float64, 8)
			p.Jet(0.3, c)
			p.Jet(0.3, long)
			for i := range c {
				near(t, fmt.Sprintf("%s, coefficient %d of %d", name, i, n), c[i], long[i], 1e-15*(1+math.Abs(long[i])))
			}
		}
	}
}

// TestRanges: values lie within the bounds.
func TestRanges(t *testing.T) {
	all := profiles()
	rapid.Check(t, func(rt *rapid.T) {
		a := rapid.Float64Range(-3, 3).Draw(rt, "a")
		b := a + rapid.Float64Range(0, 4).Draw(rt, "length")
		x := a + (b-a)*rapid.Float64Range(0, 1).Draw(rt, "at")
		for name, p := range all {
			lo, hi := p.Range(a, b)
			if v := p.At(x); !(v >= lo-1e-12 && v <= hi+1e-12) {
				rt.Fatalf("%s is %g at %g, out of [%g, %g] on [%g, %g]", name, v, x, lo, hi, a, b)
			}
		}
	})
}

// TestMirrorOfProfiles: Mirror(sum) at x is the profile at sum - x.
func TestMirrorOfProfiles(t *testing.T) {
	for name, p := range profiles() {
		m := p.Mirror(0.9)
		for _, x := range []float64{-2, 0, 0.3, 1.7} {
			near(t, name, m.At(x), p.At(0.9-x), 1e-14*(1+math.Abs(p.At(0.9-x))))
		}
	}
}

// TestDegrees: what is a polynomial says so.
func TestDegrees(t *testing.T) {
	for name, want := range map[string]int{"constant": 0, "line": 1, "cubic": 3, "logistic": -1, "tilted hump": -1, "mirrored cubic": 3} {
		if got := profiles()[name].Degree(); got != want {
			t.Errorf("%s: degree %d, want %d", name, got, want)
		}
	}
	if Line(0, 1, 1, 1).Degree() != 0 || !IsConstant(Constant(3)) || IsConstant(Line(0, 0, 1, 1)) {
		t.Error("a level line is not constant, or a sloping one is")
	}
	if d := (Sum{Constant(1), Line(0, 0, 1, 1)}).Degree(); d != 1 {
		t.Errorf("constant and line add to degree %d", d)
	}
}

// TestTails: far out the tails neither overflow nor cancel.
func TestTails(t *testing.T) {
	for _, x := range []float64{30, 300, 1e4, -30, -300, -1e4} {
		near(t, "logistic", Logistic{0, 1, 0, 1}.At(x), 1/(1+math.Exp(-x)), 1e-15)
		want := 4 * math.Exp(-2*math.Abs(x))
		near(t, "sech2", Sech2{1, 0, 1}.At(x), want, 1e-13*want)
	}
	var c [3]float64
	Sech2{1, 0, 1}.Jet(30, c[:])
	want := 4 * math.Exp(-60)
	near(t, "slope of a sech2 tail", c[1], -2*want, 1e-12*want)
}
