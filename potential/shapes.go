package potential

import "math"

// Flat is a constant height.
type Flat struct{ Height float64 }

func (f Flat) lay(s *Structure, l Layer, i int, left, _ float64) (float64, error) {
	if err := finite(i, number{"height", f.Height}); err != nil {
		return 0, err
	}
	right, err := l.extent(i, left)
	if err == nil {
		l.add(s, i, left, right, Constant(f.Height))
	}
	return right, err
}

// Ramp goes linearly from Height at its left face to HeightEnd at its right.
type Ramp struct{ Height, HeightEnd float64 }

func (r Ramp) lay(s *Structure, l Layer, i int, left, _ float64) (float64, error) {
	if err := finite(i, number{"height", r.Height}, number{"height_end", r.HeightEnd}); err != nil {
		return 0, err
	}
	right, err := l.extent(i, left)
	if err == nil {
		l.add(s, i, left, right, Line(left, r.Height, right, r.HeightEnd))
	}
	return right, err
}

// Point is the potential Strength*delta(x), Strength an energy times a length.
// Its layer has no thickness and no loss.
type Point struct{ Strength float64 }

func (p Point) lay(s *Structure, l Layer, i int, left, _ float64) (float64, error) {
	switch {
	case l.Thickness != 0:
		return 0, &LayerError{i, "thickness", "a delta has none"}
	case l.Loss != 0:
		return 0, &LayerError{i, "loss", "a delta has none"}
	}
	if err := finite(i, number{"strength", p.Strength}); err != nil {
		return 0, err
	}
	s.Deltas = append(s.Deltas, Delta{X: left, Strength: p.Strength, Layer: i})
	return left, nil
}

// Hump is Height/cosh^2((x-c)/Width), c the middle of the layer.
type Hump struct{ Height, Width float64 }

func (h Hump) lay(s *Structure, l Layer, i int, left, cut float64) (float64, error) {
	if err := positiveWidth(i, h.Width); err != nil {
		return 0, err
	}
	if err := finite(i, number{"height", h.Height}); err != nil {
		return 0, err
	}
	half := h.Width / 2 * math.Log(4*math.Abs(h.Height)/cut)
	right, c, err := l.window(i, left, half)
	if err == nil {
		l.add(s, i, left, right, Sech2{h.Height, c, h.Width})
	}
	return right, err
}

// Bell is Height exp(-(x-c)^2/(2 Width^2)), c the middle of the layer.
type Bell struct{ Height, Width float64 }

func (b Bell) lay(s *Structure, l Layer, i int, left, cut float64) (float64, error) {
	if err := positiveWidth(i, b.Width); err != nil {
		return 0, err
	}
	if err := finite(i, number{"height", b.Height}); err != nil {
		return 0, err
	}
	half := b.Width * math.Sqrt(2*math.Log(math.Abs(b.Height)/cut))
	right, c, err := l.window(i, left, half)
	if err == nil {
		l.add(s, i, left, right, Gauss{b.Height, c, b.Width})
	}
	return right, err
}

// Rise goes from Height to HeightEnd as 1/(1+exp(-(x-c)/Width)), c the middle
// of the layer.
type Rise struct{ Height, HeightEnd, Width float64 }

func (r Rise) lay(s *Structure, l Layer, i int, left, cut float64) (float64, error) {
	if err := positiveWidth(i, r.Width); err != nil {
		return 0, err
	}
	if err := finite(i, number{"height", r.Height}, number{"height_end", r.HeightEnd}); err != nil {
		return 0, err
	}
	half := r.Width * math.Log(math.Abs(r.HeightEnd-r.Height)/cut)
	right, c, err := l.window(i, left, half)
	if err == nil {
		l.add(s, i, left, right, Logistic{r.Height, r.HeightEnd, c, r.Width})
	}
	return right, err
}
