package tui

import (
	"math"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// spectrum draws the packet's energy distribution, what becomes of it once
// the packet has left, and T(E) over it.
type spectrum struct {
	canvas.Box
	data   scenarios.Spectrum
	energy float64
	unit   string
	side   scenarios.Side
	parted bool // the packet has left
}

func (s spectrum) draw() {
	plot := s.Inside(0, 1, s.Wide, s.High-1)
	if s.High > 3 {
		plot = s.Inside(0, 1, s.Wide, s.High-2)
		s.axis(s.Inside(0, s.High-1, s.Wide, 1))
	}
	plot.Plot()
	top := 0.0
	for _, v := range s.data.Sent {
		top = math.Max(top, v)
	}
	s.fill(plot, top)
	s.curve(plot)
	s.caption(s.Inside(0, 0, s.Wide, 1))
}

// fill draws the distribution, parted into what is transmitted, below, and
// what is reflected, above it.
func (s spectrum) fill(b canvas.Box, top float64) {
	wide, high := b.Dots()
	through, back := canvas.Right, canvas.Left
	if s.side == scenarios.FromRight {
		through, back = back, through
	}
	for x := range wide {
		from, to := s.bins(x, wide)
		var sent, transmitted, reflected float64
		for i := from; i < to; i++ {
			v := s.data.Sent[i] / float64(to-from) / top
			sent += v
			transmitted += v * s.data.Transmission[i]
			reflected += v * s.data.Reflection[i]
		}
		height := func(v float64) int { return int(math.Round(v * float64(high-1))) }
		if !s.parted {
			b.Fill(x, height(sent), canvas.Still)
			continue
		}
		for y := range height(sent) {
			switch {
			case y < height(transmitted):
				b.Dot(x, high-1-y, through)
			case y >= height(sent)-height(reflected):
				b.Dot(x, high-1-y, back)
			}
		}
	}
}

func (s spectrum) bins(x, wide int) (from, to int) {
	n := len(s.data.Sent)
	from = x * n / wide
	return from, min(n, max(from+1, (x+1)*n/wide))
}

// curve draws T(E), 0 at the bottom and 1 at the top; narrow resonances reach
// as high as they do.
func (s spectrum) curve(b canvas.Box) {
	wide, high := b.Dots()
	before := -1
	for x := range wide {
		from, to := s.bins(x, wide)
		peak := 0.0
		for i := from; i < to; i++ {
			peak = math.Max(peak, s.data.Peak[i])
		}
		at := int(math.Round(math.Min(peak, 1) * float64(high-1)))
		low, top := at, at
		if before >= 0 {
			low, top = min(at, before+1), max(at, before-1)
		}
		for y := low; y <= top; y++ {
			b.Invert(x, high-1-y, canvas.Strong)
		}
		before = at
	}
}

func (s spectrum) caption(b canvas.Box) {
	long, brief := "energies of the packet; line: T from 0 to 1", "energies, line: T"
	if s.parted {
		long, brief = "energies of what is transmitted and reflected; line: T", "transmitted, reflected, T"
	}
	if len(long) > b.Wide {
		long = brief
	}
	b.Text(0, 0, canvas.Faint, cut(long, b.Wide))
}

// axis numbers the energies.
func (s spectrum) axis(b canvas.Box) {
	marks, f := ticks(s.data.From, s.data.To, b.Wide/8)
	b.TextRight(b.Wide, 0, canvas.Faint, s.unit)
	for _, e := range marks {
		text := f.text(e)
		c := int((e-s.data.From)/(s.data.To-s.data.From)*float64(b.Wide)) - len(text)/2
		if c >= 0 && c+len(text) < b.Wide-len(s.unit) {
			b.Text(c, 0, canvas.Faint, text)
		}
	}
}
