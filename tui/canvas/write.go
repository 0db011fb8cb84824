package canvas

import (
	"math/bits"
	"strings"
	"unicode/utf8"
)

// Output is what the canvas is written for.
type Output struct {
	Depth Depth
	UTF8  bool // false: nothing beyond ASCII
}

// rune is the character of a cell.
func (p *cell) char(unicode bool) rune {
	switch {
	case p.r == 0:
		return ' '
	case p.r == blank && unicode:
		return blank | rune(p.dots)
	case p.r == blank:
		return dotsASCII(p.dots)
	case unicode || p.r < utf8.RuneSelf:
		return p.r
	}
	return ascii(p.r)
}

// dotsASCII stands for dots by where and how many they are.
func dotsASCII(d uint8) rune {
	const upper, lower = 0x01 | 0x02 | 0x08 | 0x10, 0x04 | 0x20 | 0x40 | 0x80
	switch n := bits.OnesCount8(d); {
	case d == 0:
		return ' '
	case n >= 6:
		return '#'
	case d&upper == 0:
		return '.'
	case d&lower == 0:
		return '\''
	}
	return ':'
}

// ascii stands for the characters that the screens use.
func ascii(r rune) rune {
	switch r {
	case '›', '»', '▸':
		return '>'
	case '‹', '«', '◂':
		return '<'
	case '·', '…':
		return '.'
	case '×':
		return 'x'
	case '─', '━', '–', '−':
		return '-'
	case '│', '┆', '┊', '┃':
		return '|'
	case '■':
		return '#'
	case '‖':
		return '='
	case '≠':
		return '!'
	case '±':
		return '~'
	case '²':
		return '2'
	case 'ψ', 'φ':
		return 'p'
	case '↑':
		return '^'
	case '↓':
		return 'v'
	case '←':
		return '<'
	case '→':
		return '>'
	}
	return '?'
}

// String writes the lines, joined by line feeds, with colour codes only where
// the style changes. Without colours, blanks at the end of a line are left
// out.
func (c *Canvas) String(o Output) string {
	var b strings.Builder
	b.Grow(c.W * c.H * 4)
	table := codes(o.Depth)
	for y := range c.H {
		if y > 0 {
			b.WriteByte('\n')
		}
		c.line(&b, c.cells[y*c.W:(y+1)*c.W], o, &table)
	}
	return b.String()
}

// line writes one line; it begins and ends without any colour.
func (c *Canvas) line(b *strings.Builder, row []cell, o Output, table *[styles]string) {
	for len(row) > 0 && row[len(row)-1].char(o.UTF8) == ' ' && row[len(row)-1].style != Picked {
		row = row[:len(row)-1]
	}
	code := ""
	for i := range row {
		p := &row[i]
		if next := table[p.style]; next != code && (p.r != 0 && (p.r != blank || p.dots != 0) || p.style == Picked) {
			if code != "" {
				b.WriteString("\x1b[0m")
			}
			if code = next; code != "" {
				b.WriteString("\x1b[" + code + "m")
			}
		}
		b.WriteRune(p.char(o.UTF8))
	}
	if code != "" {
		b.WriteString("\x1b[0m")
	}
}
