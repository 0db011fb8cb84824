package scenarios

import (
	"math"
	"testing"

	"fluxtoll/potential"
)

// TestHardCases: legal but hard scenarios end in agreement, or say that the
// tolerance was not reached; none disagrees, and none takes long.
func TestHardCases(t *testing.T) {
	const wave = 2 * math.Pi
	same := potential.Lead{Mass: 1}
	list := []struct {
		name   string
		exit   potential.Lead
		length float64
		layers []potential.Layer
		want   Verdict
	}{
		{"energy at the threshold of the exit", potential.Lead{Height: 0.5, Mass: 1}, 15, nil, Agrees},
		{"energy at the top of a layer", same, 15, []potential.Layer{flatLayer(4, 0.5, 1)}, Agrees},
		{"layer of a millionth of the wavelength", same, 12, []potential.Layer{flatLayer(1e-6*wave, 2, 1)}, Agrees},
		{"the same, so high that it reflects", same, 12, []potential.Layer{flatLayer(1e-6*wave, 1.5e5, 1)}, Agrees},
		{"heights over 12 decades", same, 12, []potential.Layer{flatLayer(1, 1e6, 1), flatLayer(1, 1e-6, 1), flatLayer(1, 0.5, 1)}, Agrees},
		{"packet of 3 wavelengths", same, 3 * wave / 4, []potential.Layer{flatLayer(1.5, 0.25, 1)}, Agrees},
		{"packet shorter than a wavelength", same, wave / 2, []potential.Layer{flatLayer(1.5, 0.25, 1)}, NotReached},
		{"barrier of 500 decay lengths", same, 30, []potential.Layer{flatLayer(500, 1, 1)}, Agrees},
		{"energy below the exit", potential.Lead{Height: 2, Mass: 1}, 12, nil, Agrees},
	}
	for _, c := range list {
		_, r := take(t, natural(t, c.exit, 1e-6, c.length, c.layers...), Forced{})
		if r.Verdict != c.want {
			t.Errorf("%s: %s, want %s", c.name, r.Verdict, c.want)
			report(t, r)
		}
	}
}

// TestLongPacket: 10,000 wavelengths in one packet, 2.5 million nodes.
func TestLongPacket(t *testing.T) {
	if testing.Short() || !slowTests {
		t.Skip("takes half a minute: run with -tags slow")
	}
	_, r := take(t, natural(t, potential.Lead{Mass: 1}, 1e-6, 2e4*math.Pi, flatLayer(1.5, 0.25, 1)), Forced{})
	if r.Verdict != Agrees {
		report(t, r)
		t.Fail()
	}
}
