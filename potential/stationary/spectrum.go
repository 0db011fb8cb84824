package stationary

import (
	"fmt"
	"math"
)

// Spectrum is the momentum distribution of a Gaussian packet in the incident
// lead,
//
//	|phi(k)|^2 = exp(-(k-K0)^2/(2 Width^2))/(sqrt(2 pi) Width),
//
// Width = 1/(2 length), length the standard deviation of |psi|^2 in x.
type Spectrum struct{ K0, Width float64 }

func (p Spectrum) check() error {
	if !(p.K0 > 0) || !(p.Width > 0) || math.IsInf(p.K0, 0) || math.IsInf(p.Width, 0) {
		return fmt.Errorf("stationary: spectrum needs a positive, finite mean wave number and width, not %g and %g", p.K0, p.Width)
	}
	return nil
}

// logDensity is ln |phi(k)|^2.
func (p Spectrum) logDensity(k float64) float64 {
	d := (k - p.K0) / p.Width
	return -d*d/2 - math.Log(math.Sqrt(2*math.Pi)*p.Width)
}

// window is the range of wave numbers that the averages need.
type window struct {
	lo, hi float64
	peak   float64 // largest ln(|phi|^2 T) met; -Inf if the far lead is closed throughout
}

// floor is the probability below which a reflection or absorption is not
// asked for relative accuracy.
const floor = 1e-24

// leastFraction of a width: where the window reaches down to k = 0 it ends
// there, since the mean of 1/k diverges logarithmically at 0 (and has next to
// no weight there).
const leastFraction = 1e-12

// window finds the range: outside it nothing can add a fraction of more than
// about relative to the averages, even if it were all transmitted or all
// reflected. Deep in a barrier that lies far up in the Gaussian tail, since
// T there rises faster than |phi|^2 falls.
func (s *Solver) window(p Spectrum, relative float64) (window, int, error) {
	const (
		start, step, farthest = 6.0, 0.5, 300.0
		lightless             = 39.0 // exp(-39^2/2) underflows
	)
	g := gauge{solver: s, spectrum: p, transmitted: math.Inf(-1), reflected: math.Inf(-1), lost: math.Inf(-1)}
	if !s.lossy {
		g.lost = 0
	}
	n := 0.0
	for ; n < start || n < g.reach(relative) && n < farthest; n += step {
		if math.IsInf(g.transmitted, -1) && n > lightless {
			g.transmitted = 0
			n = min(n, max(start, g.reach(relative)))
			g.transmitted = math.Inf(-1)
			break
		}
		if err := g.sample(n); err != nil {
			return window{}, g.count, err
		}
		if err := g.sample(-n); err != nil {
			return window{}, g.count, err
		}
	}
	return window{
		lo:   max(p.K0-n*p.Width, leastFraction*min(p.K0, p.Width)),
		hi:   p.K0 + n*p.Width,
		peak: g.transmitted + p.logDensity(p.K0),
	}, g.count, nil
}

// gauge keeps the largest ln(|phi|^2 {T, R, A}) seen, relative to |phi|^2 at
// the mean.
type gauge struct {
	solver                       *Solver
	spectrum                     Spectrum
	transmitted, reflected, lost float64
	count                        int
	a                            Amplitudes
}

// sample looks n widths from the mean.
func (g *gauge) sample(n float64) error {
	k := g.spectrum.K0 + n*g.spectrum.Width
	if k <= 0 {
		return nil
	}
	s := g.solver
	near := k * k / (2 * s.near.Mass)
	if err := s.at(level{s.near.Height + near, near, near - (s.far.Height - s.near.Height)}, &g.a); err != nil {
		return err
	}
	g.count++
	g.transmitted = max(g.transmitted, -n*n/2+g.a.LogTransmission)
	g.reflected = max(g.reflected, -n*n/2+math.Log(max(g.a.Reflection, floor)))
	if s.lossy {
		g.lost = max(g.lost, -n*n/2+math.Log(max(g.a.Absorption, floor)))
	}
	return nil
}

// reach is the number of widths beyond which the rest is negligible.
func (g *gauge) reach(relative float64) float64 {
	const margin = 1e-3
	least := min(g.transmitted, g.reflected, g.lost, 0)
	return math.Sqrt(2 * (-math.Log(relative*margin) - least))
}
