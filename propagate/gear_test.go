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
			mean, spread := stepper.energy(stepper.psi)
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
	mean, spread := stepper.energy(stepper.psi)
	wantMean, wantSpread := want.meanAndSpread()
	near(t, "mean", mean, s.origin+wantMean, 1e-9*spread)
	near(t, "spread", spread/wantSpread, 1, 1e-9)
}

// A packet that straddles the top of a step leaves a slow remainder: the step
// grows, and by the same time the same has passed, to rounding. What is still
// to come when the step grows is misplaced in time by a small part only.
func TestLengthenedRun(t *testing.T) {
	const slow = 1e-5
	s := stepSetup()
	s.packet.K0, s.packet.Length, s.dt = 1.6, 6, 0.5
	run := NewRun(s.stepper(t), Ending{
		Steps: 1 << 30, Time: 3000,
		Slow: func(_ *Ledger, remaining, _ float64) bool { return remaining < slow },
	})
	last, longest := 0.0, s.dt
	run.ending.Watch = func(l *Ledger) {
		near(t, "time passed", l.Time-last, run.Step, 1e-9*l.Time)
		last, longest = l.Time, max(longest, run.Step)
	}
	if got := run.Finish(t.Context()); got != TimeLimit {
		t.Fatalf("ended with %v", got)
	}
	plain := s.stepper(t)
	advance(plain, run.Ledger().Time)
	if longest < 16*s.dt || run.Ledger().Steps > plain.Ledger().Steps/3 {
		t.Errorf("step grew to %g, %d steps instead of %d", longest, run.Ledger().Steps, plain.Ledger().Steps)
	}
	near(t, "the step is dt times a power of two", math.Mod(math.Log2(longest/s.dt), 1), 0, 1e-12)
	near(t, "closure", closure(run.Stepper), 0, 1e-12)
	got, want := run.Ledger(), plain.Ledger()
	const rounding = 1e-13
	near(t, "time", got.Time, want.Time, rounding*want.Time)
	near(t, "right", got.Right.Probability, want.Right.Probability, rounding)
	near(t, "left", got.Left.Probability, want.Left.Probability, rounding)
	near(t, "inside", run.Inside(), plain.Inside(), rounding)
	// The remainder's own times are of order 1000; a hundredth of them.
	near(t, "arrival", got.Right.MeanTime(), want.Right.MeanTime(), slow*10)
	if saved := run.Save(); saved.gear.Step != run.Step {
		t.Errorf("a saved state has step %g, the run %g", saved.gear.Step, run.Step)
	}
}

func TestLengthenRefuses(t *testing.T) {
	stepper := stepSetup().stepper(t)
	advance(stepper, 10)
	if step := stepper.Step; stepper.Lengthen() || stepper.Step != step {
		t.Error("a step that is as long as the packet allows was lengthened")
	}
}
