package main

import (
	"strings"
	"unicode/utf8"
)

// table is rows of cells; the first column stands to the left, the others to
// the right, and the last to the left again.
type table [][]string

// String lays the table out with one space between columns.
func (t table) String() string {
	widths := t.widths()
	var b strings.Builder
	for _, row := range t {
		line := ""
		for i, cell := range row {
			pad := strings.Repeat(" ", widths[i]-utf8.RuneCountInString(cell))
			if i > 0 && i < len(row)-1 {
				cell, pad = pad+cell, ""
			}
			line += cell + pad + " "
		}
		b.WriteString(strings.TrimRight(line, " ") + "\n")
	}
	return b.String()
}

// width is that of the longest line.
func (t table) width() int {
	sum := -1
	for _, w := range t.widths() {
		sum += w + 1
	}
	return sum
}

// widths are those of the columns.
func (t table) widths() []int {
	var widths []int
	for _, row := range t {
		for i, cell := range row {
			if i == len(widths) {
				widths = append(widths, 0)
			}
			widths[i] = max(widths[i], utf8.RuneCountInString(cell))
		}
	}
	return widths
}

// paragraph breaks words into lines of at most 79 characters, the first after
// a label and the others below the first word.
func paragraph(label, text string) string {
	const most, indent = 79, 10
	line := label + strings.Repeat(" ", max(1, indent-len(label)))
	var b strings.Builder
	fresh := true
	for word := range strings.FieldsSeq(text) {
		if !fresh && utf8.RuneCountInString(line)+1+utf8.RuneCountInString(word) > most {
			b.WriteString(line + "\n")
			line, fresh = strings.Repeat(" ", indent), true
		}
		if !fresh {
			line += " "
		}
		line, fresh = line+word, false
	}
	b.WriteString(line + "\n")
	return b.String()
}
