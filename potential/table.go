package potential

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/interp"
)

// Table is a height, and optionally a mass, given at points. X rises strictly;
// its first point is laid on the left face of the layer and its last on the
// right face. Mass is nil where the layer's own mass holds.
//
// Linear joins the points by straight lines. Smooth joins them by the
// monotone piecewise cubic of F. N. Fritsch and J. Butland (SIAM J. Sci. Stat.
// Comput. 5, 300 (1984)), which has a continuous slope and never overshoots
// the points, so that a mass stays positive.
type Table struct {
	X, Height, Mass []float64
	Smooth          bool
}

func (t Table) lay(s *Structure, l Layer, i int, left, _ float64) (float64, error) {
	if err := t.check(i); err != nil {
		return 0, err
	}
	span := t.X[len(t.X)-1] - t.X[0]
	if l.Thickness != 0 && math.Abs(l.Thickness-span) > 1e-9*span {
		return 0, &LayerError{i, "thickness", fmt.Sprintf("is %g but the table spans %g; leave it out", l.Thickness, span)}
	}
	height := t.pieces(t.Height, left)
	var mass []Polynomial
	if t.Mass != nil {
		mass = t.pieces(t.Mass, left)
	}
	for n := range height {
		from, to := left+(t.X[n]-t.X[0]), left+(t.X[n+1]-t.X[0])
		if to <= from {
			return 0, &LayerError{i, "file", fmt.Sprintf("rows %d and %d are lost in rounding beside the layers before", n+1, n+2)}
		}
		l.add(s, i, from, to, height[n])
		if mass != nil {
			s.Segments[len(s.Segments)-1].Mass = mass[n]
		}
	}
	return left + span, nil
}

func (t Table) check(i int) error {
	switch {
	case len(t.X) < 2:
		return &LayerError{i, "file", "a table needs at least two rows"}
	case len(t.Height) != len(t.X) || t.Mass != nil && len(t.Mass) != len(t.X):
		return &LayerError{i, "file", "columns differ in length"}
	}
	for n, x := range t.X {
		if math.IsNaN(x) || math.IsInf(x, 0) || math.IsNaN(t.Height[n]) || math.IsInf(t.Height[n], 0) {
			return &LayerError{i, "file", fmt.Sprintf("row %d is not finite", n+1)}
		}
		if n > 0 && x <= t.X[n-1] {
			return &LayerError{i, "file", fmt.Sprintf("x must rise: row %d is not above row %d", n+1, n)}
		}
		if t.Mass != nil && !(t.Mass[n] > 0 && !math.IsInf(t.Mass[n], 0)) {
			return &LayerError{i, "file", fmt.Sprintf("row %d: mass must be a positive number", n+1)}
		}
	}
	return nil
}

// pieces returns the interpolant of y between neighbouring points, in
// coordinates in which the first point lies at left.
func (t Table) pieces(y []float64, left float64) []Polynomial {
	out := make([]Polynomial, len(t.X)-1)
	var cubic interp.FritschButland
	if t.Smooth {
		if err := cubic.Fit(t.X, y); err != nil {
			panic("potential: table was not checked: " + err.Error())
		}
	}
	for n := range out {
		from, to := left+(t.X[n]-t.X[0]), left+(t.X[n+1]-t.X[0])
		if !t.Smooth {
			out[n] = Line(from, y[n], to, y[n+1])
			continue
		}
		h := t.X[n+1] - t.X[n]
		d0, d1 := cubic.PredictDerivative(t.X[n]), cubic.PredictDerivative(t.X[n+1])
		slope := (y[n+1] - y[n]) / h
		out[n] = Polynomial{Origin: from, C: []float64{
			y[n], d0, (3*slope - 2*d0 - d1) / h, (d0 + d1 - 2*slope) / (h * h),
		}}
	}
	return out
}
