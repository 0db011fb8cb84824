package stationary

import (
	"context"
	"encoding/json"
	"math"
	"os"
	"strconv"
	"testing"

	"fluxtoll/potential"
)

// closedForm is one case of testdata/closed_forms.json; where each comes from
// stands in the case itself and in testdata/README.md.
type closedForm struct {
	ID        string
	Structure structureSpec
	Energy    float64
	Spectrum  *struct{ K0, Length float64 }
	Quantity  string
	Value     json.RawMessage
	Unit      float64 // of time in the case's units; 0: one
}

// structureSpec describes a structure in a testdata file. Left is the x of its
// left face in the coordinates of the case.
type structureSpec struct {
	Left        float64
	Entry, Exit potential.Lead
	Drop        float64
	Layers      []layerSpec
}

// layerSpec is one layer. eckart is step s + hill s (1-s), s the logistic
// function of (x - middle)/width; parabola is height (1 - (2 (x-middle)/thickness)^2).
type layerSpec struct {
	Shape                         string
	Thickness, Height, Mass, Loss float64
	HeightEnd                     float64 `json:"height_end"`
	Strength, Step, Hill, Width   float64
	X, Heights, Masses            []float64
}

func (l layerSpec) shape() potential.Shape {
	switch l.Shape {
	case "flat":
		return potential.Flat{Height: l.Height}
	case "ramp":
		return potential.Ramp{Height: l.Height, HeightEnd: l.HeightEnd}
	case "delta":
		return potential.Point{Strength: l.Strength}
	case "sech2":
		return potential.Hump{Height: l.Height, Width: l.Width}
	case "gauss":
		return potential.Bell{Height: l.Height, Width: l.Width}
	case "smooth-step":
		return potential.Rise{Height: l.Height, HeightEnd: l.HeightEnd, Width: l.Width}
	case "table":
		return potential.Table{X: l.X, Height: l.Heights, Mass: l.Masses}
	}
	return nil
}

// build makes the structure; shapes that no scenario can name are laid as
// segments.
func (s structureSpec) build(tb testing.TB) *potential.Structure {
	tb.Helper()
	if len(s.Layers) == 1 && s.Layers[0].shape() == nil {
		return s.single(tb)
	}
	var layers []potential.Layer
	for _, l := range s.Layers {
		shape := l.shape()
		if shape == nil {
			tb.Fatalf("no shape %q among several layers", l.Shape)
		}
		layers = append(layers, potential.Layer{Thickness: l.Thickness, Shape: shape, Mass: l.Mass, Loss: l.Loss})
	}
	out, err := potential.Build(s.Entry, s.Exit, layers, potential.Options{Cut: 1e-16, Drop: s.Drop})
	if err != nil {
		tb.Fatal(err)
	}
	return out
}

func (s structureSpec) single(tb testing.TB) *potential.Structure {
	tb.Helper()
	l := s.Layers[0]
	half := l.Thickness / 2
	var height potential.Profile
	switch l.Shape {
	case "eckart":
		height = potential.Sum{
			A: potential.Logistic{Low: 0, High: l.Step, Centre: half, Width: l.Width},
			B: potential.Sech2{Height: l.Hill / 4, Centre: half, Width: 2 * l.Width},
		}
	case "parabola":
		height = potential.Polynomial{Origin: half, C: []float64{l.Height, 0, -l.Height / (half * half)}}
	default:
		tb.Fatalf("unknown shape %q", l.Shape)
	}
	return &potential.Structure{
		Entry: s.Entry, Exit: s.Exit,
		Segments: []potential.Segment{{To: l.Thickness, Height: height, Mass: potential.Constant(l.Mass)}},
		Layers:   []potential.Span{{To: l.Thickness}},
	}
}

// decimal reads a decimal that stands in the file as a string, so that no digit
// is lost on the way.
func decimal(tb testing.TB, raw []byte) float64 {
	tb.Helper()
	var s string
	if err := json.Unmarshal(raw, &s); err != nil {
		tb.Fatal(err)
	}
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		tb.Fatal(err)
	}
	return v
}

func loadClosedForms(t *testing.T) []closedForm {
	t.Helper()
	data, err := os.ReadFile("testdata/closed_forms.json")
	if err != nil {
		t.Fatal(err)
	}
	var cases []closedForm
	if err := json.Unmarshal(data, &cases); err != nil {
		t.Fatal(err)
	}
	return cases
}

// TestClosedForms compares with 227 closed-form and high-precision values.
func TestClosedForms(t *testing.T) {
	ran := 0
	for _, c := range loadClosedForms(t) {
		ran++
		t.Run(c.ID, func(t *testing.T) {
			s := c.Structure.build(t)
			if c.Unit == 0 {
				c.Unit = 1
			}
			switch {
			case c.Quantity == "pole":
				c.checkPole(t, s)
			case c.Spectrum != nil:
				c.checkAverage(t, s)
			default:
				c.checkAmplitudes(t, s)
			}
		})
	}
	if ran != 227 {
		t.Errorf("ran %d cases, want 227", ran)
	}
}

// near fails where got and want differ by more than absolute + relative
// |want|, or got is NaN.
func near(t *testing.T, what string, got, want, absolute, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= absolute+relative*math.Abs(want)) {
		t.Errorf("%s = %.17g, want %.17g: off by %.3g", what, got, want, got-want)
	}
}

func (c closedForm) checkAmplitudes(t *testing.T, s *potential.Structure) {
	var a Amplitudes
	if err := New(s, false).At(c.Energy, &a); err != nil {
		t.Fatal(err)
	}
	x1 := c.Structure.Left
	x2 := x1 + s.Width()
	var got float64
	// Tolerances: the references have 20 digits and the solver a few roundings,
	// enlarged by E dT/dE = 20 at most here; the cut tails of smooth shapes are
	// below 1e-16 of the height. Windows whose potential goes on outside (the
	// dwell time of +-12 and +-20) leave 1e-10.
	absolute, relative := 0.0, 2e-12
	switch c.Quantity {
	case "transmission":
		got, absolute = a.Transmission, 1e-14
	case "reflection":
		got, absolute = a.Reflection, 1e-14
	case "group_delay_transmitted":
		got = a.GroupDelayTransmitted
	case "group_delay_reflected":
		got = a.GroupDelayReflected
	case "phase_delay_transmitted":
		got, relative = a.GroupDelayTransmitted-x2/a.SpeedOut+x1/a.SpeedIn, 1e-11
	case "phase_delay_reflected":
		got, relative = a.GroupDelayReflected+2*x1/a.SpeedIn, 1e-11
	case "dwell":
		got, relative = a.Dwell, 1e-10
	case "self_interference":
		k := s.Entry.Mass * a.SpeedIn
		got = -imag(a.R) / (k * a.SpeedIn)
	default:
		t.Fatalf("unknown quantity %q", c.Quantity)
	}
	near(t, c.Quantity, got*c.Unit, decimal(t, c.Value), absolute, relative)
}

func (c closedForm) checkAverage(t *testing.T, s *potential.Structure) {
	a, err := New(s, false).Average(context.Background(), Spectrum{c.Spectrum.K0, 1 / (2 * c.Spectrum.Length)}, Options{})
	if err != nil {
		t.Fatal(err)
	}
	x1 := c.Structure.Left
	x2 := x1 + s.Width()
	var m Mean
	switch c.Quantity {
	case "transmission":
		m = a.Transmitted
	case "dwell":
		m = a.Dwell
	case "dwell_and_exit_tail":
		m = a.Dwell
		m.Value += exitTail(a, s.Entry.Mass)
	case "phase_delay_transmitted":
		m = plus(a.GroupDelayTransmitted, a.SlownessOutTransmitted, -x2)
		m = plus(m, a.SlownessInTransmitted, x1)
	case "phase_delay_reflected":
		m = plus(a.GroupDelayReflected, a.SlownessInReflected, 2*x1)
	case "filter_transmitted":
		m = plus(a.SlownessInTransmitted, a.SlownessFree, -1)
	case "slowness_in":
		m = a.SlownessInTransmitted
	case "slowness_out":
		m = a.SlownessOutTransmitted
	default:
		t.Fatalf("unknown quantity %q", c.Quantity)
	}
	want := decimal(t, c.Value)
	if !(math.Abs(m.Value*c.Unit-want) <= m.Error*c.Unit+2e-15*math.Abs(want)) {
		t.Errorf("%s = %.17g +- %.2g, want %.17g: off by %.3g", c.Quantity, m.Value*c.Unit, m.Error*c.Unit, want, m.Value*c.Unit-want)
	}
	// The default asks for 1e-10; a filter is a difference of slownesses.
	if !(m.Error*c.Unit <= 1e-9*(math.Abs(want)+1)) {
		t.Errorf("%s: error %.2g is too large for %.3g", c.Quantity, m.Error*c.Unit, want)
	}
}

// exitTail is the dwell time in a closed exit lead, averaged: all of it is the
// delay of reflection less the self-interference (H. G. Winful, Phys. Rev.
// Lett. 91, 260401 (2003)), and what is inside is known.
func exitTail(a *Averages, mass float64) float64 {
	sum := 0.0
	for _, n := range a.Nodes {
		if b := n.Amplitudes; b.SpeedOut == 0 {
			sum += n.Weight * (b.GroupDelayReflected + imag(b.R)/(mass*b.SpeedIn*b.SpeedIn) - b.Dwell)
		}
	}
	return sum
}

// plus is a + f b with its error.
func plus(a, b Mean, f float64) Mean {
	return Mean{a.Value + f*b.Value, a.Error + math.Abs(f)*b.Error}
}

func (c closedForm) checkPole(t *testing.T, s *potential.Structure) {
	re, im := c.pole(t)
	v := New(s, false)
	z, ok := v.refine(complex(re+im/3, im*1.2))
	if !ok {
		t.Fatal("Newton's method went astray")
	}
	// Rounding of the energy against the width: in/in' is off by 1e-15 of it.
	near(t, "energy", real(z), re, 0, 1e-14)
	near(t, "half width", imag(z), im, 1e-15*re, 1e-11)
}

// pole is the value of a case that is one.
func (c closedForm) pole(t *testing.T) (re, im float64) {
	t.Helper()
	var parts [2]json.RawMessage
	if err := json.Unmarshal(c.Value, &parts); err != nil {
		t.Fatal(err)
	}
	return decimal(t, parts[0]), decimal(t, parts[1])
}
