package tui

import (
	"unicode/utf8"

	"fluxtoll/tui/canvas"
)

// helpWide is the width of a column of the help.
const helpWide = 50

// helpLine is a heading, or a key with what it does.
type helpLine struct{ key, does string }

// helpLines lists the bindings by section.
func helpLines(list []binding) []helpLine {
	var out []helpLine
	section := ""
	for _, b := range list {
		if b.section != section {
			if section = b.section; len(out) > 0 {
				out = append(out, helpLine{})
			}
			out = append(out, helpLine{key: section})
		}
		out = append(out, helpLine{b.Help().Key, b.Help().Desc})
	}
	return out
}

// drawHelp shows the lines in as many columns as fit, from a line on.
func drawHelp(b canvas.Box, list []binding, scroll int) {
	lines := helpLines(list)
	columns := max(1, b.Wide/helpWide)
	if b.Wide >= 78 && columns == 1 {
		columns = 2
	}
	rows := max(1, b.High-1)
	wide := b.Wide / columns
	if need := (len(lines) + columns - 1) / columns; need > rows {
		scroll = min(scroll, len(lines)-rows*columns)
	} else {
		rows, scroll = need, 0
	}
	for i, line := range lines[max(scroll, 0):] {
		if i >= rows*columns {
			break
		}
		line.draw(b.Inside(i/rows*wide, i%rows, wide-1, 1))
	}
	b.Text(0, b.High-1, canvas.Faint, cut("esc close  ↑ ↓ scroll", b.Wide))
}

func (l helpLine) draw(b canvas.Box) {
	if l.does == "" {
		b.Text(0, 0, canvas.Strong, cut(l.key, b.Wide))
		return
	}
	const keys = 11
	b.TextRight(keys, 0, canvas.Plain, l.key)
	b.Text(max(keys, utf8.RuneCountInString(l.key))+1, 0, canvas.Faint, cut(l.does, b.Wide-keys-1))
}
