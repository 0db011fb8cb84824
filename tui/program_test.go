package tui

import (
	"bytes"
	"context"
	"errors"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
	"unicode/utf8"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/exp/teatest"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
	"fluxtoll/tui/player"
)

// The real program, without a terminal: it runs to the end, shows the verdict
// and the numbers of an unwatched run, and leaves by q.
func TestProgramShowsTheNumbersOfARun(t *testing.T) {
	f, err := openDemo("thin-barrier")
	if err != nil {
		t.Fatal(err)
	}
	want := testTrial(t, f).Finish(context.Background(), nil)
	p := player.Start(t.Context())
	defer p.Stop()
	m := newModel(Options{File: f, Open: openDemo, Folder: t.TempDir(), Output: canvas.Output{UTF8: true}}, p)
	program := teatest.NewTestModel(t, m, teatest.WithInitialTermSize(120, 40))
	waitFor(t, program.Output(), "plane wave")
	program.Send(keyMsg("G"))
	waitFor(t, program.Output(), string(want.Verdict))
	program.Send(keyMsg("q"))
	final, ok := program.FinalModel(t, teatest.WithFinalTimeout(10*time.Second)).(*Model)
	if !ok {
		t.Fatal("another model came out")
	}
	got := final.frame.Moment.Result
	if got.Verdict != want.Verdict || len(got.Quantities) != len(want.Quantities) {
		t.Fatalf("verdict %q with %d quantities; want %q with %d", got.Verdict, len(got.Quantities), want.Verdict, len(want.Quantities))
	}
	screen := final.View()
	for i, q := range want.Quantities {
		if *got.Quantities[i].Packet != *q.Packet {
			t.Errorf("%s: %g, unwatched %g", q.Name, *got.Quantities[i].Packet, *q.Packet)
		}
		f := probabilityFormat(*q.Average)
		if isTime(q) {
			f = numbers{result: want}.times()
		}
		if text := f.text(*q.Packet); !strings.Contains(screen, text) {
			t.Errorf("the screen does not show %s %s", q.Name, text)
		}
	}
}

func waitFor(t *testing.T, r io.Reader, text string) {
	t.Helper()
	teatest.WaitFor(t, r, func(b []byte) bool { return bytes.Contains(b, []byte(text)) },
		teatest.WithDuration(20*time.Second), teatest.WithCheckInterval(10*time.Millisecond))
}

// A frame of a scenario that was left behind is dropped.
func TestAnOldFrameIsDropped(t *testing.T) {
	p := player.Start(t.Context())
	defer p.Stop()
	m := &Model{player: p, canvas: &canvas.Canvas{}, view: newView(), w: 80, h: 24}
	newer, older := fixture(160, false), fixture(160, true)
	newer.Scenario, older.Scenario = 4, 3
	m.show(newer)
	m.show(older)
	if m.frame != newer {
		t.Errorf("scenario %d is shown, want 4", m.frame.Scenario)
	}
}

// A broken player ends the program with its error.
func TestABrokenPlayerEndsTheProgram(t *testing.T) {
	m := &Model{canvas: &canvas.Canvas{}, view: newView()}
	cmd := m.show(&player.Frame{Broken: true, Err: errors.New("thrown in a test")})
	if cmd == nil || m.failed == nil {
		t.Fatal("the program goes on")
	}
	if _, ok := cmd().(tea.QuitMsg); !ok {
		t.Error("the command is not to quit")
	}
}

// Plain frames: as many as asked for, of the size, evenly spaced from start to
// end, each ended by a form feed of its own.
func TestFrames(t *testing.T) {
	f, err := openDemo("thin-barrier")
	if err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	if err := Frames(context.Background(), &out, testTrial(t, f), 5, Size{100, 30}, true); err != nil {
		t.Fatal(err)
	}
	frames := strings.Split(out.String(), "\n\f\n")
	if len(frames) != 6 || frames[5] != "" {
		t.Fatalf("%d frames, want 5 and nothing after them", len(frames)-1)
	}
	for i, frame := range frames[:5] {
		lines := strings.Split(frame, "\n")
		if len(lines) > 30 {
			t.Errorf("frame %d has %d lines", i, len(lines))
		}
		for _, line := range lines {
			if utf8.RuneCountInString(line) > 100 {
				t.Errorf("frame %d has a line of %d characters", i, utf8.RuneCountInString(line))
			}
		}
	}
	if !strings.Contains(frames[0], " 0.00 fs") || !strings.Contains(frames[4], "agrees") || !strings.Contains(frames[4], "■") {
		t.Errorf("first frame\n%s\nlast frame\n%s", frames[0], frames[4])
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if err := Frames(ctx, io.Discard, testTrial(t, f), 2, Size{80, 24}, true); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v, want %v", err, context.Canceled)
	}
}

// Files appear whole, and nothing is overwritten unasked.
func TestSaving(t *testing.T) {
	t.Chdir(t.TempDir())
	m := testModel(t)
	press(m, "e", "down", "down", "right", "W")
	if got := string(m.prompt.text); got != "thin-barrier.toml" {
		t.Fatalf("name offered: %q", got)
	}
	press(m, "enter")
	f, err := scenarios.ReadFile("thin-barrier.toml")
	if err != nil {
		t.Fatal(err)
	}
	if q, err := f.Get("layer[0].thickness"); err != nil || q.String() != "3.1 nm" {
		t.Errorf("written thickness %v, %v", q, err)
	}
	press(m, "right", "W")
	if got := string(m.prompt.text); got != "thin-barrier-2.toml" {
		t.Errorf("second name offered: %q", got)
	}
	m.prompt.text = []rune("thin-barrier.toml")
	press(m, "enter")
	if m.mode != confirming {
		t.Fatalf("mode %d, want a question before overwriting", m.mode)
	}
	press(m, "n")
	if f, err = scenarios.ReadFile("thin-barrier.toml"); err != nil {
		t.Fatal(err)
	}
	if q, _ := f.Get("layer[0].thickness"); q.String() != "3.1 nm" {
		t.Errorf("overwritten after a no: %v", q)
	}
	press(m, "W")
	m.prompt.text = []rune("thin-barrier.toml")
	press(m, "enter", "y")
	if f, err = scenarios.ReadFile("thin-barrier.toml"); err != nil {
		t.Fatal(err)
	}
	if q, _ := f.Get("layer[0].thickness"); q.String() != "3.2 nm" {
		t.Errorf("not overwritten after a yes: %v", q)
	}
	press(m, "t", "enter", "v", "enter")
	for name, start := range map[string]string{"thin-barrier.txt": "Tunnelling", "thin-barrier.svg": "<svg"} {
		text, err := os.ReadFile(name)
		if err != nil || !strings.HasPrefix(string(text), start) || strings.Contains(string(text), "\x1b") {
			t.Errorf("%s: %v, %.40q", name, err, text)
		}
	}
	if left, _ := filepath.Glob(".fluxtoll-*"); len(left) > 0 {
		t.Errorf("temporary files are left: %v", left)
	}
	press(m, "W")
	m.prompt.text = []rune("no/such/folder/x.toml")
	press(m, "enter")
	if !strings.HasPrefix(m.note, "not written") {
		t.Errorf("note %q", m.note)
	}
}

// Without an argument the demos and the scenario files of the folder are
// listed, and one can be chosen.
func TestChoosing(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "mine.toml"), []byte("broken"), 0o600); err != nil {
		t.Fatal(err)
	}
	p := player.Start(t.Context())
	defer p.Stop()
	m := newModel(Options{Open: openDemo, Folder: dir, Output: canvas.Output{UTF8: true}}, p)
	screen := m.View()
	for _, want := range []string{"collector-step", "twin-barrier", "mine.toml"} {
		if !strings.Contains(screen, want) {
			t.Errorf("the list lacks %s:\n%s", want, screen)
		}
	}
	press(m, "down", "enter")
	for m.frame == nil || m.frame.Moment == nil {
		m.Update(frameMsg{p.Next()})
	}
	if m.mode != watching || !strings.Contains(m.View(), "blurred") {
		t.Errorf("mode %d shows\n%s", m.mode, m.View())
	}
	press(m, "n")
	for range 20 {
		press(m, "down")
	}
	press(m, "enter")
	if m.mode != choosing || m.note == "" {
		t.Errorf("a broken file: mode %d, note %q", m.mode, m.note)
	}
}
