package tui

import (
	"fmt"
	"math"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// decades is the range of the logarithmic density.
const decades = 12

// scale turns densities into heights.
type scale struct {
	top float64
	log bool
}

// part is where a density stands between 0 and 1.
func (s scale) part(v float64) float64 {
	if !s.log {
		return v / s.top
	}
	if v <= 0 {
		return 0
	}
	return 1 + math.Log10(v/s.top)/decades
}

// roundUp is the next of 1, 1.5, 2, 3, 5, 7, 10 times a power of ten.
func roundUp(v float64) float64 {
	if !(v > 0) || math.IsInf(v, 0) {
		return 1
	}
	power := math.Pow(10, math.Floor(math.Log10(v)))
	for _, f := range []float64{1, 1.5, 2, 3, 5, 7} {
		if v <= f*power {
			return f * power
		}
	}
	return 10 * power
}

// rescale keeps the top of the scale for as long as the density fits and
// fills more than a third of it, so that the picture does not jump. It never
// falls below a fiftieth of the largest density at the start: what is less
// shall look like less.
func rescale(top float64, o *scenarios.Outlook, m *scenarios.Moment) float64 {
	peak := o.Top / 50
	for _, d := range m.Density {
		peak = math.Max(peak, d)
	}
	if peak <= 0 || peak <= top && peak > top/3.5 {
		return math.Max(top, math.SmallestNonzeroFloat64)
	}
	return roundUp(peak * 1.05)
}

// stage draws the packet over the structure.
type stage struct {
	canvas.Box
	moment  *scenarios.Moment
	outlook *scenarios.Outlook
	scale   scale
	ghost   bool
}

func (s stage) draw() {
	high := s.High - 2
	profile := max(1, (high*2+3)/5)
	density := s.Inside(0, 0, s.Wide, high-profile)
	s.density(density)
	s.strip(s.Inside(0, density.High, s.Wide, 1))
	s.profile(s.Inside(0, density.High+1, s.Wide, profile))
	s.axis(s.Inside(0, s.High-1, s.Wide, 1))
}

// value reads a column of the moment for a column of dots; the moment may
// still have been made for another width.
func (s stage) value(list []float64, x int) float64 {
	if len(list) == 0 {
		return 0
	}
	return list[min(len(list)-1, x*len(list)/(2*s.Wide))]
}

// flow is the mean flow of a cell, weighted with the density.
func (s stage) flow(cell int) (flow, density float64) {
	for x := 2 * cell; x < 2*cell+2; x++ {
		d := s.value(s.moment.Density, x)
		flow, density = flow+d*s.value(s.moment.Flow, x), density+d
	}
	if density > 0 {
		flow /= density
	}
	return flow, density / 2
}

// column is the cell of a position, or -1.
func (s stage) column(x float64) int {
	w := s.moment.Window
	c := int(math.Floor((x - w.From) / (w.To - w.From) * float64(s.Wide)))
	if x == w.To {
		c = s.Wide - 1
	}
	if c < 0 || c >= s.Wide {
		return -1
	}
	return c
}

func (s stage) density(b canvas.Box) {
	b.Plot()
	s.lines(b)
	_, high := b.Dots()
	for cell := range s.Wide {
		flow, _ := s.flow(cell)
		style := flowStyle(flow)
		for x := 2 * cell; x < 2*cell+2; x++ {
			mean := s.level(s.value(s.moment.Density, x), high)
			b.Fill(x, mean, style)
			if peak := s.level(s.value(s.moment.Peak, x), high); peak > mean+1 && peak <= high {
				b.Dot(x, high-peak, style)
			}
		}
	}
	if s.ghost {
		s.outline(b)
	}
	s.captions(b)
}

// level is the height of a density in dots.
func (s stage) level(v float64, high int) int {
	return max(0, min(high+1, int(math.Round(s.scale.part(v)*float64(high)))))
}

// lines are the faces of the layers, where there is room between them, and
// the two planes.
func (s stage) lines(b canvas.Box) {
	put := func(x float64, r rune) {
		if c := s.column(x); c >= 0 {
			for y := range b.High {
				b.Put(c, y, canvas.Faint, r)
			}
		}
	}
	if faces := s.outlook.Faces; len(faces) < s.Wide/2 {
		for _, x := range faces {
			put(x, '┊')
		}
	}
	if p := s.outlook.Planes; p != nil {
		put(p.Near, '┆')
		put(p.Far, '┆')
	}
}

// outline is the free packet: dots on empty ground, gaps in what is filled.
func (s stage) outline(b canvas.Box) {
	wide, high := b.Dots()
	before := -1
	for x := range wide {
		at := min(s.level(s.value(s.moment.Free, x), high), high)
		if at > 0 || before > 0 {
			low, top := at, at
			if before >= 0 {
				low, top = min(at, before+1), max(at, before-1)
			}
			for y := max(low, 1); y <= max(top, 1); y++ {
				b.Invert(x, high-y, canvas.Ghost)
			}
		}
		before = at
	}
}

// captions name scale and planes along the top.
func (s stage) captions(b canvas.Box) {
	if s.outlook.Refused != "" {
		for y, line := range wrap(s.outlook.Refused, b.Wide-4) {
			b.Text(2, y, canvas.Strong, line)
		}
		return
	}
	unit := ""
	if s.outlook.Units.Length != "" {
		unit = "/" + s.outlook.Units.Length
	}
	text := "density to " + short(s.scale.top) + unit
	if s.scale.log {
		text = fmt.Sprintf("density, log, %s to %s%s", short(s.scale.top*math.Pow(10, -decades)), short(s.scale.top), unit)
	}
	if s.ghost {
		text += ", outline: free packet"
	}
	b.Text(2, 0, canvas.Faint, cut(text, b.Wide-4))
	if p := s.outlook.Planes; p != nil && b.High > 1 {
		s.plane(b, p.Near, "near")
		s.plane(b, p.Far, "far")
	}
}

// plane writes a plane's name beside its line.
func (s stage) plane(b canvas.Box, x float64, name string) {
	switch c := s.column(x); {
	case c < 0:
	case c < s.Wide/2:
		b.Text(c+2, 1, canvas.Faint, name)
	default:
		b.TextRight(c-1, 1, canvas.Faint, name)
	}
}

// strip says in characters which way the probability flows.
func (s stage) strip(b canvas.Box) {
	for cell := range s.Wide {
		flow, density := s.flow(cell)
		if s.scale.part(density) > 0.004 {
			b.Put(cell, 0, flowStyle(flow), flowSign(flow))
		}
	}
}

// axis numbers the positions.
func (s stage) axis(b canvas.Box) {
	w := s.moment.Window
	marks, f := ticks(w.From, w.To, s.Wide/12)
	unit := s.outlook.Units.Length
	end := s.Wide - len(unit) - 1
	b.Text(end+1, 0, canvas.Faint, unit)
	for _, x := range marks {
		text := f.text(x)
		c := s.column(x) - len(text)/2
		if c >= 0 && c+len(text) < end {
			b.Text(c, 0, canvas.Faint, text)
		}
	}
}
