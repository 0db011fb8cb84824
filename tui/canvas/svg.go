package canvas

import (
	"bufio"
	"fmt"
	"io"
	"strings"
)

// Size of a cell in an SVG, and of its text.
const (
	cellWide = 8.0
	cellHigh = 16.0
	baseline = 12.5
	fontSize = 13.0
	dotSize  = 1.45
)

// SVG writes the canvas as a drawing on a white ground: dots as circles, text
// as text.
func (c *Canvas) SVG(w io.Writer) error {
	b := bufio.NewWriter(w)
	wide, high := float64(c.W)*cellWide, float64(c.H)*cellHigh
	fmt.Fprintf(b, `<svg xmlns="http://www.w3.org/2000/svg" width="%g" height="%g" viewBox="0 0 %g %g">`+"\n", wide, high, wide, high)
	fmt.Fprintf(b, `<rect width="%g" height="%g" fill="#ffffff"/>`+"\n", wide, high)
	fmt.Fprintf(b, `<g font-family="monospace" font-size="%g" fill="#202020">`+"\n", fontSize)
	for y := range c.H {
		c.svgLine(b, y)
	}
	fmt.Fprint(b, "</g>\n")
	for s := range styles {
		c.svgDots(b, s)
	}
	fmt.Fprint(b, "</svg>\n")
	return b.Flush()
}

// svgLine writes the runs of text of one line.
func (c *Canvas) svgLine(w io.Writer, y int) {
	for x := 0; x < c.W; {
		p := c.at(x, y)
		if p.r == 0 || p.r == blank || p.r == ' ' {
			x++
			continue
		}
		end, text := x, strings.Builder{}
		for q := p; q != nil && q.style == p.style && q.r != 0 && q.r != blank; q = c.at(end, y) {
			text.WriteString(escape(q.r))
			end++
		}
		fmt.Fprintf(w, `<text x="%g" y="%g" textLength="%g" xml:space="preserve"%s>%s</text>`+"\n",
			float64(x)*cellWide, float64(y)*cellHigh+baseline, float64(end-x)*cellWide, look(p.style), text.String())
		x = end
	}
}

func escape(r rune) string {
	switch r {
	case '<':
		return "&lt;"
	case '>':
		return "&gt;"
	case '&':
		return "&amp;"
	}
	return string(r)
}

// look is the style as attributes.
func look(s Style) string {
	if s == Strong || s == Picked {
		return ` font-weight="bold"`
	}
	if h := hex(s); h != "" {
		return ` fill="#` + h + `"`
	}
	return ""
}

// svgDots writes all dots of one style as one path.
func (c *Canvas) svgDots(w io.Writer, s Style) {
	var path strings.Builder
	for y := range c.H {
		for x := range c.W {
			if p := c.at(x, y); p.r == blank && p.style == s {
				p.trace(&path, float64(x)*cellWide, float64(y)*cellHigh)
			}
		}
	}
	if path.Len() > 0 {
		fmt.Fprintf(w, `<path d="%s"%s/>`+"\n", path.String(), look(s))
	}
}

// trace adds the cell's dots to a path.
func (p *cell) trace(path *strings.Builder, x, y float64) {
	for i := range 2 {
		for j := range 4 {
			if p.dots&dotBit(i, j) != 0 {
				fmt.Fprintf(path, "M%.2f %.2fa%g %g 0 1 0 %g 0a%g %g 0 1 0 -%g 0",
					x+cellWide*(0.25+0.5*float64(i))-dotSize, y+cellHigh*(0.125+0.25*float64(j)),
					dotSize, dotSize, 2*dotSize, dotSize, dotSize, 2*dotSize)
			}
		}
	}
}
