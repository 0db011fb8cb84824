package stationary

import (
	"encoding/json"
	"os"
	"testing"
)

// referenceCase is one case of testdata/reference.json: a structure without
// closed form, solved by testdata/reference.py to 22 digits.
type referenceCase struct {
	ID                       string
	FromRight                bool `json:"from_right"`
	Energy                   float64
	Structure                structureSpec
	Transmission, Reflection json.RawMessage
	GroupDelayTransmitted    json.RawMessage `json:"group_delay_transmitted"`
	GroupDelayReflected      json.RawMessage `json:"group_delay_reflected"`
	Dwell                    json.RawMessage
	LayerDwell               []json.RawMessage `json:"layer_dwell"`
	LayerLoss                []json.RawMessage `json:"layer_loss"`
}

// TestReference compares with collocation in 40-digit arithmetic: unequal
// leads and masses, losses, bias, gauss, table, deltas, from both sides.
func TestReference(t *testing.T) {
	data, err := os.ReadFile("testdata/reference.json")
	if err != nil {
		t.Fatal(err)
	}
	var cases []referenceCase
	if err := json.Unmarshal(data, &cases); err != nil {
		t.Fatal(err)
	}
	cases = cases[1:] // the first entry names the generator and its versions
	for _, c := range cases {
		t.Run(c.ID, func(t *testing.T) { c.check(t) })
	}
	if len(cases) != 32 {
		t.Errorf("ran %d cases, want 32", len(cases))
	}
}

func (c referenceCase) check(t *testing.T) {
	s := c.Structure.build(t)
	a := at(t, s, c.FromRight, c.Energy)
	// A few roundings in each layer or slice (at most 100), enlarged by the
	// sharpness of a resonance where there is one.
	tolerance := 1e-13 + 20*0x1p-52*a.sharpness
	near(t, "T", a.Transmission, decimal(t, c.Transmission), 0, tolerance)
	near(t, "R", a.Reflection, decimal(t, c.Reflection), 1e-14, tolerance)
	near(t, "delay of t", a.GroupDelayTransmitted, decimal(t, c.GroupDelayTransmitted), tolerance*a.sharpness, tolerance)
	near(t, "delay of r", a.GroupDelayReflected, decimal(t, c.GroupDelayReflected), 10*tolerance*(1+a.sharpness), tolerance)
	near(t, "dwell", a.Dwell, decimal(t, c.Dwell), 0, tolerance)
	if len(c.LayerDwell) != len(a.LayerDwell) || len(c.LayerLoss) != len(a.LayerLoss) {
		t.Fatalf("%d layers, want %d", len(a.LayerDwell), len(c.LayerDwell))
	}
	for i := range a.LayerDwell {
		near(t, "dwell in a layer", a.LayerDwell[i], decimal(t, c.LayerDwell[i]), 0, tolerance)
		near(t, "loss in a layer", a.LayerLoss[i], decimal(t, c.LayerLoss[i]), 0, tolerance)
	}
}
