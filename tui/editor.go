package tui

import (
	"math"
	"slices"
	"strconv"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// editor changes the quantities of a scenario.
type editor struct {
	file     *scenarios.File // as it is now
	original *scenarios.File
	paths    []string
	at       int
	finer    map[string]int // powers of ten by which the step of a quantity was changed
}

func newEditor(f *scenarios.File) *editor {
	e := &editor{file: f.Clone(), original: f, paths: f.Quantities(), finer: map[string]int{}}
	for _, path := range []string{"entry.height", "exit.height", "bias.drop"} {
		if !slices.Contains(e.paths, path) {
			e.paths = append(e.paths, path) // 0 where the file does not state it
		}
	}
	return e
}

// quantity is the one at a path of a file: 0, in the unit of the packet's
// energy, where an energy is not stated.
func quantity(f *scenarios.File, path string) (scenarios.Quantity, error) {
	q, err := f.Get(path)
	if err == nil {
		return q, nil
	}
	q, err = f.Get("packet.energy")
	q.Number = 0
	return q, err
}

// move picks another quantity.
func (e *editor) move(n int) { e.at = max(0, min(len(e.paths)-1, e.at+n)) }

func (e *editor) path() string { return e.paths[e.at] }

// exponent is the power of ten of the step: the second digit of the original
// number, but for what the user chose.
func (e *editor) exponent(path string) int {
	q, err := quantity(e.original, path)
	if err == nil && q.Number == 0 && q.Kind == scenarios.Energy {
		q, err = e.original.Get("packet.energy")
	}
	n := -1
	if err == nil && q.Number != 0 {
		n = int(math.Floor(math.Log10(math.Abs(q.Number))+1e-9)) - 1
	}
	return n - e.finer[path]
}

// resize makes the step of the picked quantity ten times finer, n times.
func (e *editor) resize(n int) {
	e.finer[e.path()] = max(-3, min(6, e.finer[e.path()]+n))
}

// change adds n steps to the picked quantity.
func (e *editor) change(n int) error {
	q, err := quantity(e.file, e.path())
	if err != nil {
		return err
	}
	exponent := e.exponent(e.path())
	q.Number = decimals(q.Number+float64(n)*math.Pow10(exponent), exponent)
	return e.file.Set(e.path(), q.String())
}

// decimals rounds to a power of ten, unless that leaves nothing of the number.
func decimals(v float64, exponent int) float64 {
	text := strconv.FormatFloat(v, 'f', max(0, -exponent), 64)
	if r, err := strconv.ParseFloat(text, 64); err == nil {
		return r
	}
	return v
}

// set states the picked quantity in words.
func (e *editor) set(text string) error { return e.file.Set(e.path(), text) }

// reset brings the picked quantity back.
func (e *editor) reset() error {
	q, err := quantity(e.original, e.path())
	if err != nil {
		return err
	}
	return e.file.Set(e.path(), q.String())
}

// value is the quantity at a path as text, and whether it was changed.
func (e *editor) value(path string) (text string, changed bool) {
	q, err := quantity(e.file, path)
	if err != nil {
		return missing, false
	}
	before, err := quantity(e.original, path)
	return q.String(), err == nil && before.String() != q.String()
}

// brief is the picked quantity in one line.
func (e *editor) brief() string {
	text, _ := e.value(e.path())
	return e.path() + " = " + text + "   " + e.step()
}

// step is the step of the picked quantity in words.
func (e *editor) step() string {
	return "step " + strconv.FormatFloat(math.Pow10(e.exponent(e.path())), 'g', -1, 64)
}

// draw lists the quantities around the picked one; * marks what was changed.
func (e *editor) draw(b canvas.Box) {
	b.Text(0, 0, canvas.Faint, cut("change a quantity", b.Wide))
	b.TextRight(b.Wide, 0, canvas.Faint, e.step())
	rows := b.High - 1
	first := max(0, min(e.at-rows/2, len(e.paths)-rows))
	for y := 0; y < rows && first+y < len(e.paths); y++ {
		e.line(b, y+1, first+y)
	}
}

func (e *editor) line(b canvas.Box, y, i int) {
	style := canvas.Plain
	text, changed := e.value(e.paths[i])
	sign := " "
	if changed {
		sign = "*"
	}
	if i == e.at {
		style = canvas.Picked
		for x := range b.Wide {
			b.Put(x, y, style, ' ')
		}
		sign = "▸"
	}
	b.Text(0, y, style, cut(sign+e.paths[i], b.Wide-len(text)-1))
	b.TextRight(b.Wide, y, style, text)
}
