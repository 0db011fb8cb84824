package propagate

import (
	"math"
	"testing"
)

// Eight steps of an eighth lead to the same place as one step, to the accuracy
// of the longer one, and the one that is followed is left alone.
func TestFollowLooksBetweenTwoSteps(t *testing.T) {
	m := sampleMesh(t)
	pade, err := NewPade(4)
	if err != nil {
		t.Fatal(err)
	}
	packet := Packet{Centre: -28, Length: 3, K0: 1}
	coarse, err := NewStepper(m, pade, 2, 0.5, packet)
	if err != nil {
		t.Fatal(err)
	}
	fine, err := NewStepper(m, pade, 0.25, 0.5, packet)
	if err != nil {
		t.Fatal(err)
	}
	for range 10 {
		coarse.Advance()
		fine.Follow(coarse)
		before := append([]complex128(nil), coarse.Psi()...)
		for range 8 {
			fine.Advance()
		}
		for i, v := range coarse.Psi() {
			if v != before[i] {
				t.Fatalf("node %d of the followed stepper changed", i)
			}
		}
	}
	coarse.Advance()
	if f, c := fine.Ledger().Time, coarse.Ledger().Time; !(math.Abs(f-c) < 1e-12) {
		t.Errorf("times %g and %g, want the same", f, c)
	}
	for i, v := range coarse.Psi() {
		// The phase error of Pade(4) over one step at |E-origin| dt < 2, which
		// holds all but 1e-5 of the packet (five widths of its spectrum).
		if d := square(v - fine.Psi()[i]); !(d < 1e-10) {
			t.Fatalf("node %d at %g differs by %g", i, m.X[i], math.Sqrt(d))
		}
	}
}
