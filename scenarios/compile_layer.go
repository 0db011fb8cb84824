package scenarios

import (
	"math"
	"strings"

	"fluxtoll/potential"
)

// layer brings layer i to internal units.
func (c *compiler) layer(i int) (potential.Layer, error) {
	l := c.file.Layers[i] // a copy, whose numbers become internal ones
	if err := c.convert(section{layerPath(i), &l.at, l.fields()}); err != nil {
		return potential.Layer{}, err
	}
	if !l.Mass.Given {
		mass, err := inside(c.file.particle(), c.mass, "particle.mass", c.file.Particle.Mass.at)
		if err != nil {
			return potential.Layer{}, err
		}
		l.Mass.Number = mass
	}
	shape, err := c.shape(&l, i)
	return potential.Layer{Thickness: c.thickness(&l), Shape: shape, Mass: l.Mass.Number, Loss: l.Loss.Number}, err
}

// convert replaces the quantities of a section by numbers in internal units.
func (c *compiler) convert(s section) error {
	for _, fd := range s.fields {
		v, err := c.of(*fd.q, s.key(fd.key))
		if err != nil {
			return err
		}
		fd.q.Number, fd.q.Unit = v, ""
	}
	return nil
}

// shape makes the shape of a layer in internal units.
func (c *compiler) shape(l *LayerSpec, i int) (potential.Shape, error) {
	h := l.Height.Number
	switch l.Shape {
	case ShapeFlat:
		return potential.Flat{Height: h}, nil
	case ShapeRamp:
		return potential.Ramp{Height: h, HeightEnd: l.HeightEnd.Number}, nil
	case ShapeDelta:
		return potential.Point{Strength: l.Strength.Number}, nil
	case ShapeSech2:
		return potential.Hump{Height: h, Width: l.Width.Number}, nil
	case ShapeGauss:
		return potential.Bell{Height: h, Width: l.Width.Number}, nil
	case ShapeSmoothStep:
		from, to := c.rise(l)
		return potential.Rise{Height: from, HeightEnd: to, Width: l.Width.Number}, nil
	case ShapeTable:
		return c.table(l, layerPath(i)+".file")
	}
	return nil, &fault{at: l.at, key: layerPath(i) + ".shape", msg: excerpt(string(l.Shape)) + " is not known here", accepted: "accepted are " + strings.Join(shapes(), ", ")}
}

// rise returns the two heights of a smooth step: by default the entry's and
// the exit's before any bias.
func (c *compiler) rise(l *LayerSpec) (from, to float64) {
	from, to = c.entry.Height/c.energy, c.exit.Height/c.energy
	if l.Height.Given {
		from = l.Height.Number
	}
	if l.HeightEnd.Given {
		to = l.HeightEnd.Number
	}
	return from, to
}

// thickness is the layer's, or 0 where a shape with tails is to choose its
// window. A shape nowhere much higher than the cut has no tails to choose by:
// it gets a window as wide as itself, so that a height may be varied through 0.
func (c *compiler) thickness(l *LayerSpec) float64 {
	size := math.Inf(1)
	switch l.Shape {
	case ShapeSech2, ShapeGauss:
		size = math.Abs(l.Height.Number)
	case ShapeSmoothStep:
		from, to := c.rise(l)
		size = math.Abs(to - from)
	}
	if !l.Thickness.Given && size <= 2*c.cut() {
		return 2 * l.Width.Number
	}
	return l.Thickness.Number
}

// table brings the columns of a table to internal units.
func (c *compiler) table(l *LayerSpec, key string) (potential.Shape, error) {
	out := potential.Table{Smooth: l.Table.Smooth}
	for _, column := range []struct {
		kind Kind
		from Column
		to   *[]float64
	}{{Length, l.Table.X, &out.X}, {Energy, l.Table.Height, &out.Height}, {Mass, l.Table.Mass, &out.Mass}} {
		scale := unitBase(column.kind, column.from.Unit)
		for _, v := range column.from.Values {
			v, err := inside(v*scale, c.unit(column.kind), key, l.at)
			if err != nil {
				return nil, err
			}
			*column.to = append(*column.to, v)
		}
	}
	return out, nil
}
