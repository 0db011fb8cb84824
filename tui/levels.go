package tui

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strconv"
	"unicode/utf8"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// levels draws the resonances as lines within the structure: those nearest the
// mean energy first, none that would touch one before.
func (s stage) levels(b canvas.Box, h heights) {
	from, to := s.span()
	wide, high := b.Dots()
	var drawn []int
	for i, e := range s.energies() {
		y := h.dots(e, high)
		near := func(other int) bool { return other-y < 2 && y-other < 2 }
		if e < h.low || e > h.high || slices.ContainsFunc(drawn, near) {
			continue
		}
		style := canvas.Band
		if i == 0 {
			style = canvas.Strong
		}
		for x := max(0, from); x <= min(to, wide-1); x++ {
			b.Dot(x, high-y, style)
		}
		drawn = append(drawn, y)
	}
}

// energies of the resonances, those nearest the mean energy first.
func (s stage) energies() []float64 {
	var list []float64
	for _, r := range s.outlook.Resonances {
		list = append(list, r.Energy)
	}
	away := func(e float64) float64 { return math.Abs(e - s.outlook.Energy) }
	slices.SortStableFunc(list, func(a, b float64) int { return cmp.Compare(away(a), away(b)) })
	return list
}

// span is where the structure begins and ends, in columns of dots, in view or
// not.
func (s stage) span() (from, to int) {
	w := s.moment.Window
	at := func(x float64) int {
		part := (x - w.From) / (w.To - w.From)
		return int(math.Floor(math.Max(-1, math.Min(2, part)) * float64(2*s.Wide)))
	}
	return at(0), at(s.outlook.Width)
}

// wideInside is the width in cells from which there is room for words within the
// structure.
const wideInside = 60

// room is the longest piece of a line, from a column on, before or behind the
// structure, or within it if that is wide.
func (s stage) room(x, wide int) (start, end int) {
	from, to := s.span()
	from, to = max(0, from/2), min(wide, to/2)
	places := [][2]int{{x, min(from, wide) - 1}, {max(x, to+2), wide - 1}}
	if to-from >= wideInside {
		places = append(places, [2]int{max(x, from+3), to - 3})
	}
	best := [2]int{x, x}
	for _, p := range places {
		if p[1]-p[0] > best[1]-best[0] {
			best = p
		}
	}
	return best[0], best[1]
}

// nearest writes what is known of the resonance nearest the mean energy in a
// line, from a column on.
func (s stage) nearest(b canvas.Box, x, row int) {
	n := s.outlook.Nearest()
	if n == nil {
		return
	}
	x, end := s.room(x, b.Wide)
	for _, text := range s.resonance(n) {
		if utf8.RuneCountInString(text) <= end-x {
			b.Text(x, row, canvas.Faint, text)
			return
		}
	}
}

// resonance says it in fewer and fewer words.
func (s stage) resonance(n *scenarios.SeenResonance) []string {
	o := s.outlook
	energy := withUnit(certain(n.Energy, n.EnergyError), o.Units.Energy)
	width := withUnit(certain(n.Width, n.WidthError), o.Units.Energy)
	life := withUnit(certain(n.Lifetime, n.LifetimeError), o.Units.Time)
	name := "resonance"
	if k := len(o.Resonances); k > 1 {
		name = fmt.Sprintf("nearest of %d resonances", k)
	}
	return []string{
		" " + name + " " + energy + ", width " + width + ", lifetime " + life + " ",
		" resonance " + energy + ", width " + width + ", lifetime " + life + " ",
		" resonance " + energy + ", lifetime " + life + " ",
		" resonance " + energy + " ",
	}
}

// certain writes a number with up to four digits, none of them below its error.
func certain(v, err float64) string {
	digits := 4
	if err > 0 {
		digits = max(1, min(digits, int(math.Floor(math.Log10(math.Abs(v)/err)))))
	}
	return strconv.FormatFloat(v, 'g', digits, 64)
}
