package scenarios

import (
	"context"
	"math"
	"math/cmplx"
	"testing"

	"fluxtoll/potential"
)

// textbook is the three-point Crank-Nicolson scheme of the textbooks (e.g.
// W. H. Press et al., Numerical Recipes, 3rd ed., sec. 20.2.1; from memory) for
// mass 1 on a uniform grid between hard walls, its factors made once. It is
// here to be measured against, and made as fast as plain code is.
type textbook struct {
	dx, dt     float64
	psi, rhs   []complex128
	height     []float64
	off        complex128   // -i dt/(4 dx^2), off the diagonal of 1 + i dt H/2
	pivot      []complex128 // inverse pivots of the elimination
	multiplier []complex128
}

// newTextbook puts a Gaussian packet at start on a grid from left to right
// with a step of the given height at 0.
func newTextbook(left, right, dx, dt, height, start, length float64) *textbook {
	n := int((right-left)/dx) + 1
	b := &textbook{
		dx: dx, dt: dt, psi: make([]complex128, n), rhs: make([]complex128, n),
		height: make([]float64, n), pivot: make([]complex128, n), multiplier: make([]complex128, n),
		off: complex(0, -dt/(4*dx*dx)),
	}
	norm := 0.0
	for i := range b.psi {
		x := left + dx*float64(i)
		switch {
		case math.Abs(x) < dx/2:
			b.height[i] = height / 2
		case x > 0:
			b.height[i] = height
		}
		d := x - start
		b.psi[i] = complex(math.Exp(-d*d/(4*length*length)), 0) * cmplx.Exp(complex(0, d))
		norm += real(b.psi[i] * cmplx.Conj(b.psi[i]))
	}
	for i := range b.psi {
		b.psi[i] /= complex(math.Sqrt(norm*dx), 0)
	}
	b.factor()
	return b
}

func (b *textbook) diagonal(i int, sign float64) complex128 {
	return complex(1, sign*b.dt/2*(1/(b.dx*b.dx)+b.height[i]))
}

func (b *textbook) factor() {
	for i := range b.pivot {
		d := b.diagonal(i, 1)
		if i > 0 {
			b.multiplier[i] = b.off * b.pivot[i-1]
			d -= b.multiplier[i] * b.off
		}
		b.pivot[i] = 1 / d
	}
}

// step advances by dt.
func (b *textbook) step() {
	last := len(b.psi) - 1
	for i := range b.psi {
		v := b.diagonal(i, -1) * b.psi[i]
		if i > 0 {
			v -= b.off * b.psi[i-1]
		}
		if i < last {
			v -= b.off * b.psi[i+1]
		}
		b.rhs[i] = v
	}
	for i := 1; i <= last; i++ {
		b.rhs[i] -= b.multiplier[i] * b.rhs[i-1]
	}
	b.psi[last] = b.rhs[last] * b.pivot[last]
	for i := last - 1; i >= 0; i-- {
		b.psi[i] = (b.rhs[i] - b.off*b.psi[i+1]) * b.pivot[i]
	}
}

// flow is the probability current at x.
func (b *textbook) flow(left, x float64) float64 {
	i := int(math.Round((x - left) / b.dx))
	slope := (b.psi[i+1] - b.psi[i-1]) / complex(2*b.dx, 0)
	return imag(cmplx.Conj(b.psi[i]) * slope)
}

// The setting of the comparison: a step of two fifths of the energy, a packet
// of ten reduced wavelengths.
const (
	bookHeight, bookLength = 0.2, 10.0
	bookStart, bookPlane   = -60.0, 30.0
)

// bookArrival runs the textbook scheme until the packet has passed the plane
// and returns the mean arrival there. The box is so large that nothing comes
// back from its walls.
func bookArrival(dx, dt float64) float64 {
	const left, right, end = -260, 260, 210
	b := newTextbook(left, right, dx, dt, bookHeight, bookStart, bookLength)
	flux, first := 0.0, 0.0
	before := b.flow(left, bookPlane)
	for n := 1; float64(n)*dt < end; n++ {
		b.step()
		now := b.flow(left, bookPlane)
		passed := dt * (before + now) / 2
		flux += passed
		first += passed * dt * (float64(n) - 0.5)
		before = now
	}
	return first / flux
}

func bookScenario(tb testing.TB) *Scenario {
	s := natural(tb, potential.Lead{Height: bookHeight, Mass: 1}, 1e-6, bookLength)
	start, far := bookStart, bookPlane
	s.Packet.Start, s.Planes.Far = &start, &far
	return s
}

// exactArrival is the stationary road's mean arrival.
func exactArrival(tb testing.TB, s *Scenario) float64 {
	tb.Helper()
	trial, err := Prepare(context.Background(), s, Forced{})
	if err != nil {
		tb.Fatal(err)
	}
	transmitted, _ := trial.averageArrivals()
	return transmitted.Value
}

// bookSpacing is the largest spacing, on the line dt = dx (where the two errors
// are alike), with which the textbook scheme reaches 1e-4 in the arrival:
// measured by TestTextbookReachesItsAccuracy. Step and plane lie on nodes.
const bookSpacing = 0.02

// TestTextbookReachesItsAccuracy: the textbook scheme converges to the exact
// arrival, with the spacing of the benchmark to 1e-4 but not much better.
func TestTextbookReachesItsAccuracy(t *testing.T) {
	exact := exactArrival(t, bookScenario(t))
	coarse := bookArrival(4*bookSpacing, 4*bookSpacing)/exact - 1
	if !(math.Abs(coarse) > 4e-4 && math.Abs(coarse) < 1e-2) {
		t.Errorf("at four times the spacing the arrival is off by %g", coarse)
	}
	if !slowTests {
		return
	}
	fine := bookArrival(bookSpacing, bookSpacing)/exact - 1
	if !(math.Abs(fine) < 1e-4 && math.Abs(fine) > 3e-5) {
		t.Errorf("at the spacing of the benchmark the arrival is off by %g", fine)
	}
}

// BenchmarkTimeToAccuracy measures both sides in one run: the time to an
// arrival that is right to 1e-4 by the textbook scheme, and the whole of a
// trial, both roads, plan and budget, whose arrival is right to 1e-6.
func BenchmarkTimeToAccuracy(b *testing.B) {
	exact := exactArrival(b, bookScenario(b))
	b.Run("textbook", func(b *testing.B) {
		var got float64
		for b.Loop() {
			got = bookArrival(bookSpacing, bookSpacing)
		}
		b.ReportMetric(math.Abs(got/exact-1), "error")
	})
	b.Run("trial", func(b *testing.B) {
		var got float64
		for b.Loop() {
			trial, r := take(b, bookScenario(b), Forced{})
			if r.Verdict != Agrees {
				b.Fatal(r.Verdict)
			}
			_, far := trial.passages()
			got = far.MeanTime()
		}
		b.ReportMetric(math.Abs(got/exact-1), "error")
	})
}
