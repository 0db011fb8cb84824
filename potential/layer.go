package potential

import "math"

// Layer is one layer of a structure.
type Layer struct {
	Thickness float64 // extent in x; 0 lets a shape with tails choose its window
	Shape     Shape
	Mass      float64
	Loss      float64 // imaginary part: V = height - i Loss, >= 0
}

// Shape is the course of the height across a layer. The shapes are Flat,
// Ramp, Point, Hump, Bell, Rise and Table.
type Shape interface {
	// lay appends the layer's segments or point potential to s, starting at
	// x = left, and returns the position of its right face.
	lay(s *Structure, l Layer, index int, left, cut float64) (right float64, err error)
}

// check refuses what no shape can have.
func (l Layer) check(i int) error {
	switch {
	case l.Shape == nil:
		return &LayerError{i, "shape", "no shape given"}
	case !(l.Mass > 0) || math.IsInf(l.Mass, 0):
		return &LayerError{i, "mass", "must be a positive number"}
	case !(l.Thickness >= 0) || math.IsInf(l.Thickness, 0):
		return &LayerError{i, "thickness", "must be zero or a positive number"}
	case !(l.Loss >= 0) || math.IsInf(l.Loss, 0):
		return &LayerError{i, "loss", "must be zero or a positive number"}
	}
	return nil
}

// number is one field of a shape.
type number struct {
	field string
	value float64
}

// finite refuses the first of the numbers that is not finite.
func finite(index int, numbers ...number) error {
	for _, n := range numbers {
		if math.IsNaN(n.value) || math.IsInf(n.value, 0) {
			return &LayerError{index, n.field, "must be a finite number"}
		}
	}
	return nil
}

// positiveWidth refuses a width that is not a positive number.
func positiveWidth(index int, width float64) error {
	if !(width > 0) || math.IsInf(width, 0) {
		return &LayerError{index, "width", "must be greater than zero and finite"}
	}
	return nil
}

// add appends one segment of constant mass.
func (l Layer) add(s *Structure, index int, from, to float64, height Profile) {
	s.Segments = append(s.Segments, Segment{
		From: from, To: to, Layer: index, Height: height, Mass: Constant(l.Mass), Loss: l.Loss,
	})
}

// extent returns the right face of a layer that needs a thickness.
func (l Layer) extent(index int, left float64) (float64, error) {
	if l.Thickness == 0 {
		return 0, &LayerError{index, "thickness", "must be greater than zero"}
	}
	right := left + l.Thickness
	if right <= left {
		return 0, &LayerError{index, "thickness", "is lost in rounding beside the layers before it"}
	}
	return right, nil
}

// window returns the right face and the centre of a layer with tails that
// reach at least half-width half where no thickness is given.
func (l Layer) window(index int, left, half float64) (right, centre float64, err error) {
	width := l.Thickness
	if width == 0 {
		width = 2 * half
	}
	if !(width > 0) || math.IsInf(width, 0) {
		return 0, 0, &LayerError{index, "thickness", "no window can be chosen: the shape is nowhere higher than the cut"}
	}
	return left + width, left + width/2, nil
}
