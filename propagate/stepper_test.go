package propagate

import (
	"fmt"
	"math"
	"math/cmplx"
	"slices"
	"testing"
)

// Rounding of the norm: roundingPerSolve bounds what a solve does to it in the
// mean (a quarter of that where steps are short and solves many), roundingOfSums what a sum over some thousand nodes does at random.
const (
	roundingPerSolve = 0x1p-52
	roundingOfSums   = 8e-15
)

// eachMember runs a test for every member of the family.
func eachMember(t *testing.T, test func(t *testing.T, s setup)) {
	for _, m := range members() {
		t.Run(fmt.Sprintf("member=%d", m), func(t *testing.T) {
			s := freeSetup()
			s.pade = m
			test(t, s)
		})
	}
}

// gap is the norm of the difference of two waves on the real axis of a mesh.
func gap(m *Mesh, a, b wave) float64 {
	d := newWave(m)
	for i := range d.all {
		d.all[i] = a.all[i] - b.all[i]
	}
	return math.Sqrt(m.norm(m.real0, m.real1, d))
}

func (w wave) conjugate() {
	for i, v := range w.all {
		w.all[i] = cmplx.Conj(v)
	}
}

// closed is the set-up in a box so large that within closedTime nothing above
// rounding comes to an edge: at both ends 16 deviations and more.
func (s setup) closed() setup {
	s.extent = Extent{Left: -160, PlaneLeft: -160, PlaneRight: 120, Right: 120}
	return s
}

const closedTime = 24

func TestNormIsKept(t *testing.T) {
	eachMember(t, func(t *testing.T, s setup) {
		for _, dt := range []float64{0.05, 0.5, 4} {
			s.dt = dt
			stepper := s.closed().stepper(t)
			advance(stepper, closedTime)
			m := stepper.Mesh
			solves := float64(stepper.Ledger().Steps * s.pade)
			near(t, "norm", m.norm(m.real0, m.real1, stepper.psi), 1, roundingOfSums+roundingPerSolve*solves)
		}
	})
}

func TestTimeReversal(t *testing.T) {
	eachMember(t, func(t *testing.T, s setup) {
		s.layers = barrierSetup().layers
		// So far away that its cut tail meets no jump, which would send waves
		// of any speed to the edges.
		s.dt, s.packet.Centre, s.packet.Length = 0.25, -50, 3.5
		stepper := s.closed().stepper(t)
		start := stepper.Save()
		advance(stepper, closedTime)
		if gap(stepper.Mesh, stepper.psi, wave{all: start.psi}) < 0.5 {
			t.Fatal("the packet has not moved")
		}
		stepper.psi.conjugate()
		advance(stepper, closedTime)
		stepper.psi.conjugate()
		// A thousand solves, each of which rounds psi by about 1e-15.
		near(t, "distance from the start", gap(stepper.Mesh, stepper.psi, wave{all: start.psi}), 0, 5e-12)
	})
}

func TestLinearity(t *testing.T) {
	eachMember(t, func(t *testing.T, s setup) {
		s.layers = mixedSetup().layers
		a, b, both := s.stepper(t), s.stepper(t), s.stepper(t)
		other := Packet{Centre: -20, Length: 3, K0: -1}
		if err := other.fill(b.Mesh, b.psi, b.nodal); err != nil {
			t.Fatal(err)
		}
		for i := range both.psi.all {
			both.psi.all[i] = (0.3+1i)*a.psi.all[i] - 2*b.psi.all[i]
		}
		for _, stepper := range []*Stepper{a, b, both} {
			advance(stepper, 20)
		}
		for i := range both.psi.all {
			a.psi.all[i] = (0.3+1i)*a.psi.all[i] - 2*b.psi.all[i]
		}
		near(t, "distance", distance(both.psi.all, a.psi.all), 0, 1e-12)
	})
}

// A packet shifted by whole elements does what the first did, shifted.
func TestTranslation(t *testing.T) {
	eachMember(t, func(t *testing.T, s setup) {
		s = s.closed()
		here := s.stepper(t)
		m := here.Mesh
		const shift = 5
		h := m.X[m.faces[m.left+shift]] - m.X[m.faces[m.left]]
		s.packet.Centre += h
		there := s.stepper(t)
		advance(here, 8)
		advance(there, 8)
		from, _ := m.PlaneNodes()
		psi, moved := here.Psi(), there.Psi()
		n := m.faces[m.left+shift] - from
		to := from
		for m.X[to+n] < -1 {
			to++
		}
		near(t, "distance", distance(psi[from:to], moved[from+n:to+n]), 0, 1e-12)
		if distance(psi[from:to], make([]complex128, to-from)) < 0.1 {
			t.Error("the packet does not lie where it is compared")
		}
	})
}

// What passes where does not depend on the energy from which phases are
// counted, for any member and step.
func TestOriginChangesNoProbability(t *testing.T) {
	eachMember(t, func(t *testing.T, s setup) {
		s.layers, s.exit, s.dt = mixedSetup().layers, mixedSetup().exit, 0.25
		want := s.finished(t, 2000).Ledger()
		for _, origin := range []float64{-1, 0, 5} {
			s.origin = origin
			got := s.finished(t, 2000).Ledger()
			const tol = 1e-11 // what was left inside when each of them stopped, and rounding
			near(t, "left", got.Left.Probability, want.Left.Probability, tol)
			near(t, "right", got.Right.Probability, want.Right.Probability, tol)
			near(t, "lost", got.TotalLost(), want.TotalLost(), tol)
		}
	})
}

// Times depend on the origin by no more than the error of the step.
func TestOriginMovesTimesByTheStepsErrorOnly(t *testing.T) {
	eachMember(t, func(t *testing.T, s setup) {
		s.layers = barrierSetup().layers
		s.dt = map[int]float64{1: 0.02, 2: 0.1, 3: 0.2, 4: 0.3, 5: 0.4}[s.pade]
		want := s.finished(t, 500).Ledger()
		for _, origin := range []float64{1, 3} {
			s.origin = origin
			got := s.finished(t, 500).Ledger()
			tol := 2*stepsError(t, s, origin) + 1e-10
			near(t, "right", got.Right.MeanTime()/want.Right.MeanTime(), 1, tol)
			near(t, "left", got.Left.MeanTime()/want.Left.MeanTime(), 1, tol)
			near(t, "dwell", got.TotalDwell()/want.TotalDwell(), 1, tol)
		}
	})
}

// stepsError is the largest relative error of a time over the energies that
// hold all but 1e-9 of the packet.
func stepsError(t *testing.T, s setup, origin float64) float64 {
	p := pade(t, s.pade)
	worst := 0.0
	for _, d := range []float64{-6, 6} {
		k := s.packet.K0 + d/(2*s.packet.Length)
		worst = max(worst, math.Abs(p.SlopeError((k*k/2-origin)*s.dt)))
	}
	return worst
}

func TestRestoreRepeatsBitForBit(t *testing.T) {
	eachMember(t, func(t *testing.T, s setup) {
		s.layers = mixedSetup().layers
		stepper := s.stepper(t)
		advance(stepper, 10)
		saved := stepper.Save()
		advance(stepper, 20)
		want := stepper.Save()
		stepper.Restore(saved)
		if stepper.Ledger().Time != 10 {
			t.Fatalf("restored to time %g", stepper.Ledger().Time)
		}
		advance(stepper, 20)
		got := stepper.Save()
		if !slices.Equal(got.psi, want.psi) {
			t.Error("psi differs")
		}
		if a, b := fmt.Sprintf("%x", got.ledger), fmt.Sprintf("%x", want.ledger); a != b {
			t.Errorf("ledgers differ:\n%s\n%s", a, b)
		}
		if got.Bytes() < 16*stepper.Mesh.Nodes() {
			t.Errorf("a state of %d nodes claims %d bytes", stepper.Mesh.Nodes(), got.Bytes())
		}
	})
}

func TestStepsDoNotAllocate(t *testing.T) {
	eachMember(t, func(t *testing.T, s setup) {
		s.layers = mixedSetup().layers
		stepper := s.stepper(t)
		run := NewRun(stepper, Ending{Steps: 1 << 30, Time: math.Inf(1),
			Settled: func(*Ledger, float64, float64) bool { return false }})
		for what, f := range map[string]func(){
			"Advance": stepper.Advance, "Next": func() { run.Next() },
			"Inside": func() { stepper.Inside() }, "Psi": func() { stepper.Psi() },
		} {
			if n := testing.AllocsPerRun(20, f); n != 0 {
				t.Errorf("%s allocates %v times", what, n)
			}
		}
	})
}

// freeGaussian is the packet at time t in free space of mass 1,
//
//	(2 pi s^2)^(-1/4) (1+i tau)^(-1/2) exp(-(x-x0-k0 t)^2/(4 s^2 (1+i tau)) + i k0 (x-x0) - i k0^2 t/2),
//
// tau = t/(2 s^2) (C. Cohen-Tannoudji, B. Diu and F. Laloe, Quantum Mechanics,
// complement G_I; from memory).
func (p Packet) freeGaussian(x, t float64) complex128 {
	spread := complex(1, t/(2*p.Length*p.Length))
	d := x - p.Centre
	moved := complex(d-p.K0*t, 0)
	norm := complex(math.Pow(2*math.Pi*p.Length*p.Length, -0.25), 0)
	return norm / cmplx.Sqrt(spread) *
		cmplx.Exp(-moved*moved/(complex(4*p.Length*p.Length, 0)*spread)+complex(0, p.K0*d-p.K0*p.K0*t/2))
}

// Case "free.psi": the value was computed with mpmath and checked by Fourier
// quadrature; it checks freeGaussian, by which the test below goes.
func TestFreeGaussianItself(t *testing.T) {
	p := Packet{Centre: -10, Length: 2, K0: 3}
	closeTo(t, "psi", p.freeGaussian(12.5, 8), 0.3401693647760519346799-0.08263718570411144374565i, 1e-15)
}

func TestFreeGaussianAgainstClosedForm(t *testing.T) {
	eachMember(t, func(t *testing.T, s setup) {
		s.packet = Packet{Centre: -10, Length: 2, K0: 3}
		s.high = 30 // resolves k to 7.7: 19 deviations
		s.extent = Extent{Left: -70, PlaneLeft: -70, PlaneRight: 12.5, Right: 90}
		s.origin = 4.5
		s.dt = map[int]float64{1: 4e-3, 2: 0.02, 3: 0.05, 4: 0.1, 5: 0.1}[s.pade]
		stepper := s.stepper(t)
		advance(stepper, 8)
		psi, worst := stepper.Psi(), 0.0
		from, to := stepper.Mesh.RealNodes()
		for i := from; i < to; i++ {
			want := s.packet.freeGaussian(stepper.Mesh.X[i], 8) * cmplx.Exp(complex(0, s.origin*8))
			worst = max(worst, cmplx.Abs(psi[i]-want))
		}
		// The phase error of the step, t times the mean of |E-E0|^(2m+1) dt^(2m)
		// over its constant; rounding and the grid below.
		tol := map[int]float64{1: 4e-3, 2: 1e-5, 3: 2e-6, 4: 1e-6, 5: 1e-9}[s.pade]
		if !(worst < tol) {
			t.Errorf("psi is off by %g, at most %g expected", worst, tol)
		}
		_, plane := stepper.Mesh.PlaneNodes()
		closeTo(t, "psi(12.5, 8)", psi[plane], (0.3401693647760519346799-0.08263718570411144374565i)*cmplx.Exp(36i), tol)
	})
}

func TestStepperRefuses(t *testing.T) {
	s := freeSetup()
	m := s.mesh(t)
	for _, dt := range []float64{0, -1, math.NaN()} {
		if _, err := NewStepper(m, pade(t, 1), dt, 0, s.packet); err == nil {
			t.Errorf("time step %g was accepted", dt)
		}
	}
	for _, p := range []Packet{{Centre: 1e6, Length: 1}, {Centre: -40, Length: 1e-9, K0: 1}} {
		if _, err := NewStepper(m, pade(t, 1), 0.1, 0, p); err == nil {
			t.Errorf("packet %+v was accepted", p)
		}
	}
}

func TestFillIsNormalised(t *testing.T) {
	s := mixedSetup()
	m := s.mesh(t)
	psi := make([]complex128, m.Nodes())
	if err := s.packet.Fill(m, psi); err != nil {
		t.Fatal(err)
	}
	from, to := m.RealNodes()
	for i, got := range psi {
		want := s.packet.freeGaussian(m.X[i], 0)
		if i <= from || i >= to-1 {
			want = 0
		}
		closeTo(t, "psi", got, want, 1e-10) // the grid represents the packet to this
	}
}
