package scenarios

import (
	"bufio"
	"fmt"
	"io"
	"strings"
)

// Encode writes the scenario as a file again. Reading what it writes gives the
// same scenario; comments and layout are not kept, nor are the tables, which
// stay in their own files.
func (f *File) Encode(w io.Writer) error {
	e := &encoder{w: bufio.NewWriter(w), natural: f.Natural}
	e.top(f)
	for i, s := range f.inOrder() {
		header := "[" + s.path + "]"
		var words []string
		if layer := i - 2; layer >= 0 && layer < len(f.Layers) {
			header, words = "[[layer]]", layerWords(&f.Layers[layer])
		}
		if s.path == "packet" && f.Packet.From == FromRight {
			words = []string{`from = "right"`}
		}
		e.section(header, words, s.fields)
	}
	e.display(f.Display)
	return e.w.Flush()
}

// encoder writes lines; the first error is kept by its writer.
type encoder struct {
	w       *bufio.Writer
	natural bool
}

func (e *encoder) line(format string, args ...any) { fmt.Fprintf(e.w, format+"\n", args...) }

func (e *encoder) top(f *File) {
	if f.Title != "" {
		e.line("title = %s", quote(f.Title))
	}
	e.line("tolerance = %s", shortest(f.Tolerance))
	if f.Natural {
		e.line(`units = "natural"`)
	}
}

// section writes a table of the file, unless nothing is in it. A layer is
// never without words.
func (e *encoder) section(header string, words []string, fields []field) {
	lines := words
	for _, fd := range fields {
		if fd.q.Given {
			lines = append(lines, fd.key+" = "+e.value(*fd.q))
		}
	}
	if len(lines) > 0 {
		e.line("\n%s\n%s", header, strings.Join(lines, "\n"))
	}
}

// value is a quantity as a TOML value: a number without unit stands bare.
func (e *encoder) value(q Quantity) string {
	if q.Unit == "" {
		return shortest(q.Number)
	}
	return quote(q.String())
}

// layerWords are the lines of a layer that are no quantities.
func layerWords(l *LayerSpec) []string {
	words := []string{"shape = " + quote(string(l.Shape))}
	if l.Table == nil {
		return words
	}
	words = append(words, "file = "+quote(l.Table.File))
	if l.Table.Smooth {
		words = append(words, `interpolate = "smooth"`)
	}
	return words
}

func (e *encoder) display(d DisplaySpec) {
	var lines []string
	for i, unit := range []string{d.Length, d.Energy, d.Time} {
		if unit != "" {
			lines = append(lines, displayKeys()[i]+" = "+quote(unit))
		}
	}
	if len(lines) > 0 {
		e.line("\n[display]\n%s", strings.Join(lines, "\n"))
	}
}

// quote writes a TOML basic string.
func quote(s string) string {
	var b strings.Builder
	b.WriteByte('"')
	for _, r := range s {
		switch {
		case r == '"' || r == '\\':
			b.WriteString(`\` + string(r))
		case r < 0x20 || r == 0x7f:
			fmt.Fprintf(&b, `\u%04X`, r)
		default:
			b.WriteRune(r)
		}
	}
	b.WriteByte('"')
	return b.String()
}
