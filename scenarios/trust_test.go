package scenarios

import (
	"context"
	"encoding/json"
	"fmt"
	"math"
	"strings"
	"testing"
)

// packetOn compiles a scenario in natural units with a packet of mean wave
// number 1.
func packetOn(t *testing.T, structure string, length float64) *Scenario {
	t.Helper()
	text := fmt.Sprintf("units = \"natural\"\n%s\n[packet]\nenergy = 0.5\nlength = %.17g\n", structure, length)
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

func delta(strength float64) string {
	return fmt.Sprintf("[[layer]]\nshape = \"delta\"\nstrength = %.17g\n", strength)
}

// foundLength is the length from which on a quantity is within a fraction.
func foundLength(t *testing.T, s *Scenario, name string, within float64) float64 {
	t.Helper()
	search, err := newTrustSearch(t.Context(), s, within, nil)
	if err != nil {
		t.Fatal(err)
	}
	of, err := search.asked([]string{name})
	if err != nil {
		t.Fatal(err)
	}
	a, err := search.outermost(of[0])
	if err != nil {
		t.Fatal(err)
	}
	if a.reach != ReachedFrom || !(a.error < 1e-4) {
		t.Fatalf("%s within %g: %v with error %g", name, within, a.reach, a.error)
	}
	return math.Exp(a.x)
}

// closeTo fails unless got is want to a relative error.
func closeTo(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Abs(want)) {
		t.Errorf("%s: %.12g, want %.12g to %.1g", what, got, want, tol)
	}
}

// curvature checks a closed form of f”/f at k = 1 against differences and
// returns it.
func curvature(t *testing.T, f func(k float64) float64, closed float64) float64 {
	t.Helper()
	const h = 1e-3 // error of the fourth order h^2 and of rounding 1e-10, both times some ten
	closeTo(t, "closed form of a second derivative", (f(1+h)-2*f(1)+f(1-h))/(h*h)/f(1), closed, 1e-3)
	return closed
}

// TestTrustOfLongPackets: for a narrow spectrum of standard deviation
// s = 1/(2 length) the average of f exceeds f(k0) by s^2 f”(k0)/2 + O(s^4)
// (Taylor), so the deviation is w from the length sqrt(|f”/f|/(8 w)) on, but
// for a relative O(w).
func TestTrustOfLongPackets(t *testing.T) {
	const (
		w   = 1e-6
		tol = 20 * w // the next order of Taylor; its coefficient is below that
	)
	// Step (L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed.,
	// paragraph 25, problem 1; from memory): R = r^2, r = (k-q)/(k+q),
	// q = sqrt(k^2-2V); r' = -2r/q, so R”/R = 16/q^2 + 4k/q^3.
	const v = 0.3
	q := math.Sqrt(1 - 2*v)
	reflection := func(k float64) float64 {
		q := math.Sqrt(k*k - 2*v)
		return (k - q) * (k - q) / ((k + q) * (k + q))
	}
	step, r := packetOn(t, fmt.Sprintf("[exit]\nheight = %g", v), 20), reflection(1)
	c := curvature(t, reflection, 16/(q*q)+4/(q*q*q))
	closeTo(t, "step, reflected", foundLength(t, step, "reflected", w), math.Sqrt(c/(8*w)), tol)
	closeTo(t, "step, transmitted", foundLength(t, step, "transmitted", w), math.Sqrt(c*r/(1-r)/(8*w)), tol)

	// Delta of strength a (D. J. Griffiths, Introduction to Quantum Mechanics,
	// 2nd ed., section 2.5.2; from memory): t = k/(k + i a), T = k^2/(k^2+a^2),
	// group delay d(arg t)/dE = a/(k (k^2+a^2)).
	for _, a := range []float64{0.5, 1.5, 3} {
		d, s := 1+a*a, packetOn(t, delta(a), 20)
		ct := curvature(t, func(k float64) float64 { return k * k / (k*k + a*a) }, 2*a*a*(a*a-3)/(d*d))
		closeTo(t, "delta, transmitted", foundLength(t, s, "transmitted", w), math.Sqrt(math.Abs(ct)/(8*w)), tol)
		// The mean delay is the ratio of the averages of T times delay and of T.
		cd := curvature(t, func(k float64) float64 { return a * k / ((k*k + a*a) * (k*k + a*a)) }, -12/d+24/(d*d))
		closeTo(t, "delta, group delay", foundLength(t, s, "group_delay_transmitted", w), math.Sqrt(math.Abs(cd-ct)/(8*w)), tol)
	}
}

// faddeeva is w(z) = exp(-z^2) erfc(-iz) for Im z > 0 and |z| of some units, by
// Laplace's continued fraction (W. Gautschi, SIAM J. Numer. Anal. 7, 187
// (1970)).
func faddeeva(z complex128) complex128 {
	f := z
	for n := 60; n > 0; n-- {
		f = z - complex(float64(n)/2, 0)/f
	}
	return complex(0, 1/math.SqrtPi) / f
}

// deltaOff is the relative deviation of the transmission of a delta of
// strength a, averaged over a packet of mean wave number 1: with the Voigt
// function (NIST Digital Library of Mathematical Functions, 7.19) the average
// of R = a^2/(k^2+a^2) is a sqrt(pi/2)/s Re w((1+ia)/(s sqrt2)),
// s = 1/(2 length), but for k < 0.
func deltaOff(a, length float64) float64 {
	s := 1 / (2 * length)
	r := a * math.Sqrt(math.Pi/2) / s * real(faddeeva(complex(1, a)/complex(s*math.Sqrt2, 0)))
	return (1-r)*(1+a*a) - 1
}

// bisect finds the zero of f between a and b.
func bisect(f func(float64) float64, a, b float64) float64 {
	for range 200 {
		if c := (a + b) / 2; (f(c) > 0) == (f(a) > 0) {
			a = c
		} else {
			b = c
		}
	}
	return b
}

func TestTrustOfDelta(t *testing.T) {
	for _, a := range []float64{0.5, 0.8, 1.2} {
		for _, w := range []float64{0.002, 0.005} {
			want := bisect(func(l float64) float64 { return math.Abs(deltaOff(a, l)) - w }, 3, 100)
			// The quadrature's error is 1e-6 w, of w; the length's half of that.
			closeTo(t, fmt.Sprintf("delta %g within %g", a, w), foundLength(t, packetOn(t, delta(a), 11), "transmitted", w), want, 1e-6)
		}
	}
}

// TestTrustSeesHumps: just below a^2 = 3, where T” is 0, the deviation of a
// delta rises, falls again, and rises with the other sign as packets get
// shorter. A percentage that this hump exceeds by next to nothing is crossed
// there twice within a tenth of the search's step, and the outermost crossing
// counts; one just above the hump is crossed far inside.
func TestTrustSeesHumps(t *testing.T) {
	const a, shy = 1.72, 1e-4
	off := func(x float64) float64 { return math.Abs(deltaOff(a, math.Exp(x))) }
	top := summitOf(off, math.Log(4.5), math.Log(30))
	height := off(top)
	turn := bisect(func(x float64) float64 { return deltaOff(a, math.Exp(x)) }, math.Log(3), top)
	inner := bisect(func(x float64) float64 { return off(x) - height*(1+shy) }, math.Log(3), turn)
	outer := bisect(func(x float64) float64 { return off(x) - height*(1-shy) }, top, math.Log(30))
	if d := outer - top; !(d > 1e-4 && d < trustStep/20) {
		t.Fatalf("the crossing is %g off the top, and is meant to be close", d)
	}
	for _, length := range []float64{20, 21, 22, 23} { // each shifts the grid
		s := packetOn(t, delta(a), length)
		// The quadrature's error is up to 1e-6 of the height, a hundredth of
		// what the top stands out.
		got := math.Log(foundLength(t, s, "transmitted", height*(1-shy)))
		closeTo(t, "on the hump", got-top, outer-top, 0.01)
		closeTo(t, "above the hump", foundLength(t, s, "transmitted", height*(1+shy)), math.Exp(inner), 1e-5)
	}
}

// summitOf is where f, which rises and then falls, is highest.
func summitOf(f func(float64) float64, a, b float64) float64 {
	for range 60 {
		if c, d := a+(b-a)/3, b-(b-a)/3; f(c) < f(d) {
			a = c
		} else {
			b = d
		}
	}
	return (a + b) / 2
}

// TestTrustAtResonance: two deltas of strength a at the distance
// d = atan(a) + pi/2 transmit everything at k = 1, since
// 1/T = 1 + 4 a^2 (k^2+a^2)/k^4 cos^2(k d - atan(a/k)) (multiple reflection of
// the single delta's amplitudes). T falls to half within
// g = 1/(2 a sqrt(1+a^2) (d + a/(1+a^2))) in k, and the width is 2 g in
// energy: the length is v0/(width sqrt(w)) for small w, and for larger ones as
// the Voigt function of the Lorentzian says.
func TestTrustAtResonance(t *testing.T) {
	for _, a := range []float64{10, 20, 40} {
		d := math.Atan(a) + math.Pi/2
		g := 1 / (2 * a * math.Sqrt(1+a*a) * (d + a/(1+a*a)))
		s := packetOn(t, fmt.Sprintf("%s[[layer]]\nthickness = %.17g\nheight = 0\n%s", delta(a), d, delta(a)), 10/g)
		const small = 1e-5
		closeTo(t, "resonance, small", foundLength(t, s, "transmitted", small), 1/(2*g*math.Sqrt(small)), 20*small+20*g*g)
		for _, w := range []float64{0.03, 0.1, 0.3} {
			ratio := bisect(func(ratio float64) float64 { // width of the spectrum over g
				x := 1 / (ratio * math.Sqrt2)
				return 1 - math.Sqrt(math.Pi)*x*math.Exp(x*x)*math.Erfc(x) - w
			}, 0.1, 5)
			// The line is a Lorentzian but for a relative O(g) a few widths off.
			closeTo(t, fmt.Sprintf("resonance %g within %g", a, w), foundLength(t, s, "transmitted", w), 1/(2*g*ratio), 2*g)
		}
	}
}

// TestTrustOfZero: where the plane-wave number is zero the percentage is of
// the whole packet, or of its passage.
func TestTrustOfZero(t *testing.T) {
	for _, c := range []struct {
		structure, name string
		of              PercentOf
		reach           Reach
	}{
		{"[exit]\nheight = 2", "transmitted", OfPacket, ReachedEverywhere},
		{"", "reflected", OfPacket, ReachedEverywhere},
		{"", "transmitted", OfPlaneWave, ReachedEverywhere},
		{"[exit]\nheight = 0.2", "group_delay_transmitted", OfPassage, ReachedEverywhere},
		{"[exit]\nheight = 2", "group_delay_reflected", OfPlaneWave, ReachedFrom},
	} {
		r, err := Trustworthy(t.Context(), packetOn(t, c.structure, 12), TrustRequest{Within: 1, Of: []string{c.name}}, nil)
		if err != nil {
			t.Fatal(err)
		}
		for _, q := range r.Quantities {
			if q.Name == c.name && (q.PercentOf != c.of || q.Reached != c.reach) {
				t.Errorf("%q, %s: per cent of the %s, reached %s, want %s and %s", c.structure, c.name, q.PercentOf, q.Reached, c.of, c.reach)
			}
		}
		if r.Verdict != Confirmed || len(r.Runs) < 2 {
			t.Errorf("%q, %s: %s after %d runs", c.structure, c.name, r.Verdict, len(r.Runs))
		}
	}
}

// TestTrustConfirms: the packets stand to the percentage as the averages say.
func TestTrustConfirms(t *testing.T) {
	const a = 0.8
	r, err := Trustworthy(t.Context(), packetOn(t, delta(a), 10), TrustRequest{Within: 0.3}, nil)
	if err != nil {
		t.Fatal(err)
	}
	if r.Verdict != Confirmed || len(r.Runs) != 4 {
		t.Fatalf("%s after %d runs, want 4 that confirm", r.Verdict, len(r.Runs))
	}
	for i, want := range []Standing{StandsWithin, StandsBeyond, StandsAtLimit, StandsWithin} {
		run := r.Runs[i]
		if run.Found != want {
			t.Errorf("run %q found %q, want %q", run.At, run.Found, want)
		}
		// The packet against the closed form, within its own budget.
		if off := 100 * deltaOff(a, run.Length); !(math.Abs(*run.OffPacket-off) <= *run.OffBudget) {
			t.Errorf("run %q is off by %.12g, want %.12g to %g", run.At, *run.OffPacket, off, *run.OffBudget)
		}
	}
}

// TestTrustNotReached: at a resonance far narrower than any packet searched
// there is no answer, and the verdict says so.
func TestTrustNotReached(t *testing.T) {
	const a = 40.0
	d := math.Atan(a) + math.Pi/2
	s := packetOn(t, fmt.Sprintf("%s[[layer]]\nthickness = %.17g\nheight = 0\n%s", delta(a), d, delta(a)), 6)
	r, err := Trustworthy(t.Context(), s, TrustRequest{Within: 0.01}, nil)
	if err != nil {
		t.Fatal(err)
	}
	if r.Verdict != Unreached || len(r.Runs) != 1 {
		t.Errorf("%s after %d runs", r.Verdict, len(r.Runs))
	}
	for _, q := range r.Quantities {
		if q.Reached != ReachedNowhere || q.OffLongest == nil || !(math.Abs(*q.OffLongest) > 0.01) {
			t.Errorf("%s is reached %s", q.Name, q.Reached)
		}
	}
}

// TestTrustInterrupted: what was found stands, and the document can be
// written.
func TestTrustInterrupted(t *testing.T) {
	s := packetOn(t, delta(1), 10)
	for _, after := range []int{3, 40} {
		ctx, cancel := context.WithCancel(t.Context())
		r, err := Trustworthy(ctx, s, TrustRequest{Within: 1}, func(p TrustProgress) {
			if p.Averages == after {
				cancel()
			}
		})
		if err != nil {
			t.Fatal(err)
		}
		if r.Verdict != Unfinished || len(r.Runs) != 0 || r.Quantities[0].Average == 0 {
			t.Errorf("after %d averages: %s, %d runs, average %g", after, r.Verdict, len(r.Runs), r.Quantities[0].Average)
		}
		if _, err := json.Marshal(r); err != nil {
			t.Error(err)
		}
	}
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if _, err := Trustworthy(ctx, s, TrustRequest{Within: 1}, nil); err == nil {
		t.Error("an answer from a context that had ended")
	}
}

func TestTrustVerdicts(t *testing.T) {
	good := TrustRun{Expected: StandsWithin, Found: StandsWithin, Verdict: Agrees}
	for _, c := range []struct {
		bad  TrustRun
		want TrustVerdict
	}{
		{good, Confirmed},
		{TrustRun{Expected: StandsWithin, Found: StandsBeyond, Verdict: Agrees}, Contradicted},
		{TrustRun{Expected: StandsAtLimit, Found: StandsBeyond, Verdict: Agrees}, Contradicted},
		{TrustRun{Expected: StandsWithin, Found: StandsWithin, Verdict: Disagrees}, Contradicted},
		{TrustRun{Expected: StandsWithin, Found: StandsAtLimit, Verdict: Agrees}, Unconfirmed},
		{TrustRun{Expected: StandsWithin, Verdict: NotReached}, Unconfirmed},
		{TrustRun{Expected: StandsWithin, Verdict: Incomplete}, Unfinished},
	} {
		if got := trustVerdict(nil, nil, []TrustRun{good, c.bad, good}); got != c.want {
			t.Errorf("a run that found %q, expected %q, %q: %s, want %s", c.bad.Found, c.bad.Expected, c.bad.Verdict, got, c.want)
		}
	}
	if got := trustVerdict(nil, []Trusted{{Reached: ReachedNowhere}}, []TrustRun{good}); got != Unreached {
		t.Errorf("nowhere: %s", got)
	}
}

func TestTrustRefuses(t *testing.T) {
	s := packetOn(t, delta(1), 10)
	for _, ask := range []TrustRequest{{}, {Within: -1}, {Within: math.NaN()}, {Within: 1, Of: []string{"lost"}}} {
		if _, err := Trustworthy(t.Context(), s, ask, nil); err == nil {
			t.Errorf("%+v is accepted", ask)
		}
	}
}
