package propagate

import (
	"context"
	"math"
	"testing"

	"fluxtoll/potential"
)

// setup is a structure, a packet and a grid around them: what the tests vary.
// Natural units, hbar = 1.
type setup struct {
	entry, exit potential.Lead
	layers      []potential.Layer
	packet      Packet
	low, high   float64 // band of energies resolved
	order       int
	phase       float64
	height      float64 // tolerance on V in an element
	edge        Edge
	extent      Extent
	pade        int
	dt          float64
	origin      float64
}

// stepSetup is a packet on a sharp step of height 1, above its top: the set
// "avg.step.k2".
func stepSetup() setup {
	return setup{
		entry: potential.Lead{Mass: 1}, exit: potential.Lead{Height: 1, Mass: 1},
		packet: Packet{Centre: -40, Length: 5, K0: 2},
		low:    0.5, high: 5, order: 16, phase: 9, height: 1e-11,
		edge:   Edge{Count: 12, First: 1.5, Growth: 1.5, Angle: EdgeAngle},
		extent: Extent{Left: -90, PlaneLeft: -90, PlaneRight: 15, Right: 15},
		pade:   5, dt: 0.5, origin: 2,
	}
}

// barrierSetup is a packet on a rectangular barrier of other mass.
func barrierSetup() setup {
	s := stepSetup()
	s.exit.Height = 0
	s.layers = []potential.Layer{{Thickness: 1, Shape: potential.Flat{Height: 2.2}, Mass: 1.3}}
	return s
}

// mixedSetup has every kind of element: unequal leads, a lossy layer, deltas
// at faces, a thin layer, a ramp and a smooth hump.
func mixedSetup() setup {
	s := stepSetup()
	s.exit = potential.Lead{Height: 0.3, Mass: 0.8}
	s.layers = []potential.Layer{
		{Shape: potential.Point{Strength: 0.4}, Mass: 1},
		{Thickness: 1.2, Shape: potential.Flat{Height: 1.1}, Mass: 0.9, Loss: 0.05},
		{Thickness: 1e-3, Shape: potential.Flat{Height: 30}, Mass: 1.5},
		{Thickness: 2, Shape: potential.Ramp{Height: 1.4, HeightEnd: 0.2}, Mass: 1.1},
		{Shape: potential.Point{Strength: -0.7}, Mass: 1},
		{Thickness: 6, Shape: potential.Hump{Height: 0.9, Width: 0.6}, Mass: 0.8, Loss: 0.01},
	}
	return s
}

// mirrored is the set-up seen from the other side.
func (s setup) mirrored() setup {
	width := 0.0
	m := s
	m.layers = nil
	for i := range s.layers {
		l := s.layers[len(s.layers)-1-i]
		width += l.Thickness
		if r, ok := l.Shape.(potential.Ramp); ok {
			l.Shape = potential.Ramp{Height: r.HeightEnd, HeightEnd: r.Height}
		}
		m.layers = append(m.layers, l)
	}
	m.entry, m.exit = s.exit, s.entry
	m.packet.Centre, m.packet.K0 = width-s.packet.Centre, -s.packet.K0
	x := s.extent
	m.extent = Extent{width - x.Right, width - x.PlaneRight, width - x.PlaneLeft, width - x.Left}
	return m
}

func (s setup) structure(t testing.TB) *potential.Structure {
	t.Helper()
	structure, err := potential.Build(s.entry, s.exit, s.layers, potential.Options{Cut: 1e-16})
	if err != nil {
		t.Fatal(err)
	}
	return structure
}

func (s setup) mesh(t testing.TB) *Mesh {
	t.Helper()
	r := Resolution{Order: s.order, Phase: s.phase, Low: s.low, High: s.high, Height: s.height, MaxNodes: 200000}
	layout, err := NewLayout(s.structure(t), r, s.extent, s.edge, s.edge)
	if err != nil {
		t.Fatal(err)
	}
	return NewMesh(layout)
}

func (s setup) stepper(t testing.TB) *Stepper {
	t.Helper()
	pade, err := NewPade(s.pade)
	if err != nil {
		t.Fatal(err)
	}
	stepper, err := NewStepper(s.mesh(t), pade, s.dt, s.origin, s.packet)
	if err != nil {
		t.Fatal(err)
	}
	return stepper
}

// finished runs until less than 2e-12 is left inside; a run that does not get
// there within limit is a failure.
func (s setup) finished(t testing.TB, limit float64) *Run {
	t.Helper()
	run := NewRun(s.stepper(t), Ending{
		Steps: 1 << 30, Time: limit,
		Settled: func(_ *Ledger, remaining, _ float64) bool { return remaining < 2e-12 },
	})
	if status := run.Finish(context.Background()); status != Settled {
		t.Fatalf("run ended with %v, %.3g left inside at time %g", status, run.Remaining, limit)
	}
	return run
}

// advance takes the steps that fill the given time.
func advance(s *Stepper, time float64) {
	for range int(math.Round(time / s.Step)) {
		s.Advance()
	}
}

// closure is what the ledger's equation misses.
func closure(s *Stepper) float64 {
	l := s.Ledger()
	return 1 - l.Left.Probability - l.Right.Probability - l.TotalLost() - s.Inside()
}

// near fails the test where got is not within tol of want, NaN included.
func near(t testing.TB, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.17g, want %.17g within %.2g; off by %.2g", what, got, want, tol, got-want)
	}
}

// members lists the family.
func members() []int {
	var m []int
	for i := range MaxPade {
		m = append(m, i+1)
	}
	return m
}
