package canvas

import (
	"unicode"
	"unicode/utf8"

	"golang.org/x/text/width"
)

// blank is an empty cell of a plot: as wide as its neighbours with dots in
// every font.
const blank = 0x2800

// cell is a character, or dots where r is blank. Rune 0 is a space.
type cell struct {
	r     rune
	dots  uint8
	style Style
}

// Canvas is a grid of cells, W across and H down.
type Canvas struct {
	W, H  int
	cells []cell
}

// Reset makes the canvas empty and of the given size, at least 1x1.
func (c *Canvas) Reset(w, h int) {
	c.W, c.H = max(w, 1), max(h, 1)
	if n := c.W * c.H; n > cap(c.cells) {
		c.cells = make([]cell, n)
	} else {
		c.cells = c.cells[:n]
		clear(c.cells)
	}
}

// at is the cell, or nil outside the canvas.
func (c *Canvas) at(x, y int) *cell {
	if x < 0 || y < 0 || x >= c.W || y >= c.H {
		return nil
	}
	return &c.cells[y*c.W+x]
}

// Put draws one character. One that would not fill exactly one cell is drawn
// as a question mark.
func (c *Canvas) Put(x, y int, s Style, r rune) {
	if p := c.at(x, y); p != nil {
		*p = cell{r: oneCell(r), style: s}
	}
}

// oneCell replaces what is wide, combining, or obeyed by a terminal.
func oneCell(r rune) rune {
	if r < 0x300 {
		if r < ' ' || r >= 0x7f && r < 0xa0 {
			return '?'
		}
		return r
	}
	kind := width.LookupRune(r).Kind()
	if kind == width.EastAsianWide || kind == width.EastAsianFullwidth || !unicode.IsPrint(r) || unicode.Is(unicode.M, r) {
		return '?'
	}
	return r
}

// Text draws a line of text from x on, one cell a character, cut off at the
// edge, and returns where it ends.
func (c *Canvas) Text(x, y int, s Style, text string) int {
	for _, r := range text {
		c.Put(x, y, s, r)
		x++
	}
	return x
}

// TextRight draws text that ends before x.
func (c *Canvas) TextRight(x, y int, s Style, text string) {
	c.Text(x-utf8.RuneCountInString(text), y, s, text)
}

// Box is a rectangle of cells of a canvas.
type Box struct {
	*Canvas
	X, Y, Wide, High int
}

// Box returns a rectangle of the canvas.
func (c *Canvas) Box(x, y, wide, high int) Box { return Box{c, x, y, max(wide, 0), max(high, 0)} }

// Text draws text within the box.
func (b Box) Text(x, y int, s Style, text string) int {
	for _, r := range text {
		b.Put(x, y, s, r)
		x++
	}
	return x
}

// TextRight draws text that ends before x, within the box.
func (b Box) TextRight(x, y int, s Style, text string) {
	b.Text(x-utf8.RuneCountInString(text), y, s, text)
}

// Put draws one character within the box.
func (b Box) Put(x, y int, s Style, r rune) {
	if x >= 0 && y >= 0 && x < b.Wide && y < b.High {
		b.Canvas.Put(b.X+x, b.Y+y, s, r)
	}
}

// Inside returns a part of the box.
func (b Box) Inside(x, y, wide, high int) Box {
	return b.Canvas.Box(b.X+x, b.Y+y, min(wide, b.Wide-x), min(high, b.High-y))
}

// Plot empties the box for dots.
func (b Box) Plot() {
	for y := range b.High {
		for x := range b.Wide {
			b.Put(x, y, Plain, blank)
		}
	}
}

// Dots is the size of the box in dots.
func (b Box) Dots() (wide, high int) { return 2 * b.Wide, 4 * b.High }

// cellOf is the cell of a dot and the dot's bit, or nil outside the box. Dots
// count from the top left.
func (b Box) cellOf(x, y int) (*cell, uint8) {
	if x < 0 || y < 0 || x >= 2*b.Wide || y >= 4*b.High {
		return nil, 0
	}
	return b.at(b.X+x/2, b.Y+y/4), dotBit(x%2, y%4)
}

// dotBit is the bit of a dot in a cell: Unicode numbers the dots 1 2 3 7 down
// the left and 4 5 6 8 down the right.
func dotBit(x, y int) uint8 {
	return [2][4]uint8{{0x01, 0x02, 0x04, 0x40}, {0x08, 0x10, 0x20, 0x80}}[x][y]
}

// Dot sets a dot and gives its cell the style.
func (b Box) Dot(x, y int, s Style) {
	p, bit := b.cellOf(x, y)
	if p == nil {
		return
	}
	if p.r != blank {
		*p = cell{r: blank}
	}
	p.dots |= bit
	p.style = s
}

// Invert turns a dot over: a line is seen on an empty ground as dots, with the
// style, and on a filled one as a gap.
func (b Box) Invert(x, y int, s Style) {
	p, bit := b.cellOf(x, y)
	if p == nil {
		return
	}
	if p.r != blank {
		*p = cell{r: blank}
	}
	if p.dots == 0 {
		p.style = s
	}
	p.dots ^= bit
}

// Fill sets the dots of a column of dots from the bottom up to a height.
func (b Box) Fill(x, height int, s Style) {
	_, high := b.Dots()
	for i := range min(height, high) {
		b.Dot(x, high-1-i, s)
	}
}
