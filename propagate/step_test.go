package propagate

import (
	"testing"

	"fluxtoll/potential"
	"pgregory.net/rapid"
)

// small makes a set-up cheap enough for full matrices.
func (s setup) small(order int) setup {
	s.order, s.phase, s.height, s.edge.Count = order, 0.8*float64(order), 1, 2
	s.extent = Extent{Left: -6, PlaneLeft: -5, PlaneRight: 11, Right: 12}
	s.packet = Packet{Centre: -3, Length: 1.5, K0: 1.5}
	return s
}

// compareStep holds three steps, with and without the use of mirror symmetry,
// against the plain way.
func compareStep(t testing.TB, s setup) {
	t.Helper()
	mesh := s.mesh(t)
	for _, mirror := range []bool{true, false} {
		fast, err := newStepper(mesh, pade(t, s.pade), s.dt, s.origin, s.packet, mirror)
		if err != nil {
			t.Fatal(err)
		}
		for range 3 {
			want := plainStep(fast)
			fast.Advance()
			// Rounding of 1/h for the thinnest layers, h = 0.01, at dt up to 3.
			near(t, "distance from the plain step", distance(fast.Psi(), want), 0, 5e-11)
		}
	}
}

func TestStepAgainstDense(t *testing.T) {
	for _, s := range []setup{stepSetup(), barrierSetup(), mixedSetup()} {
		for _, m := range members() {
			s.pade = m
			compareStep(t, s.small(5))
		}
		s.pade = 2
		for _, order := range []int{2, 3, 4, 8} {
			compareStep(t, s.small(order))
		}
	}
}

// drawSetup draws a structure with everything an element can meet.
func drawSetup(t *rapid.T) setup {
	s := setup{
		entry: potential.Lead{Mass: rapid.Float64Range(0.5, 2).Draw(t, "entry mass")},
		exit: potential.Lead{
			Height: rapid.Float64Range(-1, 1).Draw(t, "exit height"),
			Mass:   rapid.Float64Range(0.5, 2).Draw(t, "exit mass"),
		},
		low: 0.5, high: 4, phase: 3, height: 10,
		edge: Edge{
			Count: rapid.IntRange(1, 3).Draw(t, "edge"), First: 1, Growth: 1.5,
			Angle: rapid.Float64Range(0, 0.7).Draw(t, "angle"),
		},
		pade:   rapid.IntRange(1, MaxPade).Draw(t, "member"),
		order:  rapid.IntRange(2, 7).Draw(t, "order"),
		dt:     rapid.Float64Range(0.01, 3).Draw(t, "dt"),
		origin: rapid.Float64Range(-2, 2).Draw(t, "origin"),
		packet: Packet{Centre: -2, Length: 1, K0: rapid.Float64Range(-2, 2).Draw(t, "k0")},
	}
	width := 0.0
	for range rapid.IntRange(0, 3).Draw(t, "layers") {
		l := drawLayer(t)
		s.layers = append(s.layers, l)
		width += l.Thickness
	}
	s.extent = Extent{Left: -5, PlaneLeft: -4, PlaneRight: width + 1, Right: width + 2}
	return s
}

func drawLayer(t *rapid.T) potential.Layer {
	height := rapid.Float64Range(-2, 3).Draw(t, "height")
	l := potential.Layer{
		Thickness: rapid.Float64Range(0.01, 1).Draw(t, "thickness"),
		Mass:      rapid.Float64Range(0.5, 2).Draw(t, "mass"),
		Loss:      rapid.SampledFrom([]float64{0, 0, 0.3}).Draw(t, "loss"),
		Shape:     potential.Flat{Height: height},
	}
	switch rapid.IntRange(0, 3).Draw(t, "shape") {
	case 1:
		l.Shape = potential.Ramp{Height: height, HeightEnd: -height}
	case 2:
		l.Shape = potential.Bell{Height: height, Width: 2}
	case 3:
		l.Thickness, l.Loss, l.Shape = 0, 0, potential.Point{Strength: height}
	}
	return l
}

func TestStepAgainstDenseDrawn(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) { compareStep(quiet{t, r}, drawSetup(r)) })
}

// quiet reports to rapid what a helper reports to a test.
type quiet struct {
	testing.TB
	r *rapid.T
}

func (q quiet) Helper()                      {}
func (q quiet) Errorf(f string, args ...any) { q.r.Errorf(f, args...) }
func (q quiet) Fatalf(f string, args ...any) { q.r.Fatalf(f, args...) }
func (q quiet) Fatal(args ...any)            { q.r.Fatal(args...) }
