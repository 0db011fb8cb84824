package scenarios

import (
	"context"
	"encoding/json"
	"math"
	"testing"
)

// TestCurveOfStep: T = 4 v1 v2/(v1 + v2)^2 above a step (L. D. Landau and
// E. M. Lifshitz, Quantum Mechanics, sec. 25, problem 1; from memory), 0 below
// it, where the delay of what is transmitted has no meaning and that of what is
// reflected, with r = (k - i kappa)/(k + i kappa), is 2/(k kappa).
func TestCurveOfStep(t *testing.T) {
	s := compiled(t, "units = \"natural\"\n[exit]\nheight = 1\n[packet]\nenergy = 2\nlength = 5\n")
	from, to := 0.5/s.Scale.Energy, 3/s.Scale.Energy
	c, err := s.Curve(context.Background(), CurveRequest{Band: Band{&from, &to}, Points: 26})
	if err != nil {
		t.Fatal(err)
	}
	if len(c.Energy) != 26 || c.Fineness != nil {
		t.Fatalf("%d energies, fineness %v", len(c.Energy), c.Fineness)
	}
	for i, e := range c.Energy {
		want, delay := 0.0, math.NaN()
		if e > 1+1e-9 {
			v1, v2 := math.Sqrt(2*e), math.Sqrt(2*(e-1))
			want, delay = 4*v1*v2/((v1+v2)*(v1+v2)), 0
		} else if e < 1-1e-9 {
			if got, want := c.GroupDelayReflected[i], 1/math.Sqrt(e*(1-e)); !(math.Abs(got-want) <= 1e-12*want) {
				t.Errorf("E = %g: delay of reflection %g, want %g", e, got, want)
			}
		} else {
			continue
		}
		if !(math.Abs(c.Transmission[i]-want) <= 1e-14+c.ProbabilityError[i]) || !(math.Abs(c.Reflection[i]+want-1) <= 1e-14+c.ProbabilityError[i]) {
			t.Errorf("E = %g: T %g and R %g, want T %g", e, c.Transmission[i], c.Reflection[i], want)
		}
		if got := c.GroupDelayTransmitted[i]; math.IsNaN(got) != math.IsNaN(delay) || math.Abs(got) > 1e-14+c.TimeError[i] {
			t.Errorf("E = %g: delay %g, want %g", e, got, delay)
		}
		if !math.IsNaN(c.Dwell[i]) || c.Loss[i] != 0 {
			t.Errorf("E = %g: dwell %g, loss %g", e, c.Dwell[i], c.Loss[i])
		}
	}
}

// TestCurveHolds: layers add up to the whole, probabilities to 1, and every
// column is as long as the energies; with a loss, from the right.
func TestCurveHolds(t *testing.T) {
	s := compiled(t, `
units = "natural"
[[layer]]
thickness = 1
height = 1.5
loss = 0.01
[[layer]]
thickness = 3
height = 0
[[layer]]
thickness = 1.3
height = 1.4
[packet]
energy = 0.4
length = 6
from = "right"
`)
	c, err := s.Curve(context.Background(), CurveRequest{Layers: true})
	if err != nil || !c.Complete || c.Fineness == nil || len(c.LayerDwell) != 3 {
		t.Fatalf("%v, %+v", err, c)
	}
	for i := range c.Energy {
		sum := 0.0
		for _, l := range c.LayerDwell {
			sum += l[i]
		}
		if !(math.Abs(sum-c.Dwell[i]) <= 1e-12*sum) {
			t.Fatalf("layers hold %g of %g", sum, c.Dwell[i])
		}
		if one := c.Transmission[i] + c.Reflection[i] + c.Loss[i]; !(math.Abs(one-1) <= 1e-12) {
			t.Fatalf("probabilities add up to %g", one)
		}
		if !(c.Loss[i] > 0) {
			t.Fatalf("nothing is lost at %g", c.Energy[i])
		}
	}
}

// TestSeriesIsJSON: numbers without meaning are null, others are whole.
func TestSeriesIsJSON(t *testing.T) {
	text, err := json.Marshal(Series{1.0 / 3, math.NaN(), math.Inf(1), 1e-300, 0})
	if err != nil || string(text) != "[0.3333333333333333,null,null,1e-300,0]" {
		t.Errorf("%s, %v", text, err)
	}
}
