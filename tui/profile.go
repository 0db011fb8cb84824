package tui

import (
	"fmt"
	"math"

	"fluxtoll/tui/canvas"
)

// heights is the vertical scale of the profile.
type heights struct{ low, high float64 }

// heights spans the structure in view and the packet's energies.
func (s stage) heights() heights {
	o := s.outlook
	h := heights{o.Energy - 1.5*o.Spread, o.Energy + 1.5*o.Spread}
	for i := range s.moment.Low {
		h.low, h.high = math.Min(h.low, s.moment.Low[i]), math.Max(h.high, s.moment.High[i])
	}
	margin := 0.06 * (h.high - h.low)
	return heights{h.low - margin, h.high + margin}
}

// dots is the height of an energy in dots.
func (h heights) dots(e float64, high int) int {
	return max(1, min(high, 1+int(math.Round((e-h.low)/(h.high-h.low)*float64(high-1)))))
}

// profile draws the course of the height and, against it, the mean energy as
// a line and its spread as two dotted ones, and the resonances.
func (s stage) profile(b canvas.Box) {
	b.Plot()
	wide, high := b.Dots()
	h := s.heights()
	before := -1
	for x := range wide {
		at := h.dots(s.height(x), high)
		s.body(b, x, at, before)
		before = at
	}
	for _, x := range s.outlook.Deltas {
		if c := s.column(x); c >= 0 {
			b.Fill(2*c, high, canvas.Body)
		}
	}
	o := s.outlook
	for x := range wide {
		b.Dot(x, high-h.dots(o.Energy, high), canvas.Band)
		if x%4 == 0 {
			b.Dot(x, high-h.dots(o.Energy-o.Spread, high), canvas.Band)
			b.Dot(x, high-h.dots(o.Energy+o.Spread, high), canvas.Band)
		}
	}
	label := withUnit(fmt.Sprintf("%s ± %s", short(o.Energy), short2(o.Spread)), o.Units.Energy)
	row := (high - h.dots(o.Energy, high)) / 4
	s.levels(b, h)
	x := b.Text(2, row, canvas.Faint, " "+label+" ")
	s.nearest(b, x+1, row)
}

// short2 writes a number with two digits.
func short2(v float64) string { return fmt.Sprintf("%.2g", v) }

// body draws one column of dots of the structure: a light texture below a
// firm edge.
func (s stage) body(b canvas.Box, x, at, before int) {
	_, high := b.Dots()
	for y := 1; y < at; y++ {
		if (x+y)%2 == 0 {
			b.Dot(x, high-y, canvas.Body)
		}
	}
	low, top := at, at
	if before > 0 {
		low, top = min(at, before), max(at, before)
	}
	for y := low; y <= top; y++ {
		b.Dot(x, high-y, canvas.Body)
	}
}

// height is what stands for a column that holds a jump or a thin layer: the
// highest, or the lowest where that is a well narrower than the column.
func (s stage) height(x int) float64 {
	low, high := s.value(s.moment.Low, x), s.value(s.moment.High, x)
	leftLow, rightLow := s.value(s.moment.Low, max(x-1, 0)), s.value(s.moment.Low, x+1)
	if low < leftLow && low < rightLow {
		return low
	}
	return high
}
