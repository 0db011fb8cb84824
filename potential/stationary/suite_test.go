package stationary

import (
	"context"
	"math"
	"math/cmplx"
	"testing"

	"fluxtoll/potential"

	"pgregory.net/rapid"
)

// drawStructure draws a structure of up to five layers of all shapes, unequal
// leads, a bias, and losses if lossy.
func drawStructure(t *rapid.T, lossy bool) *potential.Structure {
	number := func(name string, lo, hi float64) float64 { return rapid.Float64Range(lo, hi).Draw(t, name) }
	lead := func(name string) potential.Lead {
		return potential.Lead{Height: number(name+" height", -0.5, 0.5), Mass: number(name+" mass", 0.4, 2.5)}
	}
	var layers []potential.Layer
	for range rapid.IntRange(0, 5).Draw(t, "layers") {
		l := potential.Layer{Thickness: number("thickness", 0.01, 4), Mass: number("mass", 0.4, 2.5)}
		if lossy && rapid.Bool().Draw(t, "lossy") {
			l.Loss = number("loss", 1e-6, 0.5)
		}
		h, end, width := number("height", -2, 3), number("end", -2, 3), number("width", 0.3, 2)
		switch rapid.IntRange(0, 6).Draw(t, "shape") {
		case 0, 1:
			l.Shape = potential.Flat{Height: h}
		case 2:
			l.Shape = potential.Ramp{Height: h, HeightEnd: end}
		case 3:
			l.Shape, l.Thickness, l.Loss = potential.Point{Strength: h}, 0, 0
		case 4:
			l.Shape = potential.Hump{Height: h, Width: width}
		case 5:
			l.Shape = potential.Bell{Height: h, Width: width}
		case 6:
			l.Shape = potential.Table{
				X: []float64{0, l.Thickness / 3, l.Thickness}, Height: []float64{h, end, h / 2},
				Mass: []float64{l.Mass, 2 * l.Mass, l.Mass}, Smooth: rapid.Bool().Draw(t, "smooth"),
			}
		}
		layers = append(layers, l)
	}
	s, err := potential.Build(lead("entry"), lead("exit"), layers, potential.Options{Cut: 1e-12, Drop: number("drop", -0.3, 0.3)})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// within fails where got and want differ by more than tolerance, or are NaN.
func within(t *rapid.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Fatalf("%s: %.17g, want %.17g +- %.2g", what, got, want, tolerance)
	}
}

// solve returns the amplitudes from one side.
func solve(t *rapid.T, s *potential.Structure, fromRight bool, energy float64) (a Amplitudes) {
	t.Helper()
	if err := New(s, fromRight).At(energy, &a); err != nil {
		t.Fatal(err)
	}
	return a
}

// relative is the rounding a random structure may show: a few roundings in
// each of up to 200 slices, enlarged by how sharply the amplitudes depend on
// the energy.
func relative(a *Amplitudes) float64 { return 1e-13 + 40*0x1p-52*a.sharpness }

// TestConservation: T + R + A = 1, whatever the structure. T comes from the
// running scale, R from the split at the near face, A from the layers.
func TestConservation(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawStructure(t, true)
		a := solve(t, s, rapid.Bool().Draw(t, "right"), rapid.Float64Range(0.9, 4).Draw(t, "energy"))
		within(t, "T+R+A", a.Transmission+a.Reflection+a.Absorption, 1, 1e-13)
		within(t, "|T|^2", square(a.T), a.Transmission, 1e-13*a.Transmission)
		within(t, "|R|^2", square(a.R), a.Reflection, 1e-13)
	})
}

// TestReciprocity: the flux-normalised t is the same from both sides, with
// loss too (Landau and Lifshitz, Quantum Mechanics, sec. 25; from memory).
func TestReciprocity(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawStructure(t, true)
		e := rapid.Float64Range(0.9, 4).Draw(t, "energy")
		l, r := solve(t, s, false, e), solve(t, s, true, e)
		tolerance := relative(&l) + relative(&r)
		within(t, "ln T", r.LogTransmission, l.LogTransmission, 2*tolerance*(1+math.Abs(l.LogTransmission)))
		within(t, "phase of t", cmplx.Phase(r.T/l.T), 0, 2*tolerance*(1+math.Abs(l.LogTransmission)))
		within(t, "delay of t", r.GroupDelayTransmitted, l.GroupDelayTransmitted, 20*tolerance*(1+l.sharpness+r.sharpness))
	})
}

// TestMirror: a mirrored structure from the left is the structure from the
// right, layers counted from the other end.
func TestMirror(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawStructure(t, true)
		e := rapid.Float64Range(0.9, 4).Draw(t, "energy")
		a, b := solve(t, s, true, e), solve(t, s.Mirror(), false, e)
		within(t, "T", a.Transmission, b.Transmission, 1e-14)
		within(t, "R", a.Reflection, b.Reflection, 1e-14)
		if len(a.LayerDwell) != len(s.Layers) || len(b.LayerDwell) != len(s.Layers) {
			t.Fatal("dwell times are not one for each layer")
		}
		for i := range a.LayerDwell {
			j := len(a.LayerDwell) - 1 - i
			within(t, "layer dwell", a.LayerDwell[i], b.LayerDwell[j], 1e-12*b.LayerDwell[j])
			within(t, "layer loss", a.LayerLoss[i], b.LayerLoss[j], 1e-12*b.LayerLoss[j])
		}
	})
}

// TestDwellIdentity: without loss, dwell = T tau_t + R tau_r + Im(r)/(k v)
// (F. T. Smith, Phys. Rev. 118, 349 (1960); with the last term H. G. Winful,
// Phys. Rev. Lett. 91, 260401 (2003)), for unequal leads and masses too.
func TestDwellIdentity(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawStructure(t, false)
		right := rapid.Bool().Draw(t, "right")
		a := solve(t, s, right, rapid.Float64Range(0.9, 4).Draw(t, "energy"))
		mass := s.Entry.Mass
		if right {
			mass = s.Exit.Mass
		}
		got := a.Transmission*a.GroupDelayTransmitted + a.Reflection*a.GroupDelayReflected +
			imag(a.R)/(mass*a.SpeedIn*a.SpeedIn)
		// The delays carry the sharpness again.
		within(t, "dwell", got, a.Dwell, 20*relative(&a)*(1+a.sharpness))
	})
}

// TestDelaysAreDerivatives: the delays against an eighth-order difference of
// the phases, with loss too.
func TestDelaysAreDerivatives(t *testing.T) {
	weights := []float64{4.0 / 5, -1.0 / 5, 4.0 / 105, -1.0 / 280}
	rapid.Check(t, func(t *rapid.T) {
		s := drawStructure(t, true)
		e := rapid.Float64Range(0.9, 4).Draw(t, "energy")
		right := rapid.Bool().Draw(t, "right")
		a := solve(t, s, right, e)
		if a.Reflection < 0.05 {
			t.Skip("little reflection: its phase may turn within the step")
		}
		// Step: a small part of the scale on which the amplitudes change.
		scale := 1 / (a.sharpness + math.Abs(a.GroupDelayReflected) + 1/(e-0.8))
		h := 0.02 * scale
		transmitted, reflected := 0.0, 0.0
		for i, w := range weights {
			d := float64(i+1) * h
			p, m := solve(t, s, right, e+d), solve(t, s, right, e-d)
			transmitted += w / h * cmplx.Phase(p.T/m.T)
			reflected += w / h * cmplx.Phase(p.R/m.R)
		}
		// 0.08^9 of the scale by truncation, roundings over h.
		tolerance := 4e-8/scale + 10*relative(&a)/h
		within(t, "delay of t", a.GroupDelayTransmitted, transmitted, tolerance)
		within(t, "delay of r", a.GroupDelayReflected, reflected, tolerance/min(1, math.Sqrt(a.Reflection)))
	})
}

// TestIncomingMeetsTheRealAxis: the complex-energy road at a real energy is
// the real one.
func TestIncomingMeetsTheRealAxis(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawStructure(t, true)
		e := rapid.Float64Range(0.9, 4).Draw(t, "energy")
		v := New(s, rapid.Bool().Draw(t, "right"))
		var a Amplitudes
		if err := v.At(e, &a); err != nil {
			t.Fatal(err)
		}
		in, slope, log := v.Incoming(complex(e, 0))
		got := math.Log(a.SpeedOut/a.SpeedIn) - 2*(log+math.Log(cmplx.Abs(in)))
		within(t, "ln T", got, a.LogTransmission, 4*relative(&a)*(1+math.Abs(got)))
		within(t, "delay", -imag(slope/in), a.GroupDelayTransmitted, 40*relative(&a)*(1+a.sharpness))
	})
}

// TestCloneAgrees: a clone gives the same bits, and the solver is none the
// worse for it.
func TestCloneAgrees(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawStructure(t, true)
		e := rapid.Float64Range(0.9, 4).Draw(t, "energy")
		v := New(s, false)
		var a, b, c Amplitudes
		for _, err := range []error{v.At(e, &a), v.Clone().At(e, &b), v.At(e, &c)} {
			if err != nil {
				t.Fatal(err)
			}
		}
		if a.T != b.T || a.T != c.T || a.R != b.R || a.Dwell != b.Dwell || a.Dwell != c.Dwell {
			t.Fatal("a clone or a second call gives other numbers")
		}
	})
}

// TestAveragesOfAnything: for any structure T + R + A = 1 within the errors,
// and asking for more moves no average by more than the errors said.
func TestAveragesOfAnything(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawStructure(t, true)
		v := New(s, rapid.Bool().Draw(t, "right"))
		k0 := rapid.Float64Range(0.5, 3).Draw(t, "k0")
		p := Spectrum{k0, k0 * rapid.Float64Range(0.01, 0.12).Draw(t, "width")}
		rough, err := v.Average(context.Background(), p, Options{Relative: 1e-5})
		if err != nil {
			t.Fatal(err)
		}
		fine, err := v.Average(context.Background(), p, Options{Relative: 1e-11})
		if err != nil {
			t.Fatal(err)
		}
		within(t, "T+R+A", fine.Transmitted.Value+fine.Reflected.Value+fine.Lost.Value, 1,
			fine.Transmitted.Error+fine.Reflected.Error+fine.Lost.Error+2e-15)
		for what, pair := range map[string][2]Mean{
			"T": {rough.Transmitted, fine.Transmitted}, "R": {rough.Reflected, fine.Reflected}, "A": {rough.Lost, fine.Lost},
			"delay of t":    {rough.GroupDelayTransmitted, fine.GroupDelayTransmitted},
			"delay of r":    {rough.GroupDelayReflected, fine.GroupDelayReflected},
			"slowness in":   {rough.SlownessInTransmitted, fine.SlownessInTransmitted},
			"slowness out":  {rough.SlownessOutTransmitted, fine.SlownessOutTransmitted},
			"slowness of r": {rough.SlownessInReflected, fine.SlownessInReflected},
			"slowness":      {rough.SlownessFree, fine.SlownessFree}, "dwell": {rough.Dwell, fine.Dwell},
		} {
			within(t, what, pair[0].Value, pair[1].Value, pair[0].Error+pair[1].Error)
		}
	})
}
