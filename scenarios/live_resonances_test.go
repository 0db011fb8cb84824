package scenarios

import (
	"context"
	"fmt"
	"math"
	"math/cmplx"
	"testing"
)

// liveText prepares a scenario to be looked at.
func liveText(t *testing.T, text string) *Live {
	t.Helper()
	trial, err := Prepare(context.Background(), compile(t, text), Forced{})
	if err != nil {
		t.Fatal(err)
	}
	l, err := NewLive(trial)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func slab(d, depth, energy, length float64) string {
	return fmt.Sprintf("units = \"natural\"\n[[layer]]\nthickness = %g\nheight = %g\n[packet]\nenergy = %g\nlength = %g\n", d, -depth, energy, length)
}

// A square well has its poles where r^2 exp(2iqd) = 1, r = (q-k)/(q+k) (the
// Airy sum of its echoes; common practice), that is at q d - i ln r = n pi: each
// one is there, and no n between the first and the last is missing. All lie in
// the packet's band, and the nearest is within half their distance of the mean.
func TestSeenResonancesOfAWell(t *testing.T) {
	const d, depth, energy = 200.0, 30.0, 2.0
	o := liveText(t, slab(d, depth, energy, 4)).Outlook
	if len(o.Resonances) < 10 {
		t.Fatalf("%d resonances, want some ten at least", len(o.Resonances))
	}
	before := 0.0
	for i, r := range o.Resonances {
		e := complex(r.Energy, -r.Width/2)
		k, q := cmplx.Sqrt(2*e), cmplx.Sqrt(2*(e+depth))
		phase := (q*d - 1i*cmplx.Log((q-k)/(q+k))) / math.Pi
		n := math.Round(real(phase))
		// A phase of 2e3 is rounded to 4e-13; the poles' own errors, times its
		// derivative d/(pi |q|), come on top.
		if off := cmplx.Abs(phase - complex(n, 0)); !(off <= 1e-12+d/8*(r.EnergyError+r.WidthError)) {
			t.Errorf("%d: phase %v off by %g, errors %g, %g", i, phase, off, r.EnergyError, r.WidthError)
		}
		if i > 0 && n != before+1 {
			t.Errorf("n = %g after %g", n, before)
		}
		if before = n; !(math.Abs(r.Lifetime*r.Width-1) < 1e-12) || !(math.Abs(r.Energy-energy) < 4*o.Spread) {
			t.Errorf("%+v: lifetime times width is not 1, or it is out of the band", r)
		}
	}
	gap := o.Resonances[1].Energy - o.Resonances[0].Energy
	if r := o.Nearest(); r == nil || !(math.Abs(r.Energy-energy) <= gap) {
		t.Errorf("nearest %+v, distance of two %g", r, gap)
	}
}

// Where there is no resonance none is seen: a step, and one barrier, whose
// poles are wider than they are high.
func TestNoResonanceSeen(t *testing.T) {
	for _, name := range []string{"collector-step", "blurred-barrier", "thin-barrier", "wall-step"} {
		if o := liveDemo(t, name, Forced{}).Outlook; o.Nearest() != nil {
			t.Errorf("%s: %+v", name, o.Resonances)
		}
	}
}
