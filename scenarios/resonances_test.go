package scenarios

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"
)

func compiled(t *testing.T, text string) *Scenario {
	t.Helper()
	f, err := Read("test", strings.NewReader(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	s, err := f.Compile()
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// gaas is a twin barrier in GaAs.
const gaas = `
[particle]
mass = "0.067 m_e"
[[layer]]
thickness = "5 nm"
height = "0.23 eV"
[[layer]]
thickness = "5 nm"
height = "0 eV"
[[layer]]
thickness = "5 nm"
height = "0.23 eV"
[packet]
energy = "80 meV"
length = "40 nm"
`

// TestResonanceInUnits: rtd.GCR of G. Garcia-Calderon, A. Rubio, R. Romo and
// J. Villavicencio, quant-ph/0011032 (parameters from memory; pole with mpmath
// from the closed form of a resonator, 30 digits): 80.0542601945 meV, width
// 1.02789370176 meV, lifetime 640.350218920 fs. Both roads agree to 1e-8 of
// the width.
func TestResonanceInUnits(t *testing.T) {
	s := compiled(t, gaas)
	r, err := s.Resonances(context.Background(), Band{})
	if err != nil {
		t.Fatal(err)
	}
	if len(r.Resonances) != 1 || !r.Complete || !r.Agrees || r.Units.Energy != "meV" || r.Units.Time != "fs" {
		t.Fatalf("%+v", r)
	}
	x := r.Resonances[0]
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"energy", x.Energy, 80.05426019449141985668},
		{"width", x.Width, 1.027893701762965132419},
		{"lifetime", *x.Lifetime, 640.3502189204890168254},
		{"left", x.WidthLeft, 1.027893701762965132419 / 2},
		{"right", x.WidthRight, 1.027893701762965132419 / 2},
		{"energy on the elements", x.Elements.Energy, 80.05426019449141985668},
		{"width on the elements", x.Elements.Width, 1.027893701762965132419},
	} {
		if !(math.Abs(c.got-c.want) <= 1e-10*c.want) { // rounding of the constants
			t.Errorf("%s: %.15g, want %.15g", c.name, c.got, c.want)
		}
	}
	if !(x.Elements.EnergyOff <= 1e-8*x.Width && x.Elements.WidthOff <= 1e-8) {
		t.Errorf("the elements are off by %+v", x.Elements)
	}
}

// TestElementsFindNarrowStates: a twin barrier with widths of 1e-9 of the
// energy in unequal leads, from the right: the two roads agree.
func TestElementsFindNarrowStates(t *testing.T) {
	s := compiled(t, `
units = "natural"
[entry]
mass = 0.8
[exit]
height = -0.2
[[layer]]
thickness = 5
height = 2
[[layer]]
thickness = 3
height = 0
[[layer]]
thickness = 5.5
height = 2
[packet]
energy = 0.3
length = 8
from = "right"
`)
	r, err := s.Resonances(context.Background(), Band{})
	if err != nil {
		t.Fatal(err)
	}
	if len(r.Resonances) != 1 || r.Resonances[0].Elements == nil || !r.Agrees || !r.Complete {
		t.Fatalf("%+v", r)
	}
	x := r.Resonances[0]
	if !(x.Width < 1e-8*x.Energy) || !(x.Elements.WidthOff <= 1e-8) || !(x.WidthLeft > x.WidthRight) {
		t.Errorf("%+v, elements %+v", x, x.Elements)
	}
}

// TestDisagreementIsSeen: a state that the elements do not have is not agreed
// upon.
func TestDisagreementIsSeen(t *testing.T) {
	s := compiled(t, gaas)
	from, to, err := s.band(Band{}, 0, "entry")
	if err != nil {
		t.Fatal(err)
	}
	v, err := s.survey(context.Background(), from, to, 0)
	if err != nil || len(v.Resonances) != 1 {
		t.Fatalf("%v, %v", v, err)
	}
	v.Resonances[0].Width *= 1 + 1e-6
	out := s.listed(v)
	if err := s.holdAgainstElements(context.Background(), v, out); err != nil {
		t.Fatal(err)
	}
	if out.Agrees || out.Resonances[0].Elements == nil {
		t.Errorf("agreed on a width that is off by 1e-6: %+v", out.Resonances[0].Elements)
	}
}

// TestBandRefuses: every wrong window is an InputError that names its flag.
func TestBandRefuses(t *testing.T) {
	s := compiled(t, gaas)
	at := func(meV float64) *float64 { v := meV / s.Scale.Energy; return &v }
	nan := math.NaN()
	for _, c := range []struct {
		band Band
		flag string
	}{
		{Band{From: at(0)}, "--from"}, {Band{From: at(-3)}, "--from"}, {Band{From: at(1000)}, "--from"}, {Band{From: &nan}, "--from"},
		{Band{To: at(0)}, "--to"}, {Band{To: at(1)}, "--to"}, {Band{From: at(50), To: at(50)}, "--to"},
		{Band{From: at(50), To: at(50 * (1 + 1e-13))}, "--to"}, {Band{From: at(50), To: &nan}, "--to"},
	} {
		for name, ask := range map[string]func() error{
			"curve":      func() error { _, err := s.Curve(context.Background(), CurveRequest{Band: c.band}); return err },
			"resonances": func() error { _, err := s.Resonances(context.Background(), c.band); return err },
		} {
			var bad *InputError
			if err := ask(); !errors.As(err, &bad) || bad.File != c.flag || bad.Accepted == "" {
				t.Errorf("%s: error %v, want one about %s", name, err, c.flag)
			}
		}
	}
	if _, err := s.Resonances(context.Background(), Band{From: at(50), To: at(150)}); err != nil {
		t.Error(err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := s.Resonances(ctx, Band{}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
	if _, err := s.Curve(ctx, CurveRequest{}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}
