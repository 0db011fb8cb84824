package propagate

import (
	"math"
	"math/cmplx"
	"testing"

	"fluxtoll/potential"
)

// twin is a twin barrier between equal leads of height 0, with one of its poles.
type twin struct {
	id, source            string
	height, b1, well, b2  float64
	massWell, massBarrier float64
	pole                  complex128
}

// twins are poles E - i Gamma/2 of t(E). Those with an id were computed with
// mpmath from the closed Fabry-Perot form and confirmed as poles of the
// amplitude matched layer by layer (Muller's method, 30 digits); the
// parameters are from memory. The walls of 3, 5 and 6 were computed with
// mpmath (60 digits) by Newton's method on the amplitude matched face by face.
func twins() []twin {
	const (
		finesse = "B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984)"
		tsu     = "R. Tsu and L. Esaki, Appl. Phys. Lett. 22, 562 (1973)"
		romo    = "G. Garcia-Calderon, A. Rubio, R. Romo and J. Villavicencio, quant-ph/0011032"
		vurg    = "layers with the numbers of I. Vurgaftman, J. R. Meyer and L. R. Ram-Mohan, J. Appl. Phys. 89, 5815 (2001)"
	)
	const unit = 1 / (2 * 0.038099821109685837312) // m_e/hbar^2 in 1/(eV nm^2)
	const gaas, algaas = 0.067 * unit, 0.0919 * unit
	return []twin{
		{"dbl.sym1.pole", finesse, 2, 0.6, 3, 0.6, 1, 1, complex(0.2820018425927141696667, -0.02136923220028630535342)},
		{"dbl.sym2.pole", finesse, 2, 0.6, 3, 0.6, 1, 1, complex(1.149221131749763893634, -0.1608644352448052230210)},
		{"dbl.asym.pole", finesse, 2, 0.6, 3, 1.0, 1, 1, complex(0.2908979936181422867943, -0.01353447136893961754842)},
		{"dbl.narrow.pole", finesse, 2, 1.5, 3, 1.5, 1, 1, complex(0.3035004537561623070014, -0.0007839900210109126181310)},
		{"rtd.tsuesaki.1.pole", tsu, 0.5, 2, 5, 2, gaas, gaas, complex(0.1053721883303677108296, -0.003216065642076900005683)},
		{"rtd.tsuesaki.2.pole", tsu, 0.5, 2, 5, 2, gaas, gaas, complex(0.4007087677166158241208, -0.03339705304663739047172)},
		{"rtd.GCR.pole", romo, 0.23, 5, 5, 5, gaas, gaas, complex(0.08005426019449141985668, -0.0005139468508814825662093)},
		{"rtd.vurg.pole", vurg, 0.25929, 3, 6, 3, gaas, algaas, complex(0.06146839793535682940376, -0.001038384530547699926901)},
		{"walls of 3", finesse, 2, 3, 3, 3, 1, 1, complex(0.3042598643823464439069, -0.000003131128878550951011091)},
		{"walls of 5", finesse, 2, 5, 3, 5, 1, 1, complex(0.3042628953350189185038, -1.979379984017726756442e-9)},
		{"walls of 5 and 6", finesse, 2, 5, 3, 6, 1, 1, complex(0.3042628962695240326921, -1.014573399026347723863e-9)},
	}
}

// setup is a grid around the twin barrier; the planes stand close, so that also
// wide states fit.
func (w twin) setup() setup {
	s := stepSetup()
	s.entry = potential.Lead{Mass: w.massWell}
	s.exit = s.entry
	s.layers = []potential.Layer{
		{Thickness: w.b1, Shape: potential.Flat{Height: w.height}, Mass: w.massBarrier},
		{Thickness: w.well, Shape: potential.Flat{}, Mass: w.massWell},
		{Thickness: w.b2, Shape: potential.Flat{Height: w.height}, Mass: w.massBarrier},
	}
	k := math.Sqrt(2 * w.massWell * real(w.pole))
	s.low, s.high, s.phase = real(w.pole)/2, 2*real(w.pole), 4
	s.edge.First = 3 / k
	s.extent = Extent{Left: -3 / k, PlaneLeft: -3 / k, PlaneRight: w.b1 + w.well + w.b2 + 3/k, Right: w.b1 + w.well + w.b2 + 3/k}
	return s
}

// Poles of twin barriers, to 1e-8 of their width.
func TestEigenstatesArePublishedPoles(t *testing.T) {
	for _, w := range twins() {
		m := w.setup().mesh(t)
		u, err := m.Eigenstate(w.pole * complex(1+1e-5, 0))
		if err != nil {
			t.Errorf("%s: %v", w.id, err)
			continue
		}
		width := -2 * imag(w.pole)
		// Rounding in the elements' matrices, whose entries are some hundred
		// times the energy, moves an energy by about 1e-13 of it; but not the width.
		tol := 1e-8*width + 1e-12*real(w.pole)
		near(t, w.id+" energy", real(u.Energy), real(w.pole), tol)
		near(t, w.id+" Im energy", imag(u.Energy), imag(w.pole), tol)
		near(t, w.id+" width/width", u.Width()/width, 1, 1e-8)
		if !(u.Residual < 1e-10*w.height) {
			t.Errorf("%s: residual %g", w.id, u.Residual)
		}
	}
}

// An unequal twin barrier leaks in the ratio in which it does in the WKB limit
// of thick walls: exp(2 kappa (b2-b1)), exact for equal heights up to
// exp(-2 kappa b).
func TestEigenstateLeaksThroughTheThinnerWall(t *testing.T) {
	list := twins()
	w := list[len(list)-1]
	u, err := w.setup().mesh(t).Eigenstate(w.pole)
	if err != nil {
		t.Fatal(err)
	}
	kappa := math.Sqrt(2 * w.massBarrier * (w.height - real(w.pole)))
	near(t, "flow ratio", u.FlowLeft()/u.FlowRight()/math.Exp(2*kappa*(w.b2-w.b1)), 1, 1e-6)
}

// A bound state of the finite square well, depth 2, width 3, m = 1: the even
// solution of z tan z = sqrt(z0^2 - z^2), z = k a/2 (L. I. Schiff, Quantum
// Mechanics, sec. 9; the root by bisection here).
func TestEigenstateOfABoundState(t *testing.T) {
	const depth, width = 2.0, 3.0
	z0 := math.Sqrt(2*depth) * width / 2
	low, high := 0.0, math.Pi/2
	for range 200 {
		if z := (low + high) / 2; z*math.Tan(z) < math.Sqrt(z0*z0-z*z) {
			low = z
		} else {
			high = z
		}
	}
	want := 2*low*low/(width*width) - depth
	s := stepSetup()
	s.exit.Height, s.layers = 0, flatLayer(width, -depth, 1)
	s.extent = Extent{Left: -12, PlaneLeft: -12, PlaneRight: 15, Right: 15}
	u, err := s.mesh(t).Eigenstate(complex(want+0.01, -1e-3))
	if err != nil {
		t.Fatal(err)
	}
	near(t, "energy", real(u.Energy), want, 1e-12)
	near(t, "Im energy", imag(u.Energy), 0, 1e-13)
	near(t, "width", u.Width(), 0, 1e-13)
}

// On a mesh with everything - losses, point potentials, varying elements - the
// eigenpair satisfies its equation, carried out by a step of the stepper:
// psi is multiplied by the approximant of exp(-i Energy dt), and continuity
// gives the width that the energy has.
func TestEigenstateIsCarriedByTheStep(t *testing.T) {
	s := mixedSetup()
	s.phase = 5
	s.layers[1].Shape = potential.Flat{Height: 4}
	s.layers[5].Shape = potential.Hump{Height: 5, Width: 0.6}
	stepper := s.stepper(t)
	u, err := stepper.Mesh.Eigenstate(complex(1.3, -0.01))
	if err != nil {
		t.Fatal(err)
	}
	near(t, "width", u.Width()/(-2*imag(u.Energy)), 1, 1e-10) // rounding 1e-14 of the energy
	copy(stepper.psi.all, u.all)
	stepper.Advance()
	want := stepper.Pade.Step(complex(0, -s.dt) * (u.Energy - complex(s.origin, 0)))
	worst := 0.0
	for i, v := range u.all {
		worst = math.Max(worst, cmplx.Abs(stepper.psi.all[i]-want*v))
	}
	near(t, "step", worst, 0, 1e-11)
}

func TestEigenstateOfNothing(t *testing.T) {
	m := barrierSetup().mesh(t)
	for _, guess := range []complex128{cmplx.NaN(), cmplx.Inf()} {
		if u, err := m.Eigenstate(guess); err == nil {
			t.Errorf("guess %v: state at %v", guess, u.Energy)
		}
	}
}
