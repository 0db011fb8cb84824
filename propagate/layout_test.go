package propagate

import (
	"errors"
	"math"
	"runtime"
	"testing"
	"time"

	"fluxtoll/potential"
)

func (s setup) layout(t testing.TB, limit int) (*Layout, error) {
	t.Helper()
	r := Resolution{Order: s.order, Phase: s.phase, Low: s.low, High: s.high, Height: s.height, MaxNodes: limit}
	return NewLayout(s.structure(t), r, s.extent, s.edge, s.edge)
}

// Every layout: elements join, faces stand on every face of the structure and
// on the planes, the mesh has the nodes that were announced.
func checkLayout(t testing.TB, s setup) *Mesh {
	t.Helper()
	l, err := s.layout(t, 200000)
	if err != nil {
		t.Fatal(err)
	}
	m := NewMesh(l)
	if m.Nodes() != l.Nodes() {
		t.Errorf("%d nodes announced, %d made", l.Nodes(), m.Nodes())
	}
	at := s.extent.Left
	for _, e := range l.stretches {
		near(t, "face", e.from, at, 0)
		near(t, "length", e.length/(e.to-e.from), 1, 1e-9)
		at = e.to
	}
	near(t, "end", at, s.extent.Right, 0)
	for i := 1; i < m.Nodes(); i++ {
		if !(m.X[i] > m.X[i-1]) {
			t.Fatalf("node %d at %g does not lie behind %g", i, m.X[i], m.X[i-1])
		}
	}
	faces := map[float64]bool{}
	for _, f := range m.faces {
		faces[m.X[f]] = true
	}
	for _, g := range l.structure.Segments {
		if !faces[g.From] || !faces[g.To] {
			t.Errorf("no face at %g or %g", g.From, g.To)
		}
	}
	left, right := m.PlaneNodes()
	near(t, "left plane", m.X[left], s.extent.PlaneLeft, 0)
	near(t, "right plane", m.X[right], s.extent.PlaneRight, 0)
	from, to := m.RealNodes()
	near(t, "left end", m.X[from], s.extent.Left, 0)
	near(t, "right end", m.X[to-1], s.extent.Right, 0)
	return m
}

func TestLayouts(t *testing.T) {
	astride := stepSetup()
	astride.extent = Extent{Left: -90, PlaneLeft: -40, PlaneRight: 15, Right: 31}
	for name, s := range map[string]setup{
		"step": stepSetup(), "barrier": barrierSetup(), "mixed": mixedSetup(),
		"mirrored": mixedSetup().mirrored(), "planes inside": astride, "tunnel": tunnelSetup(),
	} {
		t.Run(name, func(t *testing.T) {
			m := checkLayout(t, s)
			if left, right := m.EdgeElements(); left != s.edge.Count || right != s.edge.Count {
				t.Errorf("edges of %d and %d elements", left, right)
			}
			shortest, longest := m.ElementLengths()
			if !(0 < shortest && shortest <= longest && longest*math.Sqrt(2*(s.high-0)) <= s.phase*1.3) {
				t.Errorf("elements from %g to %g", shortest, longest)
			}
		})
	}
}

// Equal elements share their matrices.
func TestEqualElementsShareCells(t *testing.T) {
	m := stepSetup().mesh(t)
	// Twelve cells in each edge, one in each lead.
	if got := len(m.cells); got != 26 {
		t.Errorf("%d cells for %d elements", got, m.Elements())
	}
}

// withLayer is a free set-up with one flat layer.
func withLayer(thickness, height float64) setup {
	s := freeSetup()
	s.layers = flatLayer(thickness, height, 1)
	s.extent.PlaneRight += thickness
	s.extent.Right += thickness
	return s
}

// A barrier of 500 decay lengths is resolved at its faces and passed over in
// long elements inside; what it reflects, and when, is that of a wall of
// endless thickness: phase time 2/(k kappa), LL sec. 25 and Hartman (1962).
func TestThickBarrier(t *testing.T) {
	const height = 8.0
	kappa := math.Sqrt(2 * (height - 2))
	s := withLayer(500/kappa, height)
	m := checkLayout(t, s)
	if m.Nodes() > 4000 {
		t.Errorf("%d nodes", m.Nodes())
	}
	got, _ := NewScatterer(m).At(2, false)
	near(t, "reflection", got.Reflection, 1, 1e-12)
	near(t, "reflected time", got.PhaseTimeReflected, 2*90/2.0+2/(2*kappa), 1e-9)
	if !(got.Transmission >= 0 && got.Transmission < 1e-100) {
		t.Errorf("transmission %g", got.Transmission)
	}
	s.dt = 0.5
	stepper := s.stepper(t)
	advance(stepper, 60)
	near(t, "closure", closure(stepper), 0, 1e-12)
}

// A layer a millionth of the wavelength thick acts as the point potential of
// the same strength, and takes no more than an element of low order.
func TestThinLayer(t *testing.T) {
	const thickness = 3e-6
	thin := withLayer(thickness, 0.4/thickness)
	m := checkLayout(t, thin)
	free := freeSetup()
	if more := m.Nodes() - free.mesh(t).Nodes(); more > 6 {
		t.Errorf("the thin layer takes %d nodes", more)
	}
	got, _ := NewScatterer(m).At(2, false)
	near(t, "transmission", got.Transmission, 1/(1+0.4*0.4/(2*2)), 3e-6) // of order k*thickness
	exact, _ := barrier(2, thickness, complex(0.4/thickness, 0), 1)
	near(t, "transmission", got.Transmission, exact, 2e-10) // rounding of 1/thickness in the stiffness
}

// Heights over twelve decades either work or are refused.
func TestHeightsOverTwelveDecades(t *testing.T) {
	for _, height := range []float64{1e-6, 1e-3, 1e3, 1e6} {
		s := withLayer(0.5, height)
		got, _ := NewScatterer(checkLayout(t, s)).At(2, false)
		want, _ := barrier(2, 0.5, complex(height, 0), 1)
		near(t, "transmission", got.Transmission, want, 1e-11)
		near(t, "reflection", got.Reflection, 1-want, 1e-11)
	}
	for _, height := range []float64{-1e6, -1e3} {
		s := withLayer(0.5, height)
		got, _ := NewScatterer(checkLayout(t, s)).At(2, false)
		want, _ := barrier(2, 0.5, complex(height, 0), 1)
		near(t, "transmission in a well", got.Transmission, want, 1e-8) // hundreds of wavelengths inside
	}
	s := freeSetup()
	s.layers = []potential.Layer{{Thickness: 10, Shape: potential.Ramp{HeightEnd: 1e12}, Mass: 1}}
	s.extent.PlaneRight, s.extent.Right = 25, 25
	var size *SizeError
	if _, err := s.layout(t, 200000); !errors.As(err, &size) {
		t.Errorf("a ramp to 1e12: error %v", err)
	}
}

// A size far beyond the limit is told at once and about right, whatever
// makes it.
func TestSizeErrorWithoutBuilding(t *testing.T) {
	long := freeSetup()
	long.extent.Left, long.extent.PlaneLeft = -1e9, -1e9
	deep := withLayer(1, -1e18)
	steep := freeSetup()
	steep.layers = []potential.Layer{{Thickness: 10, Shape: potential.Ramp{HeightEnd: -1e17}, Mass: 1}}
	steep.extent.PlaneRight, steep.extent.Right = 25, 25
	for name, c := range map[string]struct {
		setup setup
		nodes float64 // k L order/phase
	}{
		"long lead":  {long, 1e9 * math.Sqrt(10) * 16 / 9},
		"deep well":  {deep, math.Sqrt(2e18) * 16 / 9},
		"steep ramp": {steep, 2.0 / 3 * 10 * math.Sqrt(2e17) * 16 / 9},
	} {
		t.Run(name, func(t *testing.T) {
			began := time.Now()
			_, err := c.setup.layout(t, 200000)
			var size *SizeError
			if !errors.As(err, &size) {
				t.Fatalf("error %v", err)
			}
			if size.Limit != 200000 || !(size.Nodes > c.nodes/2 && size.Nodes < 2*c.nodes) {
				t.Errorf("%v; about %.2g are needed", size, c.nodes)
			}
			if spent := time.Since(began); spent > time.Second {
				t.Errorf("took %v", spent)
			}
		})
	}
}

func TestMaxNodesIsTheLimit(t *testing.T) {
	for _, s := range []setup{stepSetup(), mixedSetup(), withLayer(300, 8)} {
		nodes := s.mesh(t).Nodes()
		if _, err := s.layout(t, nodes); err != nil {
			t.Errorf("limit of exactly the nodes: %v", err)
		}
		var size *SizeError
		if _, err := s.layout(t, nodes-1); !errors.As(err, &size) {
			t.Errorf("limit of one node less: %v", err)
		}
	}
}

func TestLayoutRefusesPlanesInside(t *testing.T) {
	for _, x := range []Extent{
		{Left: -90, PlaneLeft: 0.5, PlaneRight: 15, Right: 15},
		{Left: -90, PlaneLeft: -95, PlaneRight: 15, Right: 15},
		{Left: -90, PlaneLeft: -90, PlaneRight: 1, Right: 15},
		{Left: -90, PlaneLeft: -90, PlaneRight: 15, Right: 14},
		{Left: math.NaN(), PlaneLeft: -90, PlaneRight: 15, Right: 15},
	} {
		s := barrierSetup()
		s.extent = x
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("%+v was accepted", x)
				}
			}()
			_, _ = s.layout(t, 1000)
		}()
	}
}

// The estimate of memory is of the size that a run takes.
func TestBytes(t *testing.T) {
	for name, s := range map[string]setup{"step": stepSetup(), "mixed": mixedSetup()} {
		l, err := s.layout(t, 200000)
		if err != nil {
			t.Fatal(err)
		}
		var before, after runtime.MemStats
		runtime.GC()
		runtime.ReadMemStats(&before)
		stepper, err := NewStepper(NewMesh(l), pade(t, MaxPade), 0.5, 2, s.packet)
		if err != nil {
			t.Fatal(err)
		}
		runtime.GC()
		runtime.ReadMemStats(&after)
		taken := float64(after.HeapAlloc - before.HeapAlloc)
		runtime.KeepAlive(stepper)
		if bytes := l.Bytes(); !(bytes > taken/4 && bytes < 2*taken) {
			t.Errorf("%s: estimated %.0f bytes, took %.0f", name, bytes, taken)
		}
	}
}
