package tui

import (
	"math"
	"strconv"
	"strings"
	"unicode/utf8"
)

// missing stands where there is no number.
const missing = "·"

// format writes numbers of one row or column alike, so that their digits stay
// in place.
type format struct {
	decimals   int
	scientific bool
}

func (f format) text(v float64) string {
	verb := byte('f')
	if f.scientific {
		verb = 'e'
	}
	t := strconv.FormatFloat(v, verb, f.decimals, 64)
	if strings.HasPrefix(t, "-") && !strings.ContainsAny(t[:len(mantissa(t))], "123456789") {
		return t[1:] // no negative zero
	}
	return t
}

// mantissa is a number without its exponent.
func mantissa(t string) string {
	m, _, _ := strings.Cut(t, "e")
	return m
}

// signed writes a number with its sign.
func (f format) signed(v float64) string {
	if t := f.text(v); t[0] != '-' {
		return "+" + t
	}
	return f.text(v)
}

// cell writes a number, or what stands for none, to the right of a column.
func (f format) cell(v *float64, wide int) string {
	if v == nil {
		return pad(missing, wide)
	}
	return pad(f.text(*v), wide)
}

// pad fills up to the left.
func pad(s string, wide int) string {
	return strings.Repeat(" ", max(0, wide-utf8.RuneCountInString(s))) + s
}

// probabilityFormat shows a probability of about the given size in at most
// ten characters.
func probabilityFormat(size float64) format {
	if size > 0 && size < 1e-4 {
		return format{3, true}
	}
	return format{8, false}
}

// timeFormat shows times up to the given size in at most wide characters,
// sign included, and with no more than seven digits.
func timeFormat(size float64, wide int) format {
	if size <= 0 || math.IsInf(size, 0) || math.IsNaN(size) {
		return format{3, false}
	}
	whole := max(1, int(math.Floor(math.Log10(size)))+1)
	if whole > wide-2 || size < 1e-4 {
		return format{3, true}
	}
	return format{max(0, min(wide-whole-2, 7-whole)), false}
}

// short writes a number of three digits or so.
func short(v float64) string {
	if a := math.Abs(v); a != 0 && (a < 1e-3 || a >= 1e6) {
		return strconv.FormatFloat(v, 'e', 1, 64)
	}
	return strconv.FormatFloat(v, 'g', 4, 64)
}

// withUnit adds the unit, if there is one.
func withUnit(text, unit string) string {
	if unit == "" {
		return text
	}
	return text + " " + unit
}

// cut shortens a text to a width.
func cut(s string, wide int) string {
	if utf8.RuneCountInString(s) <= wide {
		return s
	}
	r := []rune(s)
	if wide < 2 {
		return string(r[:max(wide, 0)])
	}
	return string(r[:wide-1]) + "…"
}

// ticks are round positions in [from, to], about n of them, and their format.
func ticks(from, to float64, n int) ([]float64, format) {
	if !(to > from) || n < 1 {
		return nil, format{}
	}
	raw := (to - from) / float64(n)
	power := math.Pow(10, math.Floor(math.Log10(raw)))
	step := power
	for _, f := range []float64{2, 5, 10} {
		if step < raw {
			step = f * power
		}
	}
	var out []float64
	for i := math.Ceil(from/step - 1e-9); i*step <= to+1e-9*step; i++ {
		out = append(out, i*step)
	}
	return out, format{max(0, int(math.Ceil(-math.Log10(step)-1e-9))), false}
}
