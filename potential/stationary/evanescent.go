package stationary

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
)

// Beyond is the mean time that the part of a packet for which the far lead is
// closed spends beyond a plane at a distance behind the far face: it reaches
// out there and comes back. With kappa the decay constant in the far lead and
// n(E) = |psi|^2 at the far face over the incident flux,
//
//	integral over E < V_far of |phi(k)|^2 n(E) exp(-2 kappa distance)/(2 kappa) dk.
//
// No probability passes the plane on balance, but the flux-weighted sum of
// times at the plane is less by this amount. The error is that of Gauss-
// Legendre quadrature in kappa against half the number of points.
func (s *Solver) Beyond(spectrum Spectrum, distance float64) (Mean, error) {
	if err := spectrum.check(); err != nil {
		return Mean{}, err
	}
	if !(distance > 0) {
		return Mean{}, fmt.Errorf("stationary: distance %g of the plane is not greater than zero", distance)
	}
	step := s.far.Height - s.near.Height
	if step <= 0 {
		return Mean{}, nil
	}
	deepest := math.Sqrt(2 * s.far.Mass * step)
	total, from := Mean{}, 0.0
	for _, to := range beyondEnds(distance, deepest) {
		if err := s.beyondPanels(spectrum, distance, from, to, &total, 0); err != nil {
			return Mean{}, err
		}
		from = to
	}
	return total, nil
}

// beyondEnds ends panels in kappa at 1/(2 distance), doubled on and on to
// where exp(-2 kappa distance) is 1e-17 or the incident lead closes.
func beyondEnds(distance, deepest float64) []float64 {
	var ends []float64
	for k := 0.5 / distance; k < min(deepest, 20/distance); k *= 2 {
		ends = append(ends, k)
	}
	return append(ends, min(deepest, 20/distance))
}

// beyondPanels adds a panel, halved until both rules agree: a state that the
// far lead confines is a narrow line in kappa.
func (s *Solver) beyondPanels(p Spectrum, distance, from, to float64, total *Mean, depth int) error {
	const close, deepest = 1e-10, 25
	value, half, err := s.beyondPanel(p, distance, from, to)
	if err != nil {
		return err
	}
	if off := math.Abs(value - half); off <= close*math.Abs(total.Value+value) || depth == deepest {
		total.Value += value
		total.Error += off
		return nil
	}
	mid := (from + to) / 2
	if err := s.beyondPanels(p, distance, from, mid, total, depth+1); err != nil {
		return err
	}
	return s.beyondPanels(p, distance, mid, to, total, depth+1)
}

// beyondPanel integrates one panel with 24 points and with 12. With
// E = V_far - kappa^2/(2 m_far) the integrand is smooth in kappa.
func (s *Solver) beyondPanel(p Spectrum, distance, from, to float64) (value, half float64, err error) {
	f := func(kappa float64) float64 {
		far := -kappa * kappa / (2 * s.far.Mass)
		near := far + s.far.Height - s.near.Height
		if near <= 0 {
			return 0
		}
		density, bad := s.faceDensity(level{s.far.Height + far, near, far})
		if bad != nil {
			err = bad
		}
		k := math.Sqrt(2 * s.near.Mass * near)
		return math.Exp(p.logDensity(k)-2*kappa*distance) * density * s.near.Mass / k / (2 * s.far.Mass)
	}
	const points = 24
	value = quad.Fixed(f, from, to, points, quad.Legendre{}, 1)
	half = quad.Fixed(f, from, to, points/2, quad.Legendre{}, 1)
	return value, half, err
}

// faceDensity is |psi|^2 at the far face over the incident flux, for a closed
// far lead.
func (s *Solver) faceDensity(l level) (float64, error) {
	s.cross(l, false)
	p := s.divide(l)
	d := math.Exp(-2*s.wave.log) / p.inSquare / p.speedIn
	if math.IsNaN(d) || math.IsInf(d, 0) {
		return 0, fmt.Errorf("stationary: the wave at energy %g is not finite", l.energy)
	}
	return d, nil
}
