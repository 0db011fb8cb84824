package stationary

import (
	"context"
	"math"
	"math/cmplx"
	"testing"

	"fluxtoll/potential"

	"pgregory.net/rapid"
)

func states(tb testing.TB, s *potential.Structure, w Window) *Survey {
	tb.Helper()
	v, err := States(context.Background(), s, w)
	if err != nil {
		tb.Fatal(err)
	}
	if !v.Complete || !v.CompleteBound {
		tb.Errorf("not complete: %d of %d resonances, %d of %d bound states", len(v.Resonances), v.Counted, len(v.Bound), v.CountedBound)
	}
	return v
}

// root bisects f, which changes sign between a and b.
func root(a, b float64, f func(float64) float64) float64 {
	rising := f(a) < 0
	for range 200 {
		if mid := (a + b) / 2; (f(mid) < 0) == rising {
			a = mid
		} else {
			b = mid
		}
	}
	return (a + b) / 2
}

// TestBoundStatesOfWell: a well of depth U and width d between leads of equal
// height, masses m inside and M outside, binds where
// (k/m) tan(k d/2) = kappa/M (even) or -(k/m) cot(k d/2) = kappa/M (odd)
// (L. D. Landau and E. M. Lifshitz, Quantum Mechanics, sec. 22, problem 1,
// with the masses of BenDaniel and Duke; from memory).
func TestBoundStatesOfWell(t *testing.T) {
	const depth, d, in, out = 4.0, 3.0, 0.7, 1.3
	well := flatOf(d, -depth)
	well.Mass = in
	lead := potential.Lead{Mass: out}
	found := states(t, build(t, lead, lead, well), Window{0.05, 3, 3}).Bound
	top := math.Sqrt(2 * in * depth)
	var want []float64
	for n := 0; float64(n)*math.Pi/d < top; n++ {
		// Between k d = n pi and (n+1) pi, sin(k d/2 - n pi/2) and its cosine are positive.
		k := root(float64(n)*math.Pi/d, math.Min(top, float64(n+1)*math.Pi/d), func(k float64) float64 {
			kappa := math.Sqrt(math.Max(0, 2*out*(depth-k*k/(2*in))))
			sin, cos := math.Sincos((k*d - float64(n)*math.Pi) / 2)
			return k/in*sin - kappa/out*cos
		})
		want = append(want, k*k/(2*in)-depth)
	}
	if len(found) != len(want) || len(want) < 3 {
		t.Fatalf("%d bound states, want %d", len(found), len(want))
	}
	for i := range want {
		near(t, "bound state", found[i].Energy, want[i], 1e-13, 1e-13)
		if !(math.Abs(found[i].Energy-want[i]) <= found[i].EnergyError+1e-15) {
			t.Errorf("off by %g, its error says %g", found[i].Energy-want[i], found[i].EnergyError)
		}
	}
	// The share inside, from the cosine inside and exponentials outside: of
	// the ground state, d/2 (1 + sin(kd)/(kd)) against cos^2(kd/2)/kappa.
	k, kappa := math.Sqrt(2*in*(want[0]+depth)), math.Sqrt(-2*out*want[0])
	inside := d / 2 * (1 + math.Sin(k*d)/(k*d))
	outside := math.Pow(math.Cos(k*d/2), 2) / kappa
	near(t, "share", found[0].Shares[0], inside/(inside+outside), 0, 1e-12)
}

// TestBoundStatesBetweenUnequalLeads: between leads of heights U1 and U2 above
// the bottom, k d = n pi - asin(k/sqrt(2 U1)) - asin(k/sqrt(2 U2))
// (Landau and Lifshitz, sec. 22, problem 2; from memory). Either way around.
func TestBoundStatesBetweenUnequalLeads(t *testing.T) {
	const u1, u2, d = 5.0, 3.0, 4.0
	left, right := potential.Lead{Height: u1, Mass: 1}, potential.Lead{Height: u2, Mass: 1}
	a := states(t, build(t, left, right, flatOf(d, 0)), Window{3.1, 6, 1}).Bound
	b := states(t, build(t, right, left, flatOf(d, 0)), Window{3.1, 6, 1}).Bound
	var want []float64
	top := math.Sqrt(2 * u2)
	for n := 1.0; n*math.Pi-math.Asin(math.Sqrt(u2/u1))-math.Pi/2 < top*d; n++ {
		k := root(0, top, func(k float64) float64 {
			return k*d - n*math.Pi + math.Asin(k/math.Sqrt(2*u1)) + math.Asin(k/math.Sqrt(2*u2))
		})
		want = append(want, k*k/2)
	}
	if len(a) != len(want) || len(b) != len(want) || len(want) < 3 {
		t.Fatalf("%d and %d bound states, want %d", len(a), len(b), len(want))
	}
	for i := range want {
		near(t, "bound state", a[i].Energy, want[i], 1e-13, 1e-13)
		near(t, "mirrored", b[i].Energy, want[i], 1e-13, 1e-13)
		near(t, "share, mirrored", b[i].Shares[0], a[i].Shares[0], 0, 1e-12)
	}
}

// TestPolesOfWell: the resonances of a square well solve k tan(k d/2) = -i q or
// k cot(k d/2) = i q with q outside, k inside (H. M. Nussenzveig, Nucl. Phys.
// 11, 499 (1959); from memory). There is one for each n with n pi/d above the
// well's depth in k, near k d = n pi.
func TestPolesOfWell(t *testing.T) {
	const depth, d = 50.0, 3.0
	v := states(t, build(t, plain, plain, flatOf(d, -depth)), Window{0.5, 60, 25})
	first := math.Ceil(math.Sqrt(2*(depth+0.5)) * d / math.Pi)
	if len(v.Resonances) < 4 || v.Counted != len(v.Resonances) {
		t.Fatalf("%d resonances, %d counted", len(v.Resonances), v.Counted)
	}
	for i, r := range v.Resonances {
		z := complex(r.Energy, -r.Width/2)
		q, k := cmplx.Sqrt(2*z), cmplx.Sqrt(2*(z+depth))
		even, odd := k*cmplx.Tan(k*d/2)+1i*q, k/cmplx.Tan(k*d/2)-1i*q
		if !(min(cmplx.Abs(even), cmplx.Abs(odd)) < 1e-9*cmplx.Abs(k)) {
			t.Errorf("%v: the equations leave %v and %v", z, even, odd)
		}
		if n := real(k) * d / math.Pi; !(math.Abs(n-first-float64(i)) < 0.5) {
			t.Errorf("resonance %d of %v has k d = %.3f pi, the first should be near %g", i, z, n, first)
		}
		near(t, "left against right", r.Left, r.Right, 0, 1e-9)
	}
}

// TestDoubleDelta: with r = -i c/(k + i c) at each of two deltas of strength c
// a distance d apart (D. J. Griffiths, Introduction to Quantum Mechanics, sec.
// 2.5), poles lie where r exp(ikd) = +-1; two attractive ones bind where
// kappa = |c| (1 +- exp(-kappa d)) (ibid., 2nd ed., problem 2.27; from memory).
func TestDoubleDelta(t *testing.T) {
	pair := func(c, d float64) *potential.Structure {
		delta := potential.Layer{Shape: potential.Point{Strength: c}, Mass: 1}
		return build(t, plain, plain, delta, flatOf(d, 0), delta)
	}
	const c, d = 5.0, 3.0
	v := states(t, pair(c, d), Window{0.05, 12, 3})
	if len(v.Resonances) != 4 { // k near n pi/(d + 1/c) below sqrt(24), n from 1
		t.Errorf("%d resonances, want 4", len(v.Resonances))
	}
	for _, r := range v.Resonances {
		k := cmplx.Sqrt(complex(2*r.Energy, -r.Width))
		back := -1i * c / (k + 1i*c) * cmplx.Exp(1i*k*d)
		near(t, "|r exp(ikd)|^2", cmplx.Abs(back*back), 1, 0, 1e-11)
		near(t, "its phase", cmplx.Phase(back*back), 0, 1e-11, 0)
	}
	bound := states(t, pair(-c/2, d), Window{0.05, 12, 3}).Bound
	if len(bound) != 2 {
		t.Fatalf("%d bound states, want 2", len(bound))
	}
	for i, sign := range []float64{1, -1} {
		kappa := root(0.1, c, func(x float64) float64 { return x - c/2*(1+sign*math.Exp(-x*d)) })
		near(t, "bound state", bound[i].Energy, -kappa*kappa/2, 0, 1e-12) // the doublet is apart by 2e-3
	}
}

// TestWeaklyBound: a single delta of strength -c binds at -c^2/2, with all of
// the state in the leads, however weak it is.
func TestWeaklyBound(t *testing.T) {
	for _, c := range []float64{3, 1e-4, 1e-9} {
		v := states(t, build(t, plain, plain, potential.Layer{Shape: potential.Point{Strength: -c}, Mass: 1}), Window{0.1, 1, 1})
		if len(v.Bound) != 1 {
			t.Fatalf("strength %g: %d bound states", c, len(v.Bound))
		}
		near(t, "energy", v.Bound[0].Energy, -c*c/2, 0, 1e-13)
	}
	v := states(t, build(t, plain, plain, potential.Layer{Shape: potential.Point{Strength: 1}, Mass: 1}), Window{0.1, 1, 1})
	if len(v.Bound)+len(v.Resonances) != 0 {
		t.Errorf("a repulsive delta has %v", v)
	}
}

// TestPublishedPoles: the poles, widths and lifetimes of
// testdata/closed_forms.json.
func TestPublishedPoles(t *testing.T) {
	ran := 0
	for _, c := range loadClosedForms(t) {
		if c.Quantity != "pole" {
			continue
		}
		ran++
		re, im := c.pole(t)
		v := states(t, c.Structure.build(t), Window{0.4 * re, 2 * re, re})
		found := false
		for _, r := range v.Resonances {
			if math.Abs(r.Energy-re) > 1e-12*re {
				continue
			}
			found = true
			near(t, c.ID+" width", r.Width, -2*im, 0, 1e-12)
			near(t, c.ID+" sum of partial widths", r.Left+r.Right, r.Width, 0, 1e-15)
			if !(math.Abs(r.Width+2*im) <= r.WidthError+2e-16*re) {
				t.Errorf("%s: width off by %g, its error says %g", c.ID, r.Width+2*im, r.WidthError)
			}
		}
		if !found {
			t.Errorf("%s: %v does not hold %g %g i", c.ID, v.Resonances, re, im)
		}
	}
	if ran != 8 {
		t.Errorf("ran %d cases, want 8", ran)
	}
}

// TestPartialWidths: on a narrow resonance T = 4 L R/W^2 at its energy (G. Breit
// and E. Wigner, Phys. Rev. 49, 519 (1936)), and a wave from the left dwells
// 4 L/W^2 (M. Buettiker, Phys. Rev. B 38, 12724 (1988); from memory), up to the
// width over the energy.
func TestPartialWidths(t *testing.T) {
	s := twin(t, 3, 3.4)
	r := states(t, s, Window{0.2, 0.4, 0.1}).Resonances
	if len(r) != 1 {
		t.Fatalf("%d resonances, want 1", len(r))
	}
	w := r[0].Width
	for _, fromRight := range []bool{false, true} {
		var a Amplitudes
		if err := New(s, fromRight).At(r[0].Energy, &a); err != nil {
			t.Fatal(err)
		}
		in := r[0].Left
		if fromRight {
			in = r[0].Right
		}
		near(t, "T", a.Transmission, 4*r[0].Left*r[0].Right/(w*w), 0, 2*w/r[0].Energy)
		near(t, "dwell", a.Dwell, 4*in/(w*w), 0, 2*w/r[0].Energy)
		for i, d := range a.LayerDwell {
			near(t, "share", r[0].Shares[i], d/a.Dwell, 0, 100*w/r[0].Energy)
		}
	}
}

// TestNarrowerThanRounding: behind walls twice as thick again the width falls
// by the same factor, exp(-2 kappa b), to far below the rounding of the energy.
func TestNarrowerThanRounding(t *testing.T) {
	var last State
	for i, b := range []float64{8, 12, 16} {
		r := states(t, twin(t, b, b), Window{0.2, 0.4, 0.1}).Resonances
		if len(r) != 1 {
			t.Fatalf("walls of %g: %d resonances, want 1", b, len(r))
		}
		if kappa := math.Sqrt(2 * (2 - r[0].Energy)); i > 0 {
			near(t, "ratio of widths", r[0].Width/last.Width, math.Exp(-2*kappa*4), 0, 1e-9)
		}
		last = r[0]
	}
	if last.Width > 1e-20*last.Energy {
		t.Errorf("width %g is not below rounding", last.Width)
	}
}

// TestWidthOfLoss: deep behind walls a level in a well of loss g decays by
// 2 g times its share there and by nothing else.
func TestWidthOfLoss(t *testing.T) {
	lossy := flatOf(3, 0)
	lossy.Loss = 0.01
	r := states(t, build(t, plain, plain, flatOf(9, 3), lossy, flatOf(9, 3)), Window{0.1, 1, 0.5}).Resonances
	if len(r) != 1 {
		t.Fatalf("%d resonances, want 1", len(r))
	}
	near(t, "width", r[0].Width, 2*lossy.Loss*r[0].Shares[1], 0, 1e-9)
	// First order in the loss; the second is (0.01/3)^2.
	without := states(t, build(t, plain, plain, flatOf(9, 3), flatOf(3, 0), flatOf(9, 3)), Window{0.1, 1, 0.5}).Resonances
	near(t, "energy", r[0].Energy, without[0].Energy, 1e-5, 0)
	well := flatOf(3, -4)
	well.Loss = 0.01
	bound := states(t, build(t, plain, plain, well), Window{0.1, 1, 0.5}).Bound
	if len(bound) != 3 {
		t.Fatalf("%d bound states of a lossy well, want 3", len(bound))
	}
	for _, b := range bound {
		near(t, "width", b.Width, 2*well.Loss*b.Shares[0], 0, 1e-12)
	}
}

// TestCoupledWells: ten equal wells have ten resonances each, narrow or not, and split
// by less than can be told apart or not; the argument principle counts them too.
func TestCoupledWells(t *testing.T) {
	for _, b := range []float64{0.5, 1, 2, 3, 6, 9} {
		layers := []potential.Layer{flatOf(b, 4)}
		for range 10 {
			layers = append(layers, flatOf(3, 0), flatOf(b, 4))
		}
		v := states(t, build(t, plain, plain, layers...), Window{0.18, 0.6, 0.4})
		if len(v.Resonances) != 10 || v.Counted != 10 {
			t.Errorf("walls of %g: %d resonances, %d counted", b, len(v.Resonances), v.Counted)
		}
	}
}

// TestLocatedWithoutSeeds: the contours alone find what the real axis told.
func TestLocatedWithoutSeeds(t *testing.T) {
	s := twin(t, 6, 9)
	w := Window{0.05, 3, 1}
	want := states(t, s, w)
	f := newFinder(s)
	f.allot()
	p := f.pieces(w)[0]
	l := f.locator(p.sheet)
	counted, err := l.all(context.Background(), p)
	if err != nil || counted != want.Counted || len(l.zeros) != counted || counted != 9 {
		t.Fatalf("%d counted, %d located, %v; want %d", counted, len(l.zeros), err, want.Counted)
	}
}

// TestShortBudgetIsNotComplete: a search that had to stop does not claim to be
// complete.
func TestShortBudgetIsNotComplete(t *testing.T) {
	f := newFinder(twin(t, 6, 9))
	f.budget = 30
	var v Survey
	f.resonances(context.Background(), Window{0.05, 3, 1}, nil, &v)
	if v.Complete {
		t.Error("complete with 30 evaluations")
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if v, err := States(ctx, twin(t, 6, 9), Window{0.05, 3, 1}); err == nil || v.Complete {
		t.Errorf("cancelled: error %v, complete %v", err, v.Complete)
	}
	for _, w := range []Window{{0, 1, 1}, {-1, 1, 1}, {1, 1, 1}, {1, math.Inf(1), 1}, {math.NaN(), 1, 1}, {1, 2, 0}, {1, 2, math.NaN()}} {
		if _, err := States(context.Background(), twin(t, 1, 1), w); err == nil {
			t.Errorf("window %v: no error", w)
		}
	}
}

// TestStatesOfAnyStructure: whatever the structure, the search is complete, the
// widths add up to -2 Im of the zero of in, and the mirror image has the same
// states.
func TestStatesOfAnyStructure(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawStructure(t, true)
		lead := math.Min(s.Entry.Height, s.Exit.Height)
		w := Window{lead + 0.05, lead + 2, 1}
		a, err := States(context.Background(), s, w)
		if err != nil {
			t.Fatal(err)
		}
		if !a.Complete || !a.CompleteBound {
			t.Fatalf("complete %v, %v", a.Complete, a.CompleteBound)
		}
		for _, r := range a.Resonances {
			sum := 0.0
			for _, x := range r.Shares {
				sum += x
			}
			if !(sum > 0 && sum < 1+1e-12 && r.Left >= 0 && r.Right >= 0) {
				t.Fatalf("shares %v, widths %g and %g", r.Shares, r.Left, r.Right)
			}
			if !(r.EnergyError < 1e-9) || !(r.WidthError < 1e-8) {
				t.Fatalf("%+v: errors %g and %g", r, r.EnergyError, r.WidthError)
			}
		}
		b, err := States(context.Background(), s.Mirror(), w)
		if err != nil || len(a.Bound) != len(b.Bound) || a.Window == b.Window && len(a.Resonances) != len(b.Resonances) {
			t.Fatalf("mirrored: %v; %d and %d bound states, %d and %d resonances",
				err, len(a.Bound), len(b.Bound), len(a.Resonances), len(b.Resonances))
		}
	})
}
