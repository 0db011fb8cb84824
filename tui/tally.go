package tui

import (
	"fmt"
	"math"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// tally draws where the probability is as one bar, in the order of x: what
// has left on the left, what is inside, what has left on the right; what is
// lost stands beside what is reflected. Marks show where the predicted shares
// end.
type tally struct {
	canvas.Box
	ledger    scenarios.Ledger
	predicted scenarios.Ledger
	lossy     bool
	side      scenarios.Side
}

// share is a part of the bar.
type share struct {
	name  string
	brief string
	value float64
	style canvas.Style
	fill  uint8 // which dots of a column of four, from the top
}

// shares lists the parts from the packet's own side on.
func (t tally) shares() []share {
	back, on := canvas.Left, canvas.Right
	if t.side == scenarios.FromRight {
		back, on = canvas.Right, canvas.Left
	}
	out := []share{{"reflected", "refl.", t.ledger.Reflected, back, 0b1111}}
	if t.lossy {
		out = append(out, share{"lost", "lost", t.ledger.Lost, canvas.Faint, 0b0101})
	}
	return append(out, share{"inside", "in", t.ledger.Trapped, canvas.Still, 0b0010}, share{"transmitted", "trans.", t.ledger.Transmitted, on, 0b1111})
}

func (t tally) draw() {
	bar := t.Inside(0, 0, t.Wide, 1)
	bar.Plot()
	wide, _ := bar.Dots()
	from := 0.0
	shares := t.shares()
	for _, s := range shares {
		to := from + math.Max(0, s.value)
		for x := int(math.Round(from * float64(wide))); x < int(math.Round(to*float64(wide))); x++ {
			t.column(bar, x, s)
		}
		from = to
	}
	t.marks(bar)
	if t.High > 1 {
		t.numbers(shares)
	}
}

// column draws one column of dots of a share; from the right, the bar runs
// the other way.
func (t tally) column(bar canvas.Box, x int, s share) {
	wide, _ := bar.Dots()
	if t.side == scenarios.FromRight {
		x = wide - 1 - x
	}
	for y := range 4 {
		if s.fill>>(3-y)&1 == 1 {
			bar.Dot(x, y, s.style)
		}
	}
}

// marks show the predicted ends of what is reflected, lost and transmitted.
func (t tally) marks(bar canvas.Box) {
	ends := []float64{t.predicted.Reflected}
	if t.lossy {
		ends = append(ends, t.predicted.Reflected+t.predicted.Lost)
	}
	for _, at := range ends {
		x := max(0, min(t.Wide-1, int(math.Round(at*float64(t.Wide)))))
		if t.side == scenarios.FromRight {
			x = t.Wide - 1 - x
		}
		bar.Put(x, 0, canvas.Strong, '┃')
	}
}

// longest is the length of the longest name.
const longest = len("transmitted")

// numbers stand in equal parts of the second line, in the order of the bar,
// with as many digits and letters as there is room for.
func (t tally) numbers(shares []share) {
	room := t.Wide/len(shares) - 1
	digits, brief := 8, false
	if room < longest+1+digits+2 {
		digits = 4
	}
	if room < longest+1+digits+2 {
		digits, brief = 3, true
	}
	for i, s := range shares {
		at := i
		if t.side == scenarios.FromRight {
			at = len(shares) - 1 - i
		}
		name := s.name
		if brief {
			name = s.brief
		}
		text := cut(fmt.Sprintf("%s %.*f", name, digits, math.Max(0, s.value)), room)
		x := at * t.Wide / len(shares)
		switch at {
		case 0:
		case len(shares) - 1:
			x = t.Wide - len(text)
		default:
			x += max(0, (room-len(text))/2)
		}
		t.Text(x, 1, s.style, text)
	}
}
