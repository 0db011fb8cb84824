package tui

// panel is a part of the screen that can be switched off.
type panel int

const (
	panelTally panel = iota
	panelArrivals
	panelSpectrum
	panelNumbers
	panels
)

// chosen says which panels the user wants.
type chosen [panels]bool

// rect is a place on the screen, in cells; nothing where wide or high is 0.
type rect struct{ x, y, wide, high int }

func (r rect) empty() bool { return r.wide <= 0 || r.high <= 0 }

// layout places everything.
type layout struct {
	oneLine                             bool
	header, stage, tally, footer        rect
	arrivals, spectrum, numbers, editor rect
}

// Sizes in cells. Below leastWide x leastHigh one line is shown.
const (
	leastWide, leastHigh = 24, 6
	leastStage           = 5
	footerFrom           = 10 // lines from which there is a footer
	graphWide            = 26 // least width of a graph
	numbersWide          = 50 // with all three columns
	numbersNarrow        = 39 // without the plane wave
	numbersMost          = 86
	editorMost           = 44
	lowerLeast           = 5
)

// arrange places the panels in a screen of w x h: header, stage and tally over
// the whole width, then a row with arrivals, spectrum and numbers. rows is how
// many lines the numbers would like.
//
// What does not fit gives way in this order: spectrum, arrivals, numbers,
// tally. Below 24 x 6 one line is left.
func arrange(w, h, rows int, want chosen, editing bool) layout {
	if w < leastWide || h < leastHigh {
		return layout{oneLine: true, header: rect{0, 0, w, 1}}
	}
	l := layout{header: rect{0, 0, w, 1}}
	top, bottom := 1, h
	if h >= footerFrom {
		bottom--
		l.footer = rect{0, bottom, w, 1}
	}
	tall := 0
	if want[panelTally] && bottom-top >= leastStage+2 {
		tall = 2
	}
	lower := lowerRows(bottom-top-tall, rows)
	if lower > 0 && !l.divide(rect{0, bottom - lower, w, lower}, want, editing) {
		lower = 0
	}
	l.stage = rect{0, top, w, bottom - top - tall - lower}
	if tall > 0 {
		l.tally = rect{0, l.stage.y + l.stage.high, w, tall}
	}
	return l
}

// lowerRows is the height of the lower row: two fifths of what there is; all
// that the numbers need if the stage keeps nine lines; and some more for
// explaining them in words if the stage keeps nearly half.
func lowerRows(room, rows int) int {
	const stageKeeps, words = 9, 6
	n := max(room*2/5, min(rows, room-stageKeeps), min(rows+words, room*11/20))
	if n < lowerLeast || room-n < leastStage {
		return 0
	}
	return n
}

// divide places what is wanted in the lower row and reports whether that is
// anything. Numbers stand to the right of the graphs.
func (l *layout) divide(r rect, want chosen, editing bool) bool {
	graphs := 0
	for _, p := range []panel{panelArrivals, panelSpectrum} {
		if want[p] {
			graphs++
		}
	}
	if editing {
		graphs = 1
	}
	left := r
	if want[panelNumbers] && (r.wide >= numbersNarrow || graphs == 0) {
		wide := numbersRoom(r.wide, graphs)
		l.numbers = rect{r.x + r.wide - wide, r.y, wide, r.high}
		left.wide -= wide + 1
	}
	if graphs == 0 || left.wide < graphWide {
		return !l.numbers.empty()
	}
	if editing {
		left = l.edit(left)
	}
	if !left.empty() {
		l.graphs(left, want)
	}
	return true
}

// edit gives the editor what the graphs had, or the right half where that is
// wide enough for one of them beside it, and returns what is left for them.
func (l *layout) edit(r rect) rect {
	if r.wide < 2*graphWide+1 {
		l.editor = r
		return rect{}
	}
	wide := min(editorMost, (r.wide-1)/2)
	l.editor = rect{r.x + r.wide - wide, r.y, wide, r.high}
	return rect{r.x, r.y, r.wide - wide - 1, r.high}
}

// numbersRoom is the width that the numbers get of a row.
func numbersRoom(wide, graphs int) int {
	switch {
	case graphs == 0:
		return wide
	case wide >= numbersMost+1+graphs*(2*graphWide):
		return numbersMost
	case wide >= numbersWide+1+graphWide:
		return max(numbersWide, min(numbersMost, wide*2/5))
	case wide >= numbersNarrow+1+graphWide:
		return wide - 1 - graphWide
	}
	return wide
}

// graphs places arrivals and spectrum beside each other, or above each other,
// or the arrivals alone.
func (l *layout) graphs(r rect, want chosen) {
	const leastStacked = 4
	both := want[panelArrivals] && want[panelSpectrum]
	switch {
	case both && r.wide >= 2*graphWide+1:
		half := (r.wide - 1) / 2
		l.arrivals = rect{r.x, r.y, r.wide - 1 - half, r.high}
		l.spectrum = rect{r.x + r.wide - half, r.y, half, r.high}
	case both && r.high >= 2*leastStacked:
		half := r.high / 2
		l.arrivals = rect{r.x, r.y, r.wide, r.high - half}
		l.spectrum = rect{r.x, r.y + r.high - half, r.wide, half}
	case want[panelArrivals]:
		l.arrivals = r
	case want[panelSpectrum]:
		l.spectrum = r
	}
}
