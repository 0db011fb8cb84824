package tui

import (
	"math"
	"strings"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// numbers shows the three columns of every quantity, the verdict, and why the
// arrivals differ from free flight.
type numbers struct {
	canvas.Box
	result *scenarios.Result
	shifts []scenarios.Shift
	unit   string // of time
	ended  bool
}

// rows is how many lines the numbers would like.
func rowsOf(r *scenarios.Result, shifts []scenarios.Shift) int {
	n := 1 + len(r.Quantities)
	if len(shifts) > 0 {
		n += 1 + len(shifts)
	}
	return n
}

const (
	nameShort  = 14
	nameLong   = 24
	valueWide  = 11
	digitsWide = 10
)

// nameWide is the width of the names: in full where there is room.
func (n numbers) nameWide() int {
	if n.Wide >= nameLong+3*valueWide+2 {
		return nameLong
	}
	return nameShort
}

func (n numbers) draw() {
	shifts := n.shifts
	room := n.High
	if room < 6 {
		shifts = nil
	}
	if len(shifts) > 0 {
		room -= 1 + len(shifts)
	}
	n.header()
	times := n.times()
	y := 1
	for _, q := range n.result.Quantities {
		if y >= room {
			break
		}
		n.row(y, q, times)
		y++
	}
	if len(shifts) == 0 {
		return
	}
	if y < room {
		y++ // a blank line
	}
	e := explanation{n.Inside(0, y, n.Wide, n.High-y), shifts, n.result, n.unit}
	e.draw()
}

// columns are where the columns end, left to right: plane wave (0 where there
// is no room), average, packet, difference, budget.
func (n numbers) columns() [5]int {
	var c [5]int
	x := n.nameWide()
	if n.Wide >= numbersWide {
		x += valueWide
		c[0] = x
	}
	for i := 1; i < 3; i++ {
		x += valueWide
		c[i] = x
	}
	if n.Wide >= x+2+2*valueWide {
		c[3], c[4] = x+2+valueWide, x+2+2*valueWide
	}
	return c
}

func (n numbers) header() {
	verdict := string(n.result.Verdict)
	if !n.ended {
		verdict = "running"
	}
	if n.result.Ledger == nil {
		verdict = "average only"
	}
	c := n.columns()
	x := n.Text(0, 0, canvas.Strong, cut(verdict, c[1]-8))
	for i, name := range []string{"plane wave", "average", "packet", "difference", "budget"} {
		if start := c[i] - len(name); c[i] > 0 && start > x {
			n.Text(start, 0, canvas.Faint, name)
		}
	}
}

// times is the one format of all times: that of the largest.
func (n numbers) times() format {
	size := 0.0
	for _, q := range n.result.Quantities {
		if isTime(q) && q.Average != nil {
			size = math.Max(size, math.Abs(*q.Average))
		}
	}
	return timeFormat(size, digitsWide)
}

func isTime(q scenarios.Measure) bool {
	return strings.HasPrefix(q.Name, "arrival") || strings.HasPrefix(q.Name, "group_delay") || q.Name == "dwell"
}

// label is a quantity's name in words, shortened where there is no room.
func (n numbers) label(q scenarios.Measure) string {
	name := strings.ReplaceAll(q.Name, "_", " ")
	if isTime(q) && n.nameWide() == nameShort {
		return strings.NewReplacer("group delay", "delay", "transmitted", "trans.", "reflected", "refl.").Replace(name)
	}
	return name
}

func (n numbers) row(y int, q scenarios.Measure, times format) {
	n.Text(0, y, canvas.Plain, cut(n.label(q), n.nameWide()))
	f := times
	if !isTime(q) {
		f = format{8, false}
		if q.Average != nil {
			f = probabilityFormat(*q.Average)
		}
	}
	c := n.columns()
	for i, v := range []*float64{q.PlaneWave, q.Average, q.Packet} {
		if c[i] > 0 {
			n.TextRight(c[i], y, canvas.Plain, f.cell(v, digitsWide))
		}
	}
	if !n.ended || q.Budget == nil {
		return
	}
	if c[3] > 0 {
		error := format{1, true}
		n.TextRight(c[3], y, canvas.Faint, error.cell(q.Difference, digitsWide))
		n.TextRight(c[4], y, canvas.Faint, error.cell(q.Budget, digitsWide))
	}
	mark := '='
	if !q.Agrees {
		mark = '≠'
	}
	n.Put(c[2]+1, y, canvas.Strong, mark)
}
