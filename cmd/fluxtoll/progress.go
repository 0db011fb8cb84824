package main

import (
	"fmt"
	"io"
	"os"
	"strings"
	"time"

	"golang.org/x/term"

	"fluxtoll/scenarios"
)

// quiet is how long a run may take before its progress is shown.
const quiet = 500 * time.Millisecond

// progressLine is one line on a terminal that is written over and at last
// removed, without any escape sequence.
type progressLine struct {
	w       io.Writer
	columns int // 0: no terminal, nothing is shown
	began   time.Time
	shown   int // characters that stand there now
}

// newProgressLine shows nothing where w is no terminal.
func newProgressLine(w io.Writer) *progressLine {
	return &progressLine{w: w, columns: terminalWidth(w), began: time.Now()}
}

// terminalWidth is the number of columns of the terminal w, 0 where it is
// none. The kernel is asked, not the terminal.
func terminalWidth(w io.Writer) int {
	if ascii, ok := w.(asciiWriter); ok {
		w = ascii.Writer
	}
	file, ok := w.(*os.File)
	if !ok {
		return 0
	}
	columns, _, err := term.GetSize(int(file.Fd()))
	if err != nil {
		return 0
	}
	return columns
}

// show replaces the line, once the run has lasted long enough.
func (p *progressLine) show(now scenarios.Progress) {
	if time.Since(p.began) < quiet {
		return
	}
	p.write(progressText(now))
}

// waiting shows a text once the run has lasted long enough, until done is
// called.
func (p *progressLine) waiting(text string) (done func()) {
	stop, finished := make(chan struct{}), make(chan struct{})
	go func() {
		defer close(finished)
		select {
		case <-stop:
		case <-time.After(quiet):
			p.write(text)
		}
	}()
	return func() {
		close(stop)
		<-finished
	}
}

// progressText is what the line says.
func progressText(now scenarios.Progress) string {
	left := fmt.Sprintf("about %s left", duration(now.Left))
	if now.Fraction >= 1 {
		left = "waiting for the rest"
	}
	l := now.Ledger
	return fmt.Sprintf("%3.0f %%, %s; reflected %.4f, transmitted %.4f, inside %s",
		100*now.Fraction, left, l.Reflected, l.Transmitted, brief(l.Trapped))
}

// duration reads well for a person who waits.
func duration(d time.Duration) string {
	switch {
	case d < 90*time.Second:
		return fmt.Sprintf("%.0f s", d.Seconds())
	case d < 90*time.Minute:
		return fmt.Sprintf("%.0f min", d.Minutes())
	case d < 100*time.Hour:
		return fmt.Sprintf("%.0f h", d.Hours())
	}
	return "days"
}

// write puts text over what stands there; the last column stays free, so that
// no terminal starts a new line.
func (p *progressLine) write(text string) {
	room := max(0, p.columns-1)
	text = text[:min(len(text), room)]
	pad := strings.Repeat(" ", max(0, min(p.shown, room)-len(text)))
	if p.columns > 0 {
		fmt.Fprintf(p.w, "\r%s%s", text, pad)
	}
	p.shown = len(text)
}

// erase removes the line.
func (p *progressLine) erase() {
	if p.shown > 0 {
		p.write("")
		fmt.Fprint(p.w, "\r")
	}
}
