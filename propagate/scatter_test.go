package propagate

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"fluxtoll/potential"
)

func TestScatteringAgainstClosedForms(t *testing.T) {
	for _, p := range problems() {
		t.Run(p.id, func(t *testing.T) {
			got, edged := NewScatterer(p.setup().mesh(t)).At(p.energy, false)
			checkProblem(t, p, got, 1e-11)
			// The edges of the set-up reflect less than 1e-7 of the amplitude.
			near(t, "with edges: transmission", edged.Transmission, got.Transmission, 1e-7)
			near(t, "with edges: reflection", edged.Reflection, got.Reflection, 1e-7)
		})
	}
}

// checkProblem holds an answer against a problem; tol is relative to 1 for
// reflection, to itself for transmission, and to the flight time for times.
func checkProblem(t *testing.T, p problem, got Scattered, tol float64) {
	t.Helper()
	if !math.IsNaN(p.transmission) {
		near(t, "transmission", got.Transmission, p.transmission, tol*p.transmission)
		near(t, "reflection", got.Reflection, 1-p.transmission, tol)
	}
	transmitted, reflected := p.times()
	if !math.IsNaN(p.transmitted) && !p.totalReversed {
		near(t, "transmitted time", got.PhaseTimeTransmitted, transmitted, tol*transmitted)
	}
	if !math.IsNaN(p.reflected) && !p.perfect {
		near(t, "reflected time", got.PhaseTimeReflected, reflected, tol*reflected)
	}
	if !math.IsNaN(p.dwell) {
		near(t, "dwell", got.Dwell, p.dwell, tol*(1+p.dwell))
	}
}

// What comes from the right is what comes from the left of the mirrored
// structure, and its transmission is the same (reciprocity).
func TestScatteringFromTheRight(t *testing.T) {
	s := mixedSetup()
	here, there := NewScatterer(s.mesh(t)), NewScatterer(s.mirrored().mesh(t))
	for _, e := range []float64{0.7, 1.9, 4} {
		exact, edged := here.At(e, true)
		mirrorExact, mirrorEdged := there.At(e, false)
		for _, pair := range [][2]Scattered{{exact, mirrorExact}, {edged, mirrorEdged}} {
			a, b := pair[0], pair[1]
			near(t, "transmission", a.Transmission, b.Transmission, 1e-12)
			near(t, "reflection", a.Reflection, b.Reflection, 1e-12)
			near(t, "transmitted time", a.PhaseTimeTransmitted, b.PhaseTimeTransmitted, 1e-10)
			near(t, "reflected time", a.PhaseTimeReflected, b.PhaseTimeReflected, 1e-10)
			near(t, "dwell", a.Dwell, b.Dwell, 2e-10) // near a pole g^2 loses twice the digits of g
		}
		left, _ := here.At(e, false)
		near(t, "reciprocity", exact.Transmission, left.Transmission, 1e-12)
	}
}

func TestScatteringWithLoss(t *testing.T) {
	for _, loss := range []float64{1e-6, 0.03, 0.7} {
		s := barrierSetup()
		s.layers[0].Loss = loss
		scatterer := NewScatterer(s.mesh(t))
		for _, e := range []float64{0.6, 1.9, 2.2, 4.5} {
			got, _ := scatterer.At(e, false)
			transmission, reflection := barrier(e, 1, complex(2.2, -loss), 1.3)
			near(t, "transmission", got.Transmission, transmission, 1e-12)
			near(t, "reflection", got.Reflection, reflection, 1e-12)
			// What is lost is 2 loss times the dwell time.
			near(t, "loss", 1-got.Transmission-got.Reflection, 2*loss*got.Dwell, 1e-12)
		}
	}
}

// Phase times are held against differences of the phase of the closed form
// by way of the Hartman problems above; here only that the derivative includes
// the edges' own, where the mesh's edges stand in for the leads.
func TestPhaseTimesWithBadEdges(t *testing.T) {
	s := barrierSetup()
	s.edge.Count = 2
	scatterer := NewScatterer(s.mesh(t))
	const h = 1e-4
	phase := func(e float64) (float64, float64) {
		scatterer.At(e, false)
		n := len(scatterer.psi)
		r, out := scatterer.psi[0]-1, scatterer.psi[n-1]
		return math.Atan2(imag(out), real(out)), math.Atan2(imag(r), real(r))
	}
	_, edged := scatterer.At(2, false)
	t1, r1 := phase(2 + h)
	t0, r0 := phase(2 - h)
	turn := func(x float64) float64 { return math.Remainder(x, 2*math.Pi) }
	// The difference is good to h^2 times the third derivative, about 1e-5.
	near(t, "transmitted time", edged.PhaseTimeTransmitted, turn(t1-t0)/(2*h), 1e-3)
	near(t, "reflected time", edged.PhaseTimeReflected, turn(r1-r0)/(2*h), 1e-3)
}

// Space: the error falls exponentially with the order on a structure with
// jumps in height and mass, elements left as they are.
func TestSpaceConvergesExponentially(t *testing.T) {
	const floor = 1e-12 // rounding of the condensed matrices, worst near a pole
	var table strings.Builder
	var before float64
	fell := 0
	for p := 2; p <= 16; p++ {
		e := spaceError(t, p)
		fmt.Fprintf(&table, "order %2d: error %.2e, falls by %.3g\n", p, e, before/e)
		if p > 3 && e > floor {
			fell++
			if ratio := before / e; !(ratio > 2 && ratio < 1e3) {
				t.Errorf("order %d: error %g, %g times less than before", p, e, ratio)
			}
		}
		before = e
	}
	if !(before < floor) || fell < 7 || spaceError(t, 3) < 1e-3 {
		t.Errorf("error %g at the highest order, %d orders above the floor", before, fell)
	}
	if t.Failed() {
		t.Log("\n" + table.String())
	}
}

// spaceError is the largest error of T over some energies on elements of
// order p whose phase is 5 and a little less in the barrier.
func spaceError(t *testing.T, p int) float64 {
	s := barrierSetup()
	s.layers = []potential.Layer{{Thickness: 2.2, Shape: potential.Flat{Height: 1}, Mass: 1.3}}
	s.order, s.phase = p, 6
	scatterer := NewScatterer(s.mesh(t))
	worst := 0.0
	for _, e := range []float64{1.5, 2, 2.7, 3.3, 4.1} {
		got, _ := scatterer.At(e, false)
		want, _ := barrier(e, 2.2, 1, 1.3)
		worst = math.Max(worst, math.Abs(got.Transmission-want))
	}
	return worst
}
