package propagate

import (
	"fmt"
	"math"
	"math/cmplx"
	"testing"

	"fluxtoll/potential"
)

// A recorded run is the unrecorded one bit for bit, also where it goes back
// and on again; and so is the record.
func TestRecordChangesNothing(t *testing.T) {
	finish := func(record, back bool) (*Run, *Record) {
		run := NewRun(mixedSetup().stepper(t), Ending{Steps: 400, Time: 1e9, Slow: func(l *Ledger, _, _ float64) bool { return l.Steps > 200 }})
		var r *Record
		if record {
			r = run.Record()
		}
		var at State
		for n := 1; run.Next() == Running; n++ {
			switch {
			case n == 150:
				at = run.Save()
			case n == 260 && back:
				run.Restore(at)
			}
		}
		return run, r
	}
	plain, _ := finish(false, false)
	watched, record := finish(true, false)
	again, repeated := finish(true, true)
	for _, run := range []*Run{watched, again} {
		if got, want := fmt.Sprint(*run.Ledger()), fmt.Sprint(*plain.Ledger()); got != want {
			t.Errorf("recorded\n%s\nplain\n%s", got, want)
		}
		for i, v := range run.psi.all {
			if v != plain.psi.all[i] {
				t.Fatalf("psi[%d] = %v, plain %v", i, v, plain.psi.all[i])
			}
		}
	}
	if record.Steps != 400 || record.Missed != 0 {
		t.Errorf("%d steps recorded, %d missed", record.Steps, record.Missed)
	}
	if got, want := fmt.Sprint(repeated.Stretches), fmt.Sprint(record.Stretches); got != want {
		t.Error("the record of a run that went back differs")
	}
	if len(record.Stretches) < 2 {
		t.Errorf("%d stretches: the step never grew", len(record.Stretches))
	}
	total := 0.0
	for _, p := range record.Stretches {
		for _, q := range p.Right.Flow {
			total += q * p.Step
		}
		if len(p.Left.Psi) != len(p.Left.Flow)+1 {
			t.Errorf("%d samples of %d steps", len(p.Left.Psi), len(p.Left.Flow))
		}
	}
	near(t, "sum of the flow", total, plain.Ledger().Right.Flux(), 1e-14) // rounding of 400 terms
}

// The amplitude of one energy is that of the closed form,
//
//	a(E) = phi(k) 2 sqrt(k q)/(k+q)/sqrt(2 pi k q) exp(i k (X0-x0) + i q (X-X0)),
//
// on a step at X0 = 0 (Landau and Lifshitz, sec. 25, problem 1; from memory),
// in modulus and phase, for every member and steps in which the phase of the
// step itself is far off; and so is its time, (X0-x0)/k + (X-X0)/q.
func TestComponentOfAStep(t *testing.T) {
	for _, c := range []struct {
		pade int
		dt   float64
	}{{2, 0.3}, {3, 0.5}, {5, 0.7}} {
		s := stepSetup()
		s.pade, s.dt = c.pade, c.dt
		run := NewRun(s.stepper(t), Ending{Steps: 5000, Time: 400, Settled: settledBelow(1e-13)})
		record := run.Record()
		if status := run.Finish(t.Context()); status == Interrupted {
			t.Fatal(status)
		}
		for _, k := range []float64{1.75, 1.9, 2, 2.15, 2.25} {
			e := k * k / 2
			q := math.Sqrt(2 * (e - 1))
			got := record.Reader(true).At(e)
			d := (k - s.packet.K0) * s.packet.Length
			phi := math.Pow(2/math.Pi, 0.25) * math.Sqrt(s.packet.Length) * math.Exp(-d*d)
			want := cmplx.Rect(phi*2/(k+q)/math.Sqrt(2*math.Pi), -k*s.packet.Centre+q*s.extent.PlaneRight)
			// Tails of the packet 8 lengths from its centre are cut off:
			// exp(-16) of the peak.
			tol := 3e-7*phi + got.Open
			if off := cmplx.Abs(got.Amplitude - want); !(off <= tol) {
				t.Errorf("member %d, dt %g, k %g: %v, want %v, off by %.2g", c.pade, c.dt, k, got.Amplitude, want, off)
			}
			near(t, fmt.Sprintf("member %d, time at k = %g", c.pade, k), got.Time, -s.packet.Centre/k+s.extent.PlaneRight/q, 1e-4)
		}
	}
}

// Where the step grows, an amplitude stays what it was within Open.
func TestComponentAcrossStretches(t *testing.T) {
	grown := func(slow bool) *Record {
		s := stepSetup()
		s.packet.K0, s.low, s.origin, s.pade, s.dt = 1.6, 0.4, 1.3, 4, 0.5 // straddles the step
		e := Ending{Steps: 4000, Time: 700}
		if slow {
			e.Slow = func(l *Ledger, remaining, _ float64) bool { return remaining < 1e-4 }
		}
		run := NewRun(s.stepper(t), e)
		record := run.Record()
		run.Finish(t.Context())
		return record
	}
	one, many := grown(false), grown(true)
	if len(one.Stretches) != 1 || len(many.Stretches) < 3 {
		t.Fatalf("%d and %d stretches", len(one.Stretches), len(many.Stretches))
	}
	for _, e := range []float64{0.9, 1.1, 1.28, 1.5, 1.8} {
		for _, right := range []bool{false, true} {
			a, b := one.Reader(right).At(e), many.Reader(right).At(e)
			if off := cmplx.Abs(a.Amplitude - b.Amplitude); !(off <= a.Open+b.Open) || !(b.Open < 0.02) {
				t.Errorf("energy %g, right %v: off by %.2g, open %.2g and %.2g", e, right, off, a.Open, b.Open)
			}
		}
	}
}

// Energy inverts Phase, beyond a turn too.
func TestEnergyInvertsPhase(t *testing.T) {
	for _, m := range members() {
		p, err := NewPade(m)
		if err != nil {
			t.Fatal(err)
		}
		for _, part := range []float64{-0.9, -0.3, 0, 1e-9, 0.2, 0.7, 0.95} {
			theta := part * math.Pi * float64(m)
			got, _ := p.Phase(p.Energy(theta))
			near(t, fmt.Sprintf("member %d, phase", m), got, theta, 1e-13*(1+math.Abs(theta))*100)
		}
	}
}

// The moments of what states send are those of the ledger had the run gone on:
// the steps after the tail's moment, summed one by one.
func TestTailMoments(t *testing.T) {
	s := barrierSetup()
	s.layers = []potential.Layer{s.layers[0], {Thickness: 6, Shape: potential.Flat{}, Mass: 1}, s.layers[0]} // a cavity between two barriers
	s.packet.K0, s.low, s.origin = 1.2, 0.05, 0.8
	stepper := s.stepper(t)
	var states []*Eigenstate
	for _, guess := range []complex128{0.39 - 0.002i, 0.87 - 0.009i, 1.54 - 0.03i} {
		u, err := stepper.Mesh.Eigenstate(guess)
		if err != nil {
			t.Fatal(err)
		}
		states = append(states, u)
	}
	run := NewRun(stepper, Ending{Steps: 2000, Time: 1e9, States: states, Settled: settledBelow(1e-7)})
	if status := run.Finish(t.Context()); status != Settled || run.Tail() == nil {
		t.Fatalf("ended with %v", status)
	}
	tail, start := run.Tail(), run.Ledger().Time
	want := [4]float64{}
	for range 9000 {
		run.Advance()
		l := run.Ledger()
		d := l.Time - run.Step/2 - start
		for n, q := 0, l.FlowRight*run.Step; n < 4; n++ {
			want[n] += q
			q *= d
		}
	}
	got := tail.TailMoments(true)
	for n := range got {
		// What the states do not span, 1e-7, interferes at its root.
		if !(math.Abs(got[n]/want[n]-1) < 1e-3) {
			t.Errorf("moment %d: %.10g, the steps say %.10g", n, got[n], want[n])
		}
	}
}
