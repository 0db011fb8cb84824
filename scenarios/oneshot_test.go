package scenarios

import (
	"context"
	"fmt"
	"math"
	"math/cmplx"
	"testing"
)

// pulses runs a scenario and reads its pulses.
func pulses(t *testing.T, text string) *PulseReport {
	t.Helper()
	trial, err := PreparePulse(context.Background(), compile(t, text), Forced{})
	if err != nil {
		t.Fatal(err)
	}
	r, err := trial.FinishPulses(context.Background(), nil, 121)
	if err != nil {
		t.Fatal(err)
	}
	if r.Verdict != Agrees {
		t.Errorf("verdict %s", r.Verdict)
	}
	return r
}

// curveOf is the curve of a name.
func curveOf(t *testing.T, r *PulseReport, name string) ShotCurve {
	t.Helper()
	for _, c := range r.OneShot.Curves {
		if c.Name == name {
			return c
		}
	}
	t.Fatalf("no curve %s", name)
	return ShotCurve{}
}

// Transmission, its phase and its delay from one packet are the closed forms
// of textbooks, all of whose formulas are from memory: step, rectangular
// barrier and 1/cosh^2 from L. D. Landau and E. M. Lifshitz, Quantum Mechanics,
// 3rd ed., sec. 25, problems 1, 2 and 4; delta from D. J. Griffiths,
// Introduction to Quantum Mechanics, sec. 2.5; reflectionless wells of
// G. Poeschl and E. Teller, Z. Phys. 83, 143 (1933), whose phases are
// arg t = sum over j of 2 atan(j/k). Natural units.
func TestOneShotAgainstClosedForms(t *testing.T) {
	const head = "units = \"natural\"\n"
	sech := func(k, v, a float64) float64 {
		s := math.Sinh(math.Pi * k * a)
		c := math.Cosh(math.Pi / 2 * math.Sqrt(8*v*a*a-1))
		return s * s / (s*s + c*c)
	}
	for _, c := range []struct {
		name, text   string
		transmission func(k float64) float64
		delay        func(k float64) float64 // from face to face; nil: not compared
	}{
		{"step", head + "[exit]\nheight = 1.0\n[packet]\nenergy = 2.0\nlength = 8.0\n", func(k float64) float64 {
			q := math.Sqrt(k*k - 2)
			return 4 * k * q / ((k + q) * (k + q))
		}, func(float64) float64 { return 0 }},
		{"delta", head + "[[layer]]\nshape = \"delta\"\nstrength = 0.7\n[packet]\nenergy = 0.6\nlength = 12.0\n", func(k float64) float64 {
			return 1 / (1 + 0.49/(k*k))
		}, func(k float64) float64 { return 0.7 / (k * (k*k + 0.49)) }},
		{"barrier", head + "[[layer]]\nthickness = 1.3\nheight = 1.5\n[packet]\nenergy = 0.9\nlength = 10.0\n", func(k float64) float64 {
			q := math.Sqrt(3 - k*k)
			s := math.Sinh(1.3 * q)
			return 1 / (1 + 9*s*s/(4*k*k*q*q))
		}, nil},
		{"sech2", head + "[[layer]]\nshape = \"sech2\"\nheight = 1.0\nwidth = 1.0\nthickness = 44.0\n[packet]\nenergy = 0.72\nlength = 9.0\n",
			func(k float64) float64 { return sech(k, 1, 1) }, nil},
		{"reflectionless", head + "[[layer]]\nshape = \"sech2\"\nheight = -3.0\nwidth = 1.0\nthickness = 44.0\n[packet]\nenergy = 0.7\nlength = 9.0\n",
			func(float64) float64 { return 1 },
			func(k float64) float64 { return 44/k - 2/k*(1/(k*k+1)+2/(k*k+4)) }},
	} {
		t.Run(c.name, func(t *testing.T) {
			r := pulses(t, c.text)
			through, delays := curveOf(t, r, "transmission"), curveOf(t, r, "group_delay_transmitted")
			worst, worstWeighted, late := 0.0, 0.0, 0.0
			for i, e := range r.OneShot.Energy {
				if e <= 1 && c.name == "step" {
					continue // closed
				}
				k := math.Sqrt(2 * e)
				off := math.Abs(*through.Packet[i] - c.transmission(k))
				worst, worstWeighted = math.Max(worst, off), math.Max(worstWeighted, off*r.OneShot.Weight[i])
				if !(off <= *through.Error[i]) {
					t.Errorf("T(%.4g) = %.12g, want %.12g within %.2g", e, *through.Packet[i], c.transmission(k), *through.Error[i])
				}
				if c.delay != nil && delays.Packet[i] != nil && r.OneShot.Weight[i] > 1e-2 {
					late = math.Max(late, math.Abs(*delays.Packet[i]-c.delay(k)))
				}
			}
			// The issue asks for 1e-6; a hundredth of the tolerance is what the
			// positions are chosen for.
			if !(worstWeighted <= 1e-8) || !(late <= 1e-5) || len(r.OneShot.Energy) < 100 {
				t.Errorf("%d energies, T off by %.2g, weighted %.2g; delay by %.2g", len(r.OneShot.Energy), worst, worstWeighted, late)
			}
		})
	}
}

// Amplitudes from the right side are those of the mirrored structure, phases
// included, and reciprocity holds: t is the same from both sides
// (L. D. Landau and E. M. Lifshitz, sec. 25).
func TestOneShotFromEitherSide(t *testing.T) {
	text := func(from string, energy float64) string {
		return fmt.Sprintf(`units = "natural"
[[layer]]
thickness = 1.2
height = 1.4
[[layer]]
thickness = 2.0
height = -0.3
[exit]
height = 0.4
mass = 0.8
[packet]
energy = %g
length = 9.0
from = "%s"
`, energy, from)
	}
	one, other := pulses(t, text("left", 1.5)), pulses(t, text("right", 1.5))
	a, b := amplitudes(t, one), amplitudes(t, other)
	compared := 0
	for i, e := range one.OneShot.Energy {
		if one.OneShot.Weight[i] < 0.1 {
			continue
		}
		j := closest(other.OneShot.Energy, e)
		gap := math.Abs(other.OneShot.Energy[j] - e)
		if off := cmplx.Abs(a[i] - b[j]); !(off <= 1e-7+4*gap) {
			t.Errorf("t(%.4g) = %v from the left, %v from the right", e, a[i], b[j])
		}
		compared++
	}
	if compared < 20 {
		t.Errorf("only %d energies compared", compared)
	}
}

// amplitudes are t at every energy, 0 where its phase is not known.
func amplitudes(t *testing.T, r *PulseReport) []complex128 {
	through, phase := curveOf(t, r, "transmission"), curveOf(t, r, "phase_transmitted")
	out := make([]complex128, len(through.Packet))
	for i := range out {
		if phase.Packet[i] != nil {
			out[i] = cmplx.Rect(math.Sqrt(*through.Packet[i]), *phase.Packet[i])
		}
	}
	return out
}

func closest(list []float64, v float64) int {
	best := 0
	for i, x := range list {
		if math.Abs(x-v) < math.Abs(list[best]-v) {
			best = i
		}
	}
	return best
}

// Every demo's energies agree with the stationary road within their errors,
// and the errors are no larger than useful. What remains of a resonance when
// the run settles, a part of the tolerance in probability, weighs most.
func TestOneShotOfEveryDemo(t *testing.T) {
	names := 0
	for _, d := range Demos() {
		trial, err := PreparePulse(context.Background(), demoScenario(t, d.Name), Forced{})
		if err != nil {
			t.Fatal(err)
		}
		r, err := trial.FinishPulses(context.Background(), nil, 61)
		if err != nil {
			t.Fatal(err)
		}
		if r.Verdict != Agrees || !r.OneShot.Agrees {
			t.Errorf("%s: %s", d.Name, r.Verdict)
		}
		for _, c := range r.OneShot.Curves[:2] {
			if !(c.WorstWeight.Size <= 1e-6) || !(c.WorstWeight.Error <= 1e-4) {
				t.Errorf("%s: %s off by %.2g, error %.2g", d.Name, c.Name, c.WorstWeight.Size, c.WorstWeight.Error)
			}
		}
		names++
	}
	if names < 10 {
		t.Errorf("only %d demos", names)
	}
}

func demoScenario(t *testing.T, name string) *Scenario {
	t.Helper()
	f, err := OpenDemo(name)
	if err != nil {
		t.Fatal(err)
	}
	s, err := f.Compile()
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// A packet that starts close has errors that say so, and they hold.
func TestOneShotFromClose(t *testing.T) {
	r := pulsesAllowing(t, `units = "natural"
tolerance = 1e-3
[[layer]]
thickness = 1.3
height = 1.5
[packet]
energy = 0.9
length = 10.0
start = -42.0
[planes]
near = -84.0
`)
	for _, c := range r.OneShot.Curves {
		if !c.Agrees {
			t.Errorf("%s is off by %.2g, error %.2g", c.Name, c.Worst.Size, c.Worst.Error)
		}
	}
	if c := curveOf(t, r, "transmission"); !(c.WorstWeight.Error > 1e-3) {
		t.Errorf("the error at a start 4.2 lengths off is said to be %.2g", c.WorstWeight.Error)
	}
}

// pulsesAllowing reads the pulses whatever the verdict.
func pulsesAllowing(t *testing.T, text string) *PulseReport {
	t.Helper()
	trial, err := PreparePulse(context.Background(), compile(t, text), Forced{})
	if err != nil {
		t.Fatal(err)
	}
	r, err := trial.FinishPulses(context.Background(), nil, 61)
	if err != nil {
		t.Fatal(err)
	}
	return r
}
