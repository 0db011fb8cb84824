package stationary

import (
	"context"
	"testing"

	"fluxtoll/potential"
)

func benchmarkAt(b *testing.B, s *potential.Structure, per int) {
	v := New(s, false)
	var a Amplitudes
	if err := v.At(0.7, &a); err != nil {
		b.Fatal(err)
	}
	b.ReportAllocs()
	for b.Loop() {
		if err := v.At(0.7, &a); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(per), "ns/layer")
}

func BenchmarkFlatLayers(b *testing.B) {
	const n = 1000
	layers := make([]potential.Layer, n)
	for i := range layers {
		layers[i] = flatOf(1+0.1*float64(i%7), float64(i%2))
	}
	benchmarkAt(b, build(b, plain, plain, layers...), n)
}

func BenchmarkLossyLayers(b *testing.B) {
	const n = 1000
	layers := make([]potential.Layer, n)
	for i := range layers {
		layers[i] = flatOf(1+0.1*float64(i%7), float64(i%2))
		layers[i].Loss = 1e-4
	}
	benchmarkAt(b, build(b, plain, plain, layers...), n)
}

// BenchmarkRamp crosses 71 Taylor slices.
func BenchmarkRamp(b *testing.B) {
	ramp := potential.Layer{Thickness: 100, Shape: potential.Ramp{Height: 0, HeightEnd: 1}, Mass: 1}
	benchmarkAt(b, build(b, plain, plain, ramp), 1)
}

func BenchmarkHump(b *testing.B) {
	hump := potential.Layer{Shape: potential.Hump{Height: 1, Width: 1}, Mass: 1}
	benchmarkAt(b, build(b, plain, plain, hump), 1)
}

func benchmarkAverage(b *testing.B, s *potential.Structure, p Spectrum) {
	v := New(s, false)
	evaluations := 0
	for b.Loop() {
		a, err := v.Average(context.Background(), p, Options{})
		if err != nil {
			b.Fatal(err)
		}
		evaluations = a.Evaluations
	}
	b.ReportMetric(float64(evaluations), "energies")
}

func BenchmarkAverageBarrier(b *testing.B) {
	benchmarkAverage(b, build(b, plain, plain, flatOf(2, 1)), Spectrum{1, 0.05})
}

func BenchmarkAverageNarrowResonance(b *testing.B) {
	benchmarkAverage(b, twin(b, 5, 5), Spectrum{0.77, 0.02})
}

func BenchmarkAverageHump(b *testing.B) {
	benchmarkAverage(b, build(b, plain, plain, potential.Layer{Shape: potential.Hump{Height: 1, Width: 1}, Mass: 1}), Spectrum{1.2, 0.0625})
}
