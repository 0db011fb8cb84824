package main

import (
	"bytes"
	"context"
	"io"
	"math"
	"os"
	"os/exec"
	"strings"
	"testing"
	"time"
	"unicode/utf8"

	"github.com/creack/pty"

	"fluxtoll/scenarios"
)

// peak is a curve with one peak, narrower than a column of any plot.
func peak() *scenarios.Curve {
	c := &scenarios.Curve{Units: scenarios.Units{Energy: "meV", Time: "fs"}}
	for _, x := range []float64{-1, -0.5, -1e-9, 0, 1e-9, 0.5, 1} {
		c.Energy = append(c.Energy, 10+x)
		c.Transmission = append(c.Transmission, 1/(1+x*x*1e18))
		c.Dwell = append(c.Dwell, 1e3/(1+x*x*1e18)+1)
	}
	return c
}

// TestPlotShowsNarrowPeaks: a peak of 1e-10 of the plot's width reaches its
// top; braille and ASCII, of the size asked for.
func TestPlotShowsNarrowPeaks(t *testing.T) {
	for _, ascii := range []bool{false, true} {
		text := curvePlot(peak(), 60, ascii)
		lines := strings.Split(strings.TrimRight(text, "\n"), "\n")
		if len(lines) != 2*(panelHeight+1)+1 {
			t.Fatalf("%d lines:\n%s", len(lines), text)
		}
		for _, l := range lines {
			if n := utf8.RuneCountInString(l); n > 59 || ascii && n != len(l) {
				t.Errorf("line %q of %d characters", l, n)
			}
		}
		if top := []rune(lines[1])[plotMargin:]; strings.TrimSpace(string(top)) == "" || len(top) < 20 || len(top) > 30 {
			t.Errorf("the peak does not reach the top in the middle: %q\n%s", lines[1], text)
		}
		if !strings.Contains(lines[0], "transmission") || !strings.Contains(lines[len(lines)-1], "9 meV") || !strings.HasSuffix(lines[len(lines)-1], "11 meV") {
			t.Errorf("labels are missing:\n%s", text)
		}
	}
}

// TestPlotWithoutMeaning: no dwell time, no second panel; no room, no plot.
func TestPlotWithoutMeaning(t *testing.T) {
	c := peak()
	for i := range c.Dwell {
		c.Dwell[i] = math.NaN()
	}
	if text := curvePlot(c, 60, true); strings.Contains(text, "dwell") || !strings.Contains(text, "transmission") {
		t.Errorf("got\n%s", text)
	}
	if text := curvePlot(c, 20, true); text != "" {
		t.Errorf("20 columns: got\n%s", text)
	}
}

// TestCurveOnTerminal: a terminal gets a plot after the table, a pipe none, and
// neither is asked anything or sent a control sequence.
func TestCurveOnTerminal(t *testing.T) {
	ctx, cancel := context.WithTimeout(t.Context(), time.Minute)
	defer cancel()
	cmd := exec.CommandContext(ctx, program(t), "curve", "twin-barrier", "--points", "40")
	cmd.Env = append(os.Environ(), "LC_ALL=C.UTF-8")
	screen, err := pty.StartWithSize(cmd, &pty.Winsize{Rows: 40, Cols: 90})
	if err != nil {
		t.Fatal(err)
	}
	var shown bytes.Buffer
	_, _ = io.Copy(&shown, screen) // ends with an error when the terminal closes
	if err := cmd.Wait(); err != nil {
		t.Fatal(err)
	}
	text := shown.String()
	if strings.Contains(text, "\x1b") || !strings.Contains(text, "transmission") || strings.Index(text, "transmission") < strings.Index(text, "delay T") {
		t.Errorf("the terminal shows\n%s", text)
	}
	piped := exec.CommandContext(ctx, program(t), "curve", "twin-barrier", "--points", "40")
	out, err := piped.Output()
	if err != nil || bytes.Contains(out, []byte("transmission")) || !bytes.Contains(out, []byte("delay T")) {
		t.Errorf("%v; the pipe shows\n%s", err, out)
	}
}
