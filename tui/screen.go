package tui

import (
	"fmt"
	"math"
	"strings"
	"unicode/utf8"

	"fluxtoll/tui/canvas"
	"fluxtoll/tui/player"
)

// screen is all that one picture is made from.
type screen struct {
	frame  *player.Frame
	want   chosen
	scale  scale
	ghost  bool
	hints  string
	note   string
	editor *editor
}

// draw fills a canvas of the given size, whatever it is.
func (s screen) draw(c *canvas.Canvas, w, h int) {
	c.Reset(w, h)
	f := s.frame
	if f == nil || f.Moment == nil {
		s.wait(c)
		return
	}
	l := arrange(c.W, c.H, rowsOf(f.Moment.Result, f.Outlook.Shifts), s.want, s.editor != nil)
	if l.oneLine {
		s.oneLine(c)
		return
	}
	s.header(box(c, l.header))
	s.stage(box(c, l.stage))
	s.panels(c, l)
	if !l.footer.empty() {
		s.footer(box(c, l.footer), l.editor.empty())
	}
}

func box(c *canvas.Canvas, r rect) canvas.Box { return c.Box(r.x, r.y, r.wide, r.high) }

// wait is shown before the first frame.
func (s screen) wait(c *canvas.Canvas) {
	text := "preparing ..."
	if s.note != "" {
		text = s.note
	}
	for y, line := range wrap(text, c.W) {
		c.Text(0, y, canvas.Plain, line)
	}
}

// wrap breaks a text at spaces into lines of at most wide characters.
func wrap(text string, wide int) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(text) {
		if line != "" && utf8.RuneCountInString(line)+1+utf8.RuneCountInString(word) > wide {
			lines, line = append(lines, line), ""
		}
		if line != "" {
			line += " "
		}
		line += word
	}
	return append(lines, cut(line, wide))
}

// state is a sign for what the packet does.
func (s screen) state() string {
	switch f := s.frame; {
	case f.Loading:
		return "preparing"
	case f.Seeking:
		return "»"
	case f.Moment.Ended:
		return "■"
	case f.Paused:
		return "‖"
	}
	return "▸"
}

// clock is the time, in digits that stay in place, and the expected end.
func (s screen) clock() string {
	o := s.frame.Outlook
	f := timeFormat(o.Duration, 8)
	f.decimals = min(f.decimals, 2)
	return withUnit(pad(f.text(s.frame.Moment.Time), len(f.text(o.Duration))), o.Units.Time)
}

// pace is how fast time passes, against the normal pace.
func (s screen) pace() string {
	if s.frame.Tail {
		return "tail"
	}
	if p := s.frame.Pace; p < 1 {
		return fmt.Sprintf("×1/%.0f", 1/p)
	}
	return fmt.Sprintf("×%.0f", s.frame.Pace)
}

// oneLine is what is left of a very small screen.
func (s screen) oneLine(c *canvas.Canvas) {
	l := s.frame.Moment.Ledger
	text := fmt.Sprintf("%s R %.4f T %.4f %s", s.state(), math.Max(0, l.Reflected), math.Max(0, l.Transmitted), s.clock())
	c.Text(0, 0, canvas.Plain, cut(text, c.W))
}

func (s screen) header(b canvas.Box) {
	right := s.state() + " " + s.clock()
	for _, more := range []string{" " + pad(s.pace(), 5), fmt.Sprintf("  step %4d", s.frame.Moment.Steps)} {
		if utf8.RuneCountInString(right+more) < b.Wide*3/5 {
			right += more
		}
	}
	start := b.Wide - utf8.RuneCountInString(right)
	b.Text(start, 0, canvas.Plain, right)
	b.Text(0, 0, canvas.Strong, cut(s.frame.Outlook.Title, start-2))
}

func (s screen) stage(b canvas.Box) {
	stage{Box: b, moment: s.frame.Moment, outlook: s.frame.Outlook, scale: s.scale, ghost: s.ghost}.draw()
}

// panels draws everything below the stage.
func (s screen) panels(c *canvas.Canvas, l layout) {
	m, o := s.frame.Moment, s.frame.Outlook
	if !l.tally.empty() {
		tally{box(c, l.tally), m.Ledger, o.Predicted, o.Lossy, o.Side}.draw()
	}
	if !l.arrivals.empty() {
		arrivals{box(c, l.arrivals), m, o, s.scale.log}.draw()
	}
	if !l.spectrum.empty() {
		parted := m.Ended || m.Ledger.Trapped < 1e-3 && m.Time > o.Contact
		spectrum{box(c, l.spectrum), o.Spectrum, o.Energy, o.Units.Energy, o.Side, parted}.draw()
	}
	if !l.editor.empty() {
		s.editor.draw(box(c, l.editor))
	}
	if !l.numbers.empty() {
		numbers{box(c, l.numbers), m.Result, o.Shifts, o.Units.Time, m.Ended}.draw()
	}
}

// footer is the last line: what there is to say, or the picked quantity where
// there is no room for the editor, or the keys.
func (s screen) footer(b canvas.Box, bare bool) {
	switch {
	case s.note != "":
		b.Text(0, 0, canvas.Strong, cut(s.note, b.Wide))
	case s.editor != nil && bare:
		b.Text(0, 0, canvas.Strong, cut(s.editor.brief(), b.Wide))
	default:
		b.Text(0, 0, canvas.Faint, cut(s.hints, b.Wide))
	}
}
