package potential

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

var plain = Lead{Mass: 1}

// near fails where got and want differ by more than tolerance, or are NaN.
func near(tb testing.TB, what string, got, want, tolerance float64) {
	tb.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		tb.Errorf("%s = %.17g, want %.17g +- %.2g", what, got, want, tolerance)
	}
}

func mustBuild(tb testing.TB, layers []Layer, opt Options) *Structure {
	tb.Helper()
	s, err := Build(plain, Lead{Height: 0.5, Mass: 2}, layers, opt)
	if err != nil {
		tb.Fatal(err)
	}
	return s
}

// everyShape is one layer of each shape.
func everyShape() []Layer {
	return []Layer{
		{Thickness: 1, Shape: Flat{Height: 0.5}, Mass: 1},
		{Thickness: 2, Shape: Ramp{Height: 0.5, HeightEnd: -1}, Mass: 1.5, Loss: 0.1},
		{Shape: Point{Strength: 0.7}, Mass: 1},
		{Shape: Hump{Height: 1.5, Width: 0.5}, Mass: 1},
		{Shape: Bell{Height: -0.5, Width: 0.7}, Mass: 0.8},
		{Shape: Rise{Height: 0.2, HeightEnd: 0.9, Width: 0.3}, Mass: 1},
		{Shape: Table{X: []float64{3, 4, 6}, Height: []float64{0, 1, 0.5}}, Mass: 1},
		{Shape: Table{X: []float64{-1, 0, 2, 2.5}, Height: []float64{0, 1, 1, 0.5}, Mass: []float64{1, 2, 1.5, 1}, Smooth: true}, Mass: 1},
	}
}

// TestBuildIsContiguous: segments follow each other from 0 to Width, each
// within its layer, and layers follow each other.
func TestBuildIsContiguous(t *testing.T) {
	for _, drop := range []float64{0, 0.3} {
		s := mustBuild(t, everyShape(), Options{Cut: 1e-10, Drop: drop})
		if len(s.Layers) != 8 || len(s.Deltas) != 1 {
			t.Fatalf("%d layers and %d deltas", len(s.Layers), len(s.Deltas))
		}
		x := 0.0
		for i, g := range s.Segments {
			if g.From != x || !(g.To > g.From) {
				t.Errorf("segment %d is [%g, %g] after %g", i, g.From, g.To, x)
			}
			if l := s.Layers[g.Layer]; g.From < l.From || g.To > l.To {
				t.Errorf("segment %d is [%g, %g] in a layer of [%g, %g]", i, g.From, g.To, l.From, l.To)
			}
			x = g.To
		}
		if x != s.Width() {
			t.Errorf("segments end at %g, the structure at %g", x, s.Width())
		}
		for i := 1; i < len(s.Layers); i++ {
			if s.Layers[i].From != s.Layers[i-1].To {
				t.Errorf("layer %d starts at %g, the one before ends at %g", i, s.Layers[i].From, s.Layers[i-1].To)
			}
		}
		if d := s.Deltas[0]; d.X != s.Layers[2].From || d.Layer != 2 || d.Strength != 0.7 {
			t.Errorf("delta %+v, its layer %+v", d, s.Layers[2])
		}
		if !s.Lossy() {
			t.Error("a layer loses, the structure does not")
		}
	}
}

// TestHeights: V(x) of every shape at points where it is known.
func TestHeights(t *testing.T) {
	s := mustBuild(t, everyShape(), Options{Cut: 1e-10})
	middle := func(i int) float64 { return (s.Layers[i].From + s.Layers[i].To) / 2 }
	for _, c := range []struct {
		what    string
		x, want float64
	}{
		{"entry", -1, 0}, {"flat", 0.5, 0.5}, {"ramp's foot", 1, 0.5}, {"ramp's middle", 2, -0.25},
		{"sech2's top", middle(3), 1.5},
		{"sech2 a width off", middle(3) + 0.5, 1.5 / math.Pow(math.Cosh(1), 2)},
		{"gauss's bottom", middle(4), -0.5},
		{"gauss a width off", middle(4) - 0.7, -0.5 * math.Exp(-0.5)},
		{"step's middle", middle(5), 0.55},
		{"step a width up", middle(5) + 0.3, 0.2 + 0.7/(1+math.Exp(-1))},
		{"table's point", s.Layers[6].From + 1, 1}, {"between two", s.Layers[6].From + 2, 0.75},
		{"smooth table's point", s.Layers[7].From + 1, 1}, {"its flat part", s.Layers[7].From + 2, 1},
		{"exit", s.Width(), 0.5}, {"far out", s.Width() + 9, 0.5},
	} {
		near(t, c.what, s.HeightAt(c.x), c.want, 1e-13)
	}
	near(t, "mass of a layer", s.MassAt(2), 1.5, 0)
	near(t, "mass in the table", s.MassAt(s.Layers[7].From+1), 2, 1e-14)
	near(t, "mass of the entry", s.MassAt(-1), 1, 0)
	near(t, "mass of the exit", s.MassAt(s.Width()), 2, 0)
}

// TestWindows: a shape with tails is cut where it is as high as the cut.
func TestWindows(t *testing.T) {
	const cut = 1e-8
	for _, shape := range []Shape{Hump{2, 0.5}, Hump{-2, 0.5}, Bell{2, 0.5}, Bell{-2, 0.5}} {
		s := mustBuild(t, []Layer{{Shape: shape, Mass: 1}}, Options{Cut: cut})
		if edge := math.Abs(s.Segments[0].Height.At(0)); !(edge <= cut*(1+1e-9) && edge > cut/2) {
			t.Errorf("%+v is %g high at its edge, the cut is %g", shape, edge, cut)
		}
	}
	s := mustBuild(t, []Layer{{Shape: Rise{1, 3, 0.5}, Mass: 1}}, Options{Cut: cut})
	g := s.Segments[0]
	near(t, "step's lower end", g.Height.At(g.From), 1, cut)
	near(t, "step's upper end", g.Height.At(g.To), 3, cut)
}

// TestBias: V falls by drop x/Width inside, and the exit by drop.
func TestBias(t *testing.T) {
	const drop = 0.4
	flat, tilted := mustBuild(t, everyShape(), Options{Cut: 1e-10}), mustBuild(t, everyShape(), Options{Cut: 1e-10, Drop: drop})
	b := flat.Width()
	for i := range 200 {
		x := b * (float64(i) + 0.5) / 200
		near(t, "tilted height", tilted.HeightAt(x), flat.HeightAt(x)-drop*x/b, 1e-13)
	}
	near(t, "exit", tilted.Exit.Height, flat.Exit.Height-drop, 0)
	near(t, "entry", tilted.Entry.Height, 0, 0)
	step, err := Build(plain, plain, nil, Options{Drop: drop})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "exit of a bare step", step.Exit.Height, -drop, 0)
}

// TestMirror: the mirrored structure is the structure at Width - x; mirrored
// twice it is itself.
func TestMirror(t *testing.T) {
	s := mustBuild(t, everyShape(), Options{Cut: 1e-10, Drop: 0.3})
	m := s.Mirror()
	b := s.Width()
	near(t, "width", m.Width(), b, 0)
	for i := range 300 {
		x := b * (float64(i) + 0.5) / 300
		near(t, "mirrored height", m.HeightAt(b-x), s.HeightAt(x), 1e-12)
		near(t, "mirrored mass", m.MassAt(b-x), s.MassAt(x), 1e-12)
	}
	if m.Entry != s.Exit || m.Exit != s.Entry {
		t.Error("the leads did not change places")
	}
	if d := m.Deltas[0]; d.Layer != 5 || math.Abs(d.X-(b-s.Deltas[0].X)) > 1e-14 {
		t.Errorf("mirrored delta %+v of %+v", d, s.Deltas[0])
	}
	if g := m.Segments[len(m.Segments)-1]; g.Layer != 7 || g.Loss != s.Segments[0].Loss {
		t.Errorf("last mirrored segment %+v", g)
	}
	twice := m.Mirror()
	for i := range 100 {
		x := b * (float64(i) + 0.5) / 100
		near(t, "mirrored twice", twice.HeightAt(x), s.HeightAt(x), 1e-12)
	}
}

// TestTableSpansTwoRows: the least a table can be.
func TestTableSpansTwoRows(t *testing.T) {
	for _, smooth := range []bool{false, true} {
		s := mustBuild(t, []Layer{{Shape: Table{X: []float64{0, 2}, Height: []float64{1, 3}, Smooth: smooth}, Mass: 1}}, Options{})
		near(t, "middle", s.HeightAt(1), 2, 1e-14)
	}
}

// TestSmoothTableKeepsItsPromises: it passes through its points, has a
// continuous slope and does not overshoot.
func TestSmoothTableKeepsItsPromises(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		n := rapid.IntRange(2, 8).Draw(rt, "rows")
		table := Table{Smooth: true}
		x := 0.0
		for range n {
			table.X = append(table.X, x)
			table.Height = append(table.Height, rapid.Float64Range(-2, 2).Draw(rt, "height"))
			x += rapid.Float64Range(0.1, 3).Draw(rt, "step")
		}
		s, err := Build(plain, plain, []Layer{{Shape: table, Mass: 1}}, Options{})
		if err != nil {
			rt.Fatal(err)
		}
		var left [2]float64
		for i, g := range s.Segments {
			var a, b [2]float64
			g.Height.Jet(g.From, a[:])
			g.Height.Jet(g.To, b[:])
			if !(math.Abs(a[0]-table.Height[i]) < 1e-12 && math.Abs(b[0]-table.Height[i+1]) < 1e-12) {
				rt.Fatalf("piece %d goes from %g to %g, rows from %g to %g", i, a[0], b[0], table.Height[i], table.Height[i+1])
			}
			if i > 0 && !(math.Abs(a[1]-left[1]) < 1e-9*(1+math.Abs(a[1]))) {
				rt.Fatalf("the slope jumps from %g to %g", left[1], a[1])
			}
			left = b
			lo, hi := min(a[0], b[0]), max(a[0], b[0])
			for j := range 50 {
				if v := g.Height.At(g.From + g.Length()*float64(j)/49); !(v >= lo-1e-12 && v <= hi+1e-12) {
					rt.Fatalf("%g overshoots [%g, %g]", v, lo, hi)
				}
			}
		}
	})
}

// TestErrors: what Build refuses, and that the error names layer and field.
func TestErrors(t *testing.T) {
	flat := Flat{1}
	nan, inf := math.NaN(), math.Inf(1)
	rows := Table{X: []float64{0, 1}, Height: []float64{0, 1}}
	ran := 0
	for _, c := range []struct {
		field string
		layer Layer
	}{
		{"shape", Layer{Thickness: 1, Mass: 1}},
		{"mass", Layer{Thickness: 1, Shape: flat}},
		{"mass", Layer{Thickness: 1, Shape: flat, Mass: -1}},
		{"mass", Layer{Thickness: 1, Shape: flat, Mass: nan}},
		{"mass", Layer{Thickness: 1, Shape: flat, Mass: inf}},
		{"thickness", Layer{Shape: flat, Mass: 1}},
		{"thickness", Layer{Thickness: -1, Shape: flat, Mass: 1}},
		{"thickness", Layer{Thickness: nan, Shape: flat, Mass: 1}},
		{"thickness", Layer{Thickness: inf, Shape: flat, Mass: 1}},
		{"loss", Layer{Thickness: 1, Shape: flat, Mass: 1, Loss: -1}},
		{"loss", Layer{Thickness: 1, Shape: flat, Mass: 1, Loss: nan}},
		{"height", Layer{Thickness: 1, Shape: Flat{nan}, Mass: 1}},
		{"height", Layer{Thickness: 1, Shape: Flat{inf}, Mass: 1}},
		{"height", Layer{Thickness: 1, Shape: Ramp{nan, 1}, Mass: 1}},
		{"height_end", Layer{Thickness: 1, Shape: Ramp{1, inf}, Mass: 1}},
		{"thickness", Layer{Thickness: 1, Shape: Point{1}, Mass: 1}},
		{"loss", Layer{Shape: Point{1}, Mass: 1, Loss: 1}},
		{"strength", Layer{Shape: Point{nan}, Mass: 1}},
		{"strength", Layer{Shape: Point{inf}, Mass: 1}},
		{"width", Layer{Shape: Hump{1, 0}, Mass: 1}},
		{"width", Layer{Shape: Hump{1, nan}, Mass: 1}},
		{"width", Layer{Shape: Hump{1, inf}, Thickness: 1, Mass: 1}},
		{"height", Layer{Shape: Hump{nan, 1}, Thickness: 1, Mass: 1}},
		{"width", Layer{Shape: Bell{1, -1}, Mass: 1}},
		{"height", Layer{Shape: Bell{inf, 1}, Thickness: 1, Mass: 1}},
		{"width", Layer{Shape: Rise{0, 1, 0}, Mass: 1}},
		{"height", Layer{Shape: Rise{nan, 1, 1}, Thickness: 1, Mass: 1}},
		{"height_end", Layer{Shape: Rise{0, nan, 1}, Thickness: 1, Mass: 1}},
		{"thickness", Layer{Shape: Hump{1e-9, 1}, Mass: 1}},
		{"thickness", Layer{Shape: Bell{1e-9, 1}, Mass: 1}},
		{"thickness", Layer{Shape: Rise{1, 1, 1}, Mass: 1}},
		{"thickness", Layer{Thickness: 2, Shape: rows, Mass: 1}},
		{"file", Layer{Shape: Table{X: []float64{0}, Height: []float64{0}}, Mass: 1}},
		{"file", Layer{Shape: Table{X: []float64{0, 1}, Height: []float64{0}}, Mass: 1}},
		{"file", Layer{Shape: Table{X: []float64{0, 0}, Height: []float64{0, 1}}, Mass: 1}},
		{"file", Layer{Shape: Table{X: []float64{0, nan}, Height: []float64{0, 1}}, Mass: 1}},
		{"file", Layer{Shape: Table{X: []float64{0, 1}, Height: []float64{0, inf}}, Mass: 1}},
		{"file", Layer{Shape: Table{X: []float64{0, 1}, Height: []float64{0, 1}, Mass: []float64{1}}, Mass: 1}},
		{"file", Layer{Shape: Table{X: []float64{0, 1}, Height: []float64{0, 1}, Mass: []float64{1, 0}}, Mass: 1}},
	} {
		ran++
		_, err := Build(plain, plain, []Layer{{Thickness: 1, Shape: flat, Mass: 1}, c.layer}, Options{Cut: 1e-6})
		var at *LayerError
		if !errors.As(err, &at) {
			t.Errorf("%+v: error %v, want a *LayerError", c.layer, err)
			continue
		}
		if at.Layer != 1 || at.Field != c.field || !strings.HasPrefix(at.Error(), "layer[1]."+c.field+": ") {
			t.Errorf("%+v: error %q, want field %s", c.layer, at, c.field)
		}
	}
	if ran != 39 {
		t.Errorf("ran %d cases", ran)
	}
	for _, lead := range []Lead{{}, {Mass: nan}, {Mass: inf}, {Mass: 1, Height: nan}, {Mass: 1, Height: inf}} {
		if _, err := Build(lead, plain, nil, Options{}); err == nil || !strings.HasPrefix(err.Error(), "entry: ") {
			t.Errorf("entry %+v: error %v", lead, err)
		}
		if _, err := Build(plain, lead, nil, Options{}); err == nil || !strings.HasPrefix(err.Error(), "exit: ") {
			t.Errorf("exit %+v: error %v", lead, err)
		}
	}
	if _, err := Build(plain, plain, nil, Options{Drop: nan}); err == nil {
		t.Error("a drop that is not a number: no error")
	}
	if _, err := Build(plain, plain, []Layer{{Thickness: 1e9, Shape: flat, Mass: 1}, {Thickness: 1e-9, Shape: flat, Mass: 1}}, Options{}); err == nil {
		t.Error("a layer lost in rounding: no error")
	}
}

// TestThinLayerFarOut: a segment of a thin layer far from 0 has the thickness
// it was given, up to the rounding of its position.
func TestThinLayerFarOut(t *testing.T) {
	s := mustBuild(t, []Layer{{Thickness: 1000, Shape: Flat{0}, Mass: 1}, {Thickness: 1e-6, Shape: Flat{1}, Mass: 1}}, Options{})
	near(t, "thickness", s.Segments[1].Length(), 1e-6, 1000*0x1p-52)
}
