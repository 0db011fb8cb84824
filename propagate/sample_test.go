package propagate

import (
	"math"
	"math/cmplx"
	"testing"

	"fluxtoll/potential"
)

// sampleMesh is a barrier between two leads with elements of several orders.
func sampleMesh(t testing.TB) *Mesh {
	t.Helper()
	s, err := potential.Build(potential.Lead{Mass: 1}, potential.Lead{Height: 0.1, Mass: 1.5},
		[]potential.Layer{{Thickness: 0.7, Mass: 1.2, Shape: potential.Flat{Height: 0.8}}}, potential.Options{})
	if err != nil {
		t.Fatal(err)
	}
	layout, err := NewLayout(s, Resolution{Order: 12, Phase: 6, Low: 0.3, High: 0.8, Height: 1e-10, MaxNodes: 10000},
		Extent{Left: -50, PlaneLeft: -40, PlaneRight: 30, Right: 30},
		Edge{Count: 4, First: 2, Growth: 1.5, Angle: EdgeAngle}, Edge{Count: 4, First: 2, Growth: 1.5, Angle: EdgeAngle})
	if err != nil {
		t.Fatal(err)
	}
	return NewMesh(layout)
}

// The sampler against the function itself: a plane wave of amplitude 2 has
// density 4 and current 4 k/m.
func TestSamplerReproducesAPlaneWave(t *testing.T) {
	const k = 0.9
	m := sampleMesh(t)
	psi := make([]complex128, m.Nodes())
	for i, x := range m.X {
		psi[i] = 2 * cmplx.Exp(complex(0, k*x))
	}
	s := NewSampler(m)
	left, right := s.Ends()
	if left != -50 || right != 30 {
		t.Fatalf("ends %g, %g, want -50, 30", left, right)
	}
	// Order-12 elements of phase 6 resolve exp(ikx) to about 1e-6; the layer's
	// order is chosen for the same error.
	const tol = 3e-6
	check := func(x float64) {
		density, current := s.Flow(psi, x)
		mass := m.layout.structure.MassAt(x)
		if !(math.Abs(density-4) < 4*tol) || !(math.Abs(current-4*k/mass) < 12*tol) {
			t.Errorf("x = %g: density %g, current %g; want 4, %g", x, density, current, 4*k/mass)
		}
	}
	for i := range 1000 {
		check(left + (right-left)*float64(i)/999)
	}
	for i := m.faces[m.real0]; i < m.faces[m.real1]; i++ {
		check(m.X[i]) // on the nodes
	}
	check(0.35) // back again
	if density, current := s.Flow(psi, right+1); density != 0 || current != 0 {
		t.Errorf("beyond the end: %g, %g, want 0, 0", density, current)
	}
}

// A standing wave carries no current anywhere.
func TestSamplerFindsNoCurrentInAStandingWave(t *testing.T) {
	m := sampleMesh(t)
	psi := make([]complex128, m.Nodes())
	for i, x := range m.X {
		psi[i] = complex(math.Cos(0.9*x), 0) * cmplx.Exp(1i)
	}
	s := NewSampler(m)
	for x := -40.0; x <= 30; x += 0.37 {
		if _, current := s.Flow(psi, x); !(math.Abs(current) < 1e-12) { // rounding
			t.Errorf("x = %g: current %g, want 0", x, current)
		}
	}
}

// The packet's mean position is where it was put.
func TestSamplerFindsTheCentre(t *testing.T) {
	m := sampleMesh(t)
	pade, err := NewPade(2)
	if err != nil {
		t.Fatal(err)
	}
	s, err := NewStepper(m, pade, 0.5, 0.5, Packet{Centre: -20, Length: 2, K0: 1})
	if err != nil {
		t.Fatal(err)
	}
	if c := NewSampler(m).Centre(s.Psi()); !(math.Abs(c+20) < 1e-6) { // tails at 10 lengths, mesh of phase 6
		t.Errorf("centre %g, want -20", c)
	}
}

func TestSamplingDoesNotAllocate(t *testing.T) {
	m := sampleMesh(t)
	psi := make([]complex128, m.Nodes())
	s := NewSampler(m)
	if n := testing.AllocsPerRun(10, func() {
		for x := -50.0; x < 30; x += 0.1 {
			s.Flow(psi, x)
		}
		s.Centre(psi)
	}); n != 0 {
		t.Errorf("%g allocations, want none", n)
	}
}

func BenchmarkSampler(b *testing.B) {
	m := sampleMesh(b)
	psi := make([]complex128, m.Nodes())
	s := NewSampler(m)
	for b.Loop() {
		for i := range 1000 {
			s.Flow(psi, -40+0.07*float64(i))
		}
	}
}
