//go:build slow

package propagate

import (
	"fmt"
	"testing"

	"fluxtoll/potential"
	"pgregory.net/rapid"
)

// Drawn structures over long runs: the ledger closes, and what passes is what
// the mesh's own stationary scattering says, averaged over the spectrum. The
// two share the matrices, but neither the solver nor time.
func TestDrawnRunsAgainstScattering(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		drawn, s := drawSetup(r), freeSetup()
		s.exit, s.layers, s.pade = drawn.exit, drawn.layers, drawn.pade
		s.exit.Height = min(s.exit.Height, 0.5) // thresholds leave slow remainders
		s.order, s.phase, s.height = 12, 6, 1e-6
		s.dt = rapid.Float64Range(0.1, 1).Draw(r, "step")
		width := 0.0
		for _, l := range s.layers {
			width += l.Thickness
		}
		s.extent.PlaneRight, s.extent.Right = width+15, width+15
		compareRun(quiet{t, r}, s)
	})
}

func compareRun(t testing.TB, s setup) {
	stepper := s.stepper(t)
	advance(stepper, 200)
	near(t, "closure", closure(stepper), 0, 1e-12)
	scatterer := NewScatterer(stepper.Mesh)
	average := func(read func(Scattered) float64) float64 {
		return s.packet.average(func(k float64) float64 {
			_, edged := scatterer.At(k*k/2, false)
			return read(edged)
		})
	}
	// What a resonance or a well still holds, and the edges.
	tol := 2*stepper.Inside() + 1e-8
	l := stepper.Ledger()
	near(t, "transmitted", l.Right.Probability, average(func(a Scattered) float64 { return a.Transmission }), tol)
	near(t, "reflected", l.Left.Probability, average(func(a Scattered) float64 { return a.Reflection }), tol)
}

// Edges for packets from five to two hundred wavelengths long, measured.
func TestChosenEdgesMeasured(t *testing.T) {
	for _, length := range []float64{2.5, 5, 20, 100} {
		t.Run(fmt.Sprintf("length=%g", length), func(t *testing.T) {
			s := freeSetup()
			s.packet = Packet{Centre: -8*length - 10, Length: length, K0: 2}
			s.extent = Extent{Left: -18*length - 10, PlaneLeft: -18*length - 10, PlaneRight: 5, Right: 5}
			s.high = 6
			var goals []EdgeGoal
			for i := -60; i <= 60; i++ {
				k := s.packet.K0 + float64(i)/60*7/(2*length)
				goals = append(goals, EdgeGoal{k * k / 2, 1.0 / 121})
			}
			s.edge = ChooseEdge(potential.Lead{Mass: 1}, s.order, goals, 1e-6)
			if r := sentBack(t, s, 4*length+5); !(r < 1e-9) {
				t.Errorf("measured reflection %g of %+v", r, s.edge)
			}
		})
	}
}

// The ledger closes over a hundred thousand solves.
func TestLedgerClosesOverLongRuns(t *testing.T) {
	for _, m := range members() {
		s := leakingSetup()
		s.pade, s.dt = m, 0.05
		stepper := s.stepper(t)
		advance(stepper, 1000)
		solves := float64(m * stepper.Ledger().Steps)
		near(t, "closure", closure(stepper), 0, roundingOfSums+solves*roundingPerSolve)
	}
}
