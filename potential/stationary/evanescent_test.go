package stationary

import (
	"math"
	"testing"

	"fluxtoll/potential"
)

// TestBeyondAStep: for a step of height V to mass m the density at the face
// over the incident flux is 4v/(v^2+(kappa/m)^2), and the time beyond a plane
// an integral over kappa. Values by mpmath 1.3.0 (quad, 30 digits) from that
// integral with entry mass 1 and K0 = 1.
func TestBeyondAStep(t *testing.T) {
	for _, c := range []struct{ height, mass, length, distance, want float64 }{
		{0.5, 1, 8, 20, 0.31905817433075},
		{0.4, 1.3, 6, 2, 0.678879944659114},
		{0.3, 0.7, 12, 35, 2.752577920839866e-7},
	} {
		s, err := potential.Build(potential.Lead{Mass: 1}, potential.Lead{Height: c.height, Mass: c.mass}, nil, potential.Options{})
		if err != nil {
			t.Fatal(err)
		}
		for _, fromRight := range []bool{false, true} {
			if fromRight {
				s = s.Mirror()
			}
			got, err := New(s, fromRight).Beyond(Spectrum{1, 1 / (2 * c.length)}, c.distance)
			if err != nil {
				t.Fatal(err)
			}
			// Rounding of some hundred terms; the error given must cover the rest.
			if off := math.Abs(got.Value - c.want); !(off <= got.Error+1e-13*c.want) || !(got.Error < 1e-6*c.want) {
				t.Errorf("step %g: %g +- %g, want %g", c.height, got.Value, got.Error, c.want)
			}
		}
	}
}

// TestBeyondIsRefused: nothing is beyond an open lead; a plane needs a place.
func TestBeyondIsRefused(t *testing.T) {
	s, err := potential.Build(potential.Lead{Mass: 1}, potential.Lead{Height: -1, Mass: 1}, nil, potential.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if got, err := New(s, false).Beyond(Spectrum{1, 0.1}, 5); err != nil || got != (Mean{}) {
		t.Errorf("%v, %v", got, err)
	}
	for _, distance := range []float64{0, -1, math.NaN()} {
		if _, err := New(s, false).Beyond(Spectrum{1, 0.1}, distance); err == nil {
			t.Errorf("distance %g was accepted", distance)
		}
	}
}
