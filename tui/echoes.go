package tui

import (
	"math"
	"strconv"

	"fluxtoll/tui/canvas"
)

// echoes numbers the parts of a split pulse, each on top of its highest flow;
// one that would touch the number before is left out.
func (a arrivals) echoes(l lane) {
	s := a.scale(l)
	if s.top <= 0 || l.predicted == nil || a.end() <= 0 {
		return
	}
	_, high := l.Dots()
	free := 0
	for _, e := range l.echoes {
		text := strconv.Itoa(e.Number)
		at := int(e.Time / a.end() * float64(l.Wide))
		if e.Time > a.moment.Time || at < free || at+len(text) > l.Wide {
			continue
		}
		level := max(0, int(math.Round(s.part(e.Height)*float64(high))))
		l.Text(at, max(0, l.High-1-(level+3)/4), canvas.Strong, text)
		free = at + len(text) + 1
	}
}
