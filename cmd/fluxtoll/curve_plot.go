package main

import (
	"fmt"
	"io"
	"math"
	"strings"

	"fluxtoll/scenarios"
)

// outputColumns is the number of columns of the terminal that the output goes
// to, 0 where it goes elsewhere.
func outputColumns(w io.Writer) int {
	if c, ok := w.(*checkedWriter); ok {
		w = c.Writer
	}
	return terminalWidth(w)
}

// onlyASCII reports whether the output can show nothing else.
func onlyASCII(w io.Writer) bool {
	if c, ok := w.(*checkedWriter); ok {
		w = c.Writer
	}
	_, ascii := w.(asciiWriter)
	return ascii
}

// The sizes of a plot in characters.
const (
	plotMargin   = 9 // for the numbers at the left
	widestPlot   = 100
	leastPlot    = 20
	panelHeight  = 8
	dotsAcross   = 2 // of a character
	dotsDown     = 4
	brailleBlank = 0x2800
)

// curvePlot draws transmission and dwell time over the energy.
func curvePlot(c *scenarios.Curve, columns int, ascii bool) string {
	w := min(columns-1, widestPlot) - plotMargin
	if w < leastPlot || len(c.Energy) < 2 {
		return ""
	}
	p := panel{curve: c, w: w, ascii: ascii}
	text := p.draw("transmission", c.Transmission, 0, 1, func(v float64) float64 { return v }, [2]string{"1", "0"})
	if low, high := spread(c.Dwell); high > 0 {
		title := strings.TrimSpace("dwell time, logarithmic, " + c.Units.Time)
		text += p.draw(strings.TrimSuffix(title, ","), c.Dwell, math.Log(low), math.Log(high), math.Log, [2]string{brief(high), brief(low)})
	}
	first, last := withUnit(c.Energy[0], c.Units.Energy), withUnit(c.Energy[len(c.Energy)-1], c.Units.Energy)
	gap := max(1, w-len(first)-len(last))
	return text + strings.Repeat(" ", plotMargin) + first + strings.Repeat(" ", gap) + last + "\n"
}

// spread is the range of the positive values, widened where it is a point;
// 0, 0 where there is none.
func spread(s scenarios.Series) (low, high float64) {
	low = math.Inf(1)
	for _, v := range s {
		if v > 0 {
			low, high = math.Min(low, v), math.Max(high, v)
		}
	}
	if high == 0 {
		return 0, 0
	}
	if high < 1.01*low {
		low, high = low/1.1, high*1.1
	}
	return low, high
}

// panel is one curve of a plot. Every column of dots spans all that the curve
// does within it, so that no peak is too narrow to be seen.
type panel struct {
	curve *scenarios.Curve
	w     int
	ascii bool
}

// draw plots scale(values) between low and high; marks stand at top and bottom.
func (p panel) draw(title string, values scenarios.Series, low, high float64, scale func(float64) float64, marks [2]string) string {
	dots := make([][]bool, panelHeight*dotsDown)
	for i := range dots {
		dots[i] = make([]bool, p.w*dotsAcross)
	}
	row := func(v float64) int {
		y := math.Round((1 - (scale(v)-low)/(high-low)) * float64(len(dots)-1))
		return int(math.Min(math.Max(y, 0), float64(len(dots)-1)))
	}
	for x := range p.w * dotsAcross {
		if from, to, ok := p.span(values, x); ok {
			for y := row(to); y <= row(from); y++ {
				dots[y][x] = true
			}
		}
	}
	var b strings.Builder
	fmt.Fprintf(&b, "%s%s\n", strings.Repeat(" ", plotMargin), title)
	for line := range panelHeight {
		mark := ""
		switch line {
		case 0:
			mark = marks[0]
		case panelHeight - 1:
			mark = marks[1]
		}
		fmt.Fprintf(&b, "%*s %s\n", plotMargin-1, mark, strings.TrimRight(p.line(dots[line*dotsDown:]), " "+string(rune(brailleBlank))))
	}
	return b.String()
}

// span is the range of the curve within a column of dots: at its edges, on the
// straight lines, and at the points in between.
func (p panel) span(values scenarios.Series, x int) (low, high float64, ok bool) {
	e := p.curve.Energy
	from, size := e[0], (e[len(e)-1]-e[0])/float64(p.w*dotsAcross)
	a, b := from+float64(x)*size, from+float64(x+1)*size
	low, high = math.Inf(1), math.Inf(-1)
	add := func(v float64) {
		if !math.IsNaN(v) {
			low, high, ok = math.Min(low, v), math.Max(high, v), true
		}
	}
	for i := 1; i < len(e); i++ {
		if e[i] < a || e[i-1] > b {
			continue
		}
		for _, at := range []float64{math.Max(a, e[i-1]), math.Min(b, e[i])} {
			add(values[i-1] + (values[i]-values[i-1])*(at-e[i-1])/(e[i]-e[i-1]))
		}
	}
	return low, high, ok
}

// line makes characters of four rows of dots.
func (p panel) line(rows [][]bool) string {
	var b strings.Builder
	for x := range p.w {
		if p.ascii {
			b.WriteByte(asciiDots(rows, x))
		} else {
			b.WriteRune(brailleDots(rows, x))
		}
	}
	return b.String()
}

// brailleDots is the character of a cell (Unicode, block 2800: dots 1 to 3 and
// 7 go down on the left, 4 to 6 and 8 on the right).
func brailleDots(rows [][]bool, x int) rune {
	bits := [dotsDown][dotsAcross]rune{{1, 8}, {2, 16}, {4, 32}, {64, 128}}
	c := rune(brailleBlank)
	for y := range dotsDown {
		for i := range dotsAcross {
			if rows[y][dotsAcross*x+i] {
				c |= bits[y][i]
			}
		}
	}
	if c == brailleBlank {
		return ' '
	}
	return c
}

// asciiDots is the same in halves of a character.
func asciiDots(rows [][]bool, x int) byte {
	upper, lower := false, false
	for i := range dotsAcross {
		upper = upper || rows[0][dotsAcross*x+i] || rows[1][dotsAcross*x+i]
		lower = lower || rows[2][dotsAcross*x+i] || rows[3][dotsAcross*x+i]
	}
	switch {
	case upper && lower:
		return ':'
	case upper:
		return '\''
	case lower:
		return '.'
	}
	return ' '
}
