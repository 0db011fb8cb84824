package potential

import (
	"fmt"
	"math"
)

// Lead is a half-infinite region of constant height and mass.
type Lead struct{ Height, Mass float64 }

// Segment is a stretch of x on which height and mass are analytic.
type Segment struct {
	From, To float64
	Layer    int     // index of the layer it belongs to
	Height   Profile // real part of the potential, bias included
	Mass     Profile
	Loss     float64 // V = Height - i Loss, Loss >= 0
}

// Length is To - From.
func (s Segment) Length() float64 { return s.To - s.From }

// Delta is the point potential Strength * delta(x-X). It stands at a face.
type Delta struct {
	X, Strength float64
	Layer       int
}

// Span is the stretch of x that a layer occupies.
type Span struct{ From, To float64 }

// Structure is the whole of what a packet meets. Build makes it; it is not
// changed afterwards and may be shared between goroutines.
type Structure struct {
	Entry, Exit Lead
	Segments    []Segment // contiguous from 0 to Width
	Deltas      []Delta   // in order of X, each at a face
	Layers      []Span    // one for each layer, in order
}

// Options are what Build needs to know beyond the layers themselves.
type Options struct {
	// Cut is the height below which the tail of a shape with infinite tails
	// is dropped, where the layer gives no thickness. It must be positive
	// if such a layer is present.
	Cut float64
	// Drop is the fall of the potential across the structure: V gains
	// -Drop*x/Width inside, and the exit is lowered by Drop.
	Drop float64
}

// LayerError says which layer could not be built and why. Layers are counted
// from 0.
type LayerError struct {
	Layer int
	Field string // the field at fault, as in a scenario file
	Msg   string
}

func (e *LayerError) Error() string {
	return fmt.Sprintf("layer[%d].%s: %s", e.Layer, e.Field, e.Msg)
}

// Build lays the layers from x = 0 to the right and returns the structure.
// The error is a *LayerError where a layer is at fault.
func Build(entry, exit Lead, layers []Layer, opt Options) (*Structure, error) {
	for _, lead := range []struct {
		name string
		lead Lead
	}{{"entry", entry}, {"exit", exit}} {
		if !(lead.lead.Mass > 0) || math.IsInf(lead.lead.Mass, 0) {
			return nil, fmt.Errorf("%s: mass must be a positive number", lead.name)
		}
		if math.IsNaN(lead.lead.Height) || math.IsInf(lead.lead.Height, 0) {
			return nil, fmt.Errorf("%s: height must be a finite number", lead.name)
		}
	}
	if math.IsNaN(opt.Drop) || math.IsInf(opt.Drop, 0) {
		return nil, fmt.Errorf("bias: drop must be a finite number")
	}
	s := &Structure{Entry: entry, Exit: exit, Layers: make([]Span, 0, len(layers))}
	x := 0.0
	for i, layer := range layers {
		if err := layer.check(i); err != nil {
			return nil, err
		}
		end, err := layer.Shape.lay(s, layer, i, x, opt.Cut)
		if err != nil {
			return nil, err
		}
		s.Layers = append(s.Layers, Span{x, end})
		x = end
	}
	if math.IsInf(x, 0) {
		return nil, fmt.Errorf("structure: total thickness is not finite")
	}
	s.tilt(opt.Drop)
	return s, nil
}

// Width is the position of the right face of the last layer.
func (s *Structure) Width() float64 {
	if len(s.Layers) == 0 {
		return 0
	}
	return s.Layers[len(s.Layers)-1].To
}

// Lossy reports whether any layer loses probability.
func (s *Structure) Lossy() bool {
	for _, seg := range s.Segments {
		if seg.Loss > 0 {
			return true
		}
	}
	return false
}

// HeightAt returns V(x) (real part, point potentials left out). At a face it
// is the value to the right.
func (s *Structure) HeightAt(x float64) float64 {
	switch {
	case x < 0:
		return s.Entry.Height
	case x >= s.Width():
		return s.Exit.Height
	}
	return s.Segments[s.find(x)].Height.At(x)
}

// MassAt returns m(x). At a face it is the value to the right.
func (s *Structure) MassAt(x float64) float64 {
	switch {
	case x < 0:
		return s.Entry.Mass
	case x >= s.Width():
		return s.Exit.Mass
	}
	return s.Segments[s.find(x)].Mass.At(x)
}

// find returns the segment with From <= x < To; x lies within the structure.
func (s *Structure) find(x float64) int {
	lo, hi := 0, len(s.Segments)-1
	for lo < hi {
		mid := (lo + hi + 1) / 2
		if s.Segments[mid].From <= x {
			lo = mid
		} else {
			hi = mid - 1
		}
	}
	return lo
}

// Mirror returns the structure seen from the other side: x becomes Width-x,
// entry and exit change places, layer i becomes layer len(Layers)-1-i.
func (s *Structure) Mirror() *Structure {
	b, last := s.Width(), len(s.Layers)-1
	m := &Structure{Entry: s.Exit, Exit: s.Entry}
	for i := len(s.Segments) - 1; i >= 0; i-- {
		g := s.Segments[i]
		m.Segments = append(m.Segments, Segment{
			From: b - g.To, To: b - g.From, Layer: last - g.Layer,
			Height: g.Height.Mirror(b), Mass: g.Mass.Mirror(b), Loss: g.Loss,
		})
	}
	for i := len(s.Deltas) - 1; i >= 0; i-- {
		d := s.Deltas[i]
		m.Deltas = append(m.Deltas, Delta{b - d.X, d.Strength, last - d.Layer})
	}
	for i := last; i >= 0; i-- {
		m.Layers = append(m.Layers, Span{b - s.Layers[i].To, b - s.Layers[i].From})
	}
	return m
}

// tilt adds the linear fall of a bias.
func (s *Structure) tilt(drop float64) {
	if drop == 0 {
		return
	}
	s.Exit.Height -= drop
	b := s.Width()
	if b == 0 {
		return
	}
	fall := Polynomial{C: []float64{0, -drop / b}}
	for i := range s.Segments {
		h := &s.Segments[i].Height
		if p, ok := (*h).(Polynomial); ok {
			*h = p.plus(fall)
		} else {
			*h = Sum{*h, fall}
		}
	}
}
