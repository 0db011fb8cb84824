package stationary

import (
	"context"
	"errors"
	"math"
	"testing"

	"fluxtoll/potential"
)

// adaptive is a curve of the fineness that the tests ask for.
func adaptive(tb testing.TB, s *Solver, from, to float64) []Amplitudes {
	tb.Helper()
	points, _, err := s.Adaptive(context.Background(), from, to, Fineness{Probability: 0.005, Time: 0.02, Points: 50000})
	if err != nil {
		tb.Fatal(err)
	}
	if points[0].Energy != from || points[len(points)-1].Energy != to {
		tb.Errorf("from %g to %g, want %g to %g", points[0].Energy, points[len(points)-1].Energy, from, to)
	}
	return points
}

// line is the transmission on the straight lines between points.
func line(points []Amplitudes, energy float64) float64 {
	for i := 1; i < len(points); i++ {
		if a, b := &points[i-1], &points[i]; energy <= b.Energy {
			return a.Transmission + (b.Transmission-a.Transmission)*(energy-a.Energy)/(b.Energy-a.Energy)
		}
	}
	return math.NaN()
}

// TestNarrowPeaks: between equal walls every resonance transmits all of its energy
// (B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984); from memory), however
// narrow: here down to 1e-10 of it. Half a width aside it is a half (Breit and
// Wigner).
func TestNarrowPeaks(t *testing.T) {
	for _, b := range []float64{1, 2, 3, 4, 5, 6} {
		s := New(twin(t, b, b), false)
		points := adaptive(t, s, 0.1, 1.5)
		poles, _, err := s.Resonances(context.Background(), 0.1, 1.5, 10000)
		if err != nil || len(poles) != 2 {
			t.Fatalf("walls of %g: %d poles, %v", b, len(poles), err)
		}
		p := poles[0]
		for _, x := range []float64{-1, -0.5, 0, 0.5, 1} {
			want := 1 / (1 + 4*x*x)
			// The background and the energy's own rounding next to a narrow peak.
			tol := 0.02 + p.Width/p.Energy + 100*eps*p.Energy/p.Width
			near(t, "T on the line", line(points, p.Energy+x*p.Width), want, tol, 0)
		}
		if len(points) > 2500 {
			t.Errorf("walls of %g: %d points", b, len(points))
		}
	}
}

// TestTenWellsOnACurve: each of the ten peaks of ten coupled wells is seen: the
// transmission of equal wells between equal walls is 1 at ten energies.
func TestTenWellsOnACurve(t *testing.T) {
	layers := []potential.Layer{flatOf(2, 4)}
	for range 10 {
		layers = append(layers, flatOf(3, 0), flatOf(2, 4))
	}
	s := New(build(t, plain, plain, layers...), false)
	points := adaptive(t, s, 0.2, 0.6)
	peaks := 0
	for i := 1; i < len(points)-1; i++ {
		if a, b, c := points[i-1].Transmission, points[i].Transmission, points[i+1].Transmission; b > a && b >= c && b > 0.98 {
			peaks++
		}
	}
	if peaks != 10 {
		t.Errorf("%d peaks, want 10", peaks)
	}
}

// TestLinesAreClose: at energies in between, chosen without regard to the
// points, the lines are as close as promised, thresholds included.
func TestLinesAreClose(t *testing.T) {
	s := New(build(t, plain, potential.Lead{Height: 0.5, Mass: 1.3}, flatOf(1, 1.5), flatOf(4, 0), flatOf(1.2, 1.5)), false)
	points := adaptive(t, s, 0.1, 2)
	const n = 5000
	worst := 0.0
	var a Amplitudes
	for i := range n {
		e := 0.1 + 1.9*(float64(i)+0.37)/n
		if err := s.At(e, &a); err != nil {
			t.Fatal(err)
		}
		worst = math.Max(worst, math.Abs(line(points, e)-a.Transmission))
	}
	if !(worst <= 0.005) {
		t.Errorf("off by %g", worst)
	}
}

// TestCurveOfAnyWorkers: the same numbers, whatever the number of workers.
func TestCurveOfAnyWorkers(t *testing.T) {
	hump := potential.Layer{Shape: potential.Hump{Height: 1, Width: 1}, Mass: 1}
	s := build(t, plain, plain, flatOf(1, 1), hump, flatOf(2, 0.3))
	energies := make([]float64, 300)
	for i := range energies {
		energies[i] = 0.1 + 3*float64(i)/300
	}
	want, err := New(s, false).curve(context.Background(), energies, 1)
	if err != nil {
		t.Fatal(err)
	}
	for _, workers := range []int{2, 3, 16} {
		got, err := New(s, false).curve(context.Background(), energies, workers)
		if err != nil {
			t.Fatal(err)
		}
		for i := range want {
			if got[i].T != want[i].T || got[i].R != want[i].R || got[i].Dwell != want[i].Dwell || got[i].LayerDwell[1] != want[i].LayerDwell[1] {
				t.Fatalf("%d workers: %+v, one worker: %+v", workers, got[i], want[i])
			}
		}
	}
}

// TestErrorsCoverRounding: what the curve says about its rounding covers the
// difference from the same structure with every layer cut in two.
func TestErrorsCoverRounding(t *testing.T) {
	whole := New(twin(t, 3, 4), false)
	halves := New(build(t, plain, plain, flatOf(1.5, 2), flatOf(1.5, 2), flatOf(1.1, 0), flatOf(1.9, 0), flatOf(2.5, 2), flatOf(1.5, 2)), false)
	var a, b Amplitudes
	for i := range 500 {
		e := 0.30425 + 2e-5*float64(i)/500
		if whole.At(e, &a) != nil || halves.At(e, &b) != nil {
			t.Fatal("no amplitudes")
		}
		near(t, "T", a.Transmission, b.Transmission, 2*a.ProbabilityError(), 0)
		near(t, "R", a.Reflection, b.Reflection, 2*a.ProbabilityError(), 0)
		near(t, "delay", a.GroupDelayTransmitted, b.GroupDelayTransmitted, 2*a.TimeError(), 0)
		near(t, "dwell", a.Dwell, b.Dwell, 2*a.TimeError(), 0)
		if !(a.ProbabilityError() < 1e-7) || !(a.TimeError() < 1e-6*a.Dwell) {
			t.Fatalf("errors %g and %g of %g", a.ProbabilityError(), a.TimeError(), a.Dwell)
		}
	}
}

// TestCurveRefuses: energies at or below the lead, too few points, and an end.
func TestCurveRefuses(t *testing.T) {
	s := New(twin(t, 2, 2), false)
	if _, err := s.Curve(context.Background(), []float64{0.5, 0}); err == nil {
		t.Error("energy at the lead: no error")
	}
	if _, _, err := s.Adaptive(context.Background(), 0, 1, Fineness{0.005, 0.02, 1000}); err == nil {
		t.Error("window from the lead: no error")
	}
	points, _, err := s.Adaptive(context.Background(), 0.1, 1.5, Fineness{1e-9, 1e-9, 1000})
	if !errors.Is(err, ErrEvaluations) || len(points) == 0 {
		t.Errorf("%d points, error %v", len(points), err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := s.Curve(ctx, []float64{0.5}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}

// BenchmarkCurve is 1,000 layers at 10,000 energies on all processors.
func BenchmarkCurve(b *testing.B) {
	const n, points = 1000, 10000
	layers := make([]potential.Layer, n)
	for i := range layers {
		layers[i] = flatOf(1+0.1*float64(i%7), float64(i%2))
	}
	s := New(build(b, plain, plain, layers...), false)
	energies := make([]float64, points)
	for i := range energies {
		energies[i] = 0.1 + 2*float64(i)/points
	}
	for b.Loop() {
		if _, err := s.Curve(context.Background(), energies); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/n/points, "ns/layer/energy")
}
