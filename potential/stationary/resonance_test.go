package stationary

import (
	"context"
	"errors"
	"math"
	"testing"

	"fluxtoll/potential"
)

// resonances hunts between two wave numbers of a lead of height 0.
func resonances(tb testing.TB, s *potential.Structure, lo, hi float64) (poles []Pole, hidden int) {
	tb.Helper()
	energy := func(k float64) float64 { return k * k / (2 * s.Entry.Mass) }
	poles, hidden, err := New(s, false).Resonances(context.Background(), energy(lo), energy(hi), 100000)
	if err != nil {
		tb.Fatal(err)
	}
	return poles, hidden
}

// TestHuntFindsPublishedPoles: the poles of testdata/closed_forms.json, found
// without a hint. The second of dbl.sym has a width of a quarter of its
// energy.
func TestHuntFindsPublishedPoles(t *testing.T) {
	ran := 0
	for _, c := range loadClosedForms(t) {
		if c.Quantity != "pole" {
			continue
		}
		ran++
		re, im := c.pole(t)
		s := c.Structure.build(t)
		k := math.Sqrt(2 * s.Entry.Mass * re)
		poles, _ := resonances(t, s, 0.3*k, 1.6*k)
		found := false
		for _, p := range poles {
			if math.Abs(p.Energy-re) < 1e-12*re && math.Abs(p.Width+2*im) < 1e-11*p.Width {
				found = true
			}
		}
		if !found {
			t.Errorf("%s: %v does not hold %g %g i", c.ID, poles, re, im)
		}
	}
	if ran != 8 {
		t.Errorf("ran %d cases, want 8", ran)
	}
}

// TestHuntCountsLevelsOfABox: behind thick walls the resonances are the
// levels of the box, n^2 pi^2/(2 w^2) as the walls rise: as many as there are,
// however narrow.
func TestHuntCountsLevelsOfABox(t *testing.T) {
	for _, wall := range []float64{0.05, 0.3, 1} {
		const height, w = 200.0, 10.0
		s := build(t, plain, plain, flatOf(wall, height), flatOf(w, 0), flatOf(wall, height))
		top := 20.5 * math.Pi / w
		poles, hidden := resonances(t, s, 0.5*math.Pi/w, top)
		if n := len(poles) + hidden; n < 20 || len(poles) > 21 {
			t.Errorf("walls of %g: %d poles and %d hidden for 20 levels", wall, len(poles), hidden)
		}
		// A wall of height V leaves the wave 1/kappa deep: w + 2/kappa.
		for i, p := range poles[:min(5, len(poles))] {
			if hidden > 0 || wall < 0.3 {
				break // thin walls let the levels sink
			}
			n := float64(i + 1)
			near(t, "level", p.Energy, n*n*math.Pi*math.Pi/(2*math.Pow(w+2/math.Sqrt(2*height), 2)), 0, 1e-3)
		}
	}
}

// TestHuntAmongCoupledBoxes: ten equal boxes behind walls that split their
// levels by ever less; all ten of each are found or counted.
func TestHuntAmongCoupledBoxes(t *testing.T) {
	for _, b := range []float64{0.5, 1, 2, 3} {
		layers := []potential.Layer{flatOf(b, 4)}
		for range 10 {
			layers = append(layers, flatOf(3, 0), flatOf(b, 4))
		}
		poles, hidden := resonances(t, build(t, plain, plain, layers...), 0.6, 1.1)
		if len(poles)+hidden != 10 {
			t.Errorf("walls of %g: %d poles, %d hidden, want 10 in all", b, len(poles), hidden)
		}
	}
}

// TestResonancesRefuses: windows that make no sense, and a budget that is too
// small.
func TestResonancesRefuses(t *testing.T) {
	v := New(twin(t, 3, 3), false)
	for _, w := range [][2]float64{{0, 1}, {-1, 1}, {1, 1}, {2, 1}, {1, math.Inf(1)}, {math.NaN(), 1}, {1, math.NaN()}} {
		if _, _, err := v.Resonances(context.Background(), w[0], w[1], 1000); err == nil {
			t.Errorf("window %v: no error", w)
		}
	}
	if _, _, err := v.Resonances(context.Background(), 0.1, 1, 3); !errors.Is(err, ErrEvaluations) {
		t.Errorf("error %v", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, _, err := v.Resonances(ctx, 0.1, 1, 1000); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}

// TestPhaseIsContinuous: the phase through whole turns is the integral of the
// delay, for a structure with every kind of element, below and above the
// threshold of its exit.
func TestPhaseIsContinuous(t *testing.T) {
	lossy := flatOf(4, 0.3)
	lossy.Loss = 0.05
	for _, layers := range [][]potential.Layer{
		{flatOf(12, -1), flatOf(1, 1), flatOf(20, 0)},
		{flatOf(12, -1), lossy, flatOf(20, 0)},
		{{Thickness: 15, Shape: potential.Ramp{Height: -1, HeightEnd: 0.5}, Mass: 1}, {Shape: potential.Point{Strength: 0.5}, Mass: 1}, flatOf(9, 0.1)},
	} {
		v := New(build(t, plain, potential.Lead{Height: 0.5, Mass: 1.4}, layers...), false)
		for _, st := range v.stretches(0.6, 1.9) {
			const n = 4000
			from := max(st.from, 1e-3)
			h := (st.to - from) / n
			last := v.probe(st, from)
			for i := 1; i <= n; i++ {
				next := v.probe(st, from+h*float64(i))
				// Trapezoid: h^3/12 of the third derivative, below 1e-4 of a turn.
				if rise := next.phase - last.phase; !(math.Abs(rise-h*(last.slope+next.slope)/2) < 2e-3) {
					t.Fatalf("at E = %g the phase rises by %g, its slope tells %g", next.energy, rise, h*(last.slope+next.slope)/2)
				}
				last = next
			}
		}
	}
}

// TestIncomingFindsBoundStates: below both leads the zeros of the incoming
// amplitude are bound states: those of the sech2 well of depth s(s+1)/2 at
// -(s-n)^2/2 (G. Poeschl and E. Teller, Z. Phys. 83, 143 (1933)).
func TestIncomingFindsBoundStates(t *testing.T) {
	well := potential.Layer{Shape: potential.Hump{Height: -6, Width: 1}, Mass: 1} // s = 3
	v := New(build(t, plain, plain, well), false)
	for n := range 3 {
		want := -math.Pow(3-float64(n), 2) / 2
		z := complex(want*1.01, 0)
		for range 20 {
			in, slope, _ := v.Incoming(z)
			z -= in / slope
		}
		near(t, "bound state", real(z), want, 0, 1e-12)
		near(t, "its width", imag(z), 0, 1e-12, 0)
	}
}
