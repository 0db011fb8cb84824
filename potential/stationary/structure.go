package stationary

import (
	"math"

	"fluxtoll/potential"
)

// kind says how an element is crossed.
type kind uint8

const (
	flat   kind = iota // constant height and mass, closed form
	smooth             // Taylor series
	point              // delta
)

// element is one thing the wave crosses on its way from the far face to the
// near face.
type element struct {
	kind                       kind
	layer                      int // in the order of the structure, unmirrored
	length, mass, height, loss float64
	strength                   float64 // of a point
	smooth                     int     // index of a smooth element's slices
}

// elements lists what a wave meets from the right face of s to its left
// face; layer translates a layer's index.
func elements(s *potential.Structure, layer func(int) int) (list []element, smooths []potential.Segment) {
	list = make([]element, 0, len(s.Segments)+len(s.Deltas))
	next := len(s.Deltas) - 1
	points := func(x float64) {
		for ; next >= 0 && s.Deltas[next].X >= x; next-- {
			d := s.Deltas[next]
			list = append(list, element{kind: point, layer: layer(d.Layer), strength: d.Strength})
		}
	}
	for i := len(s.Segments) - 1; i >= 0; i-- {
		g := s.Segments[i]
		points(g.To)
		e := element{layer: layer(g.Layer), length: g.Length(), loss: g.Loss}
		if potential.IsConstant(g.Height) && potential.IsConstant(g.Mass) {
			e.height, e.mass = g.Height.At(g.From), g.Mass.At(g.From)
		} else {
			e.kind, e.smooth = smooth, len(smooths)
			smooths = append(smooths, g)
		}
		list = append(list, e)
	}
	points(math.Inf(-1))
	return list, smooths
}

// bounds returns bounds of the height over leads and segments.
func bounds(s *potential.Structure) (low, high float64) {
	low = min(s.Entry.Height, s.Exit.Height)
	high = max(s.Entry.Height, s.Exit.Height)
	for _, g := range s.Segments {
		lo, hi := g.Height.Range(g.From, g.To)
		low, high = min(low, lo), max(high, hi)
	}
	return low, high
}
