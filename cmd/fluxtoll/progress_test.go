package main

import (
	"bytes"
	"strings"
	"testing"
	"time"

	"fluxtoll/scenarios"
)

func TestProgressText(t *testing.T) {
	now := scenarios.Progress{
		Fraction: 0.42, Left: 12 * time.Second,
		Ledger: scenarios.Ledger{Reflected: 0.1, Transmitted: 0.25, Trapped: 0.65},
	}
	if got, want := progressText(now), " 42 %, about 12 s left; reflected 0.1000, transmitted 0.2500, inside 0.65"; got != want {
		t.Errorf("%q, want %q", got, want)
	}
	now.Fraction, now.Ledger.Trapped = 1, 3e-7
	if got, want := progressText(now), "100 %, waiting for the rest; reflected 0.1000, transmitted 0.2500, inside 3.0e-7"; got != want {
		t.Errorf("%q, want %q", got, want)
	}
}

// TestProgressLine writes long and short texts on a narrow terminal: no
// write is wider than the terminal, and nothing is left behind.
func TestProgressLine(t *testing.T) {
	var screen bytes.Buffer
	line := progressLine{w: &screen, columns: 20}
	for _, text := range []string{strings.Repeat("x", 50), "short", ""} {
		line.write(text)
	}
	line.erase()
	want := "\r" + strings.Repeat("x", 19) + "\rshort" + strings.Repeat(" ", 14) + "\r     "
	if got := screen.String(); got != want {
		t.Errorf("the terminal received %q, want %q", got, want)
	}
}

// TestProgressOffTerminal shows nothing where there is no terminal.
func TestProgressOffTerminal(t *testing.T) {
	var log bytes.Buffer
	line := newProgressLine(&log)
	line.began = line.began.Add(-time.Minute)
	line.show(scenarios.Progress{Fraction: 0.5})
	line.erase()
	if log.Len() > 0 {
		t.Errorf("%q was written", log.String())
	}
}

func TestDuration(t *testing.T) {
	for d, want := range map[time.Duration]string{
		0: "0 s", 89 * time.Second: "89 s", 3 * time.Minute: "3 min", 5 * time.Hour: "5 h", 1 << 62: "days",
	} {
		if got := duration(d); got != want {
			t.Errorf("duration(%v) = %q, want %q", d, got, want)
		}
	}
}
