package propagate

import (
	"math"
	"testing"
)

// The energy of a free Gaussian: k is normal with mean k0 and deviation
// s = 1/(2 length), so that k^2/2 has mean (k0^2+s^2)/2 and variance
// k0^2 s^2 + s^4/2.
func TestEnergyOfAGaussian(t *testing.T) {
	for _, origin := range []float64{0, 2, -5} {
		s := freeSetup()
		s.origin = origin
		stepper := s.stepper(t)
		width := 1 / (2 * s.packet.Length)
		for range 3 {
			mean, spread := stepper.energy()
			near(t, "mean", mean, (4+width*width)/2, 1e-8)
			near(t, "spread", spread, math.Sqrt(4*width*width+math.Pow(width, 4)/2), 1e-7)
			advance(stepper, 5)
		}
	}
}

// Between faces that carry point potentials, jumps of height and mass, and
// curved potentials, H psi is that of the full matrix.
func TestEnergyAgainstDense(t *testing.T) {
	s := mixedSetup().small(5)
	for i := range s.layers {
		s.layers[i].Loss = 0
	}
	stepper := s.stepper(t)
	advance(stepper, 1)
	m, psi := stepper.Mesh, stepper.Psi()
	a, mass := m.full(1, complex(s.origin, 0))
	h, want := a.times(psi), moments{}
	left, right := m.PlaneNodes()
	for i := left + 1; i < right; i++ {
		want.add(real(mass[i]), psi[i], h[i]/mass[i])
	}
	mean, spread := stepper.energy()
	wantMean, wantSpread := want.meanAndSpread()
	near(t, "mean", mean, s.origin+wantMean, 1e-9*spread)
	near(t, "spread", spread/wantSpread, 1, 1e-9)
}

// A packet that straddles the top of a step leaves a slow remainder: the step
// grows, the ledger still closes, and what passes is the same.
func TestLengthenedRun(t *testing.T) {
	s := stepSetup()
	s.packet.K0, s.packet.Length, s.dt = 1.6, 6, 0.5
	const rest = 5e-8
	ending := Ending{Steps: 1 << 30, Time: 20000, Settled: settledBelow(rest)}
	plain := NewRun(s.stepper(t), ending)
	if got := plain.Finish(t.Context()); got != Settled {
		t.Fatalf("the plain run ended with %v", got)
	}
	ending.Slow = func(_ *Ledger, remaining, _ float64) bool { return remaining < 3e-6 }
	run := NewRun(s.stepper(t), ending)
	last, longest := 0.0, s.dt
	run.ending.Watch = func(l *Ledger) {
		near(t, "time passed", l.Time-last, run.Step, 1e-9*l.Time)
		last, longest = l.Time, max(longest, run.Step)
	}
	if got := run.Finish(t.Context()); got != Settled {
		t.Fatalf("ended with %v", got)
	}
	if longest < 4*s.dt || run.Ledger().Steps > plain.Ledger().Steps/2 {
		t.Errorf("step grew to %g, %d steps instead of %d", longest, run.Ledger().Steps, plain.Ledger().Steps)
	}
	near(t, "steps are s.dt times a power of two", math.Mod(math.Log2(longest/s.dt), 1), 0, 1e-12)
	near(t, "closure", closure(run.Stepper), 0, 1e-12)
	got, want := run.Ledger(), plain.Ledger()
	// The longer step may overshoot the end by one step, in which it sends on
	// a few parts in a hundred of the rest.
	near(t, "right", got.Right.Probability, want.Right.Probability, rest/10)
	near(t, "left", got.Left.Probability, want.Left.Probability, rest/10)
	near(t, "arrival", got.Right.MeanTime(), want.Right.MeanTime(), rest/10*got.Time/want.Right.Probability)
	if restored := run.Save(); restored.gear.Step != run.Step {
		t.Errorf("a saved state has step %g, the run %g", restored.gear.Step, run.Step)
	}
}

func TestLengthenRefuses(t *testing.T) {
	stepper := stepSetup().stepper(t)
	advance(stepper, 10)
	if step := stepper.Step; stepper.Lengthen() || stepper.Step != step {
		t.Error("a step that is as long as the packet allows was lengthened")
	}
}
