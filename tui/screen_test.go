package tui

import (
	"fmt"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/charmbracelet/x/exp/golden"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// ansi shows escape sequences in a golden file as text.
func ansi(s string) string { return strings.ReplaceAll(s, "\x1b", "␛") }

// The screens at several sizes, in plain text, in ASCII and in the colour
// depths. To see what changed, run with -update and look at the difference.
func TestGoldenScreens(t *testing.T) {
	for _, c := range []struct {
		name   string
		w, h   int
		output canvas.Output
		ended  bool
	}{
		{"80x24", 80, 24, canvas.Output{UTF8: true}, false},
		{"80x24-ended", 80, 24, canvas.Output{UTF8: true}, true},
		{"80x24-ascii", 80, 24, canvas.Output{}, false},
		{"80x24-16", 80, 24, canvas.Output{Depth: canvas.Colors16, UTF8: true}, false},
		{"80x24-256", 80, 24, canvas.Output{Depth: canvas.Colors256, UTF8: true}, false},
		{"80x24-true", 80, 24, canvas.Output{Depth: canvas.TrueColor, UTF8: true}, false},
		{"120x36", 120, 36, canvas.Output{UTF8: true}, false},
		{"240x60", 240, 60, canvas.Output{UTF8: true}, true},
		{"60x20", 60, 20, canvas.Output{UTF8: true}, false},
		{"40x12", 40, 12, canvas.Output{UTF8: true}, false},
		{"24x6", 24, 6, canvas.Output{UTF8: true}, false},
		{"23x5", 23, 5, canvas.Output{UTF8: true}, false},
	} {
		t.Run(c.name, func(t *testing.T) {
			var canvas canvas.Canvas
			fixtureScreen(c.w, c.ended).draw(&canvas, c.w, c.h)
			golden.RequireEqual(t, []byte(ansi(canvas.String(c.output))))
		})
	}
}

// Without UTF-8 no byte above 0x7f is shown, whatever the screen.
func TestASCIIScreensAreASCII(t *testing.T) {
	var c canvas.Canvas
	for _, size := range [][2]int{{80, 24}, {240, 60}, {30, 8}, {10, 1}} {
		s := fixtureScreen(size[0], true)
		s.frame.Outlook.Title = "ħ ψ \u00fc"
		s.note = hints(editing)
		s.draw(&c, size[0], size[1])
		for _, b := range []byte(c.String(canvas.Output{})) {
			if b > 0x7f {
				t.Fatalf("%v: byte %#x", size, b)
			}
		}
	}
}

// Every size from 1x1 upwards is drawn, in every mode, and never more than it
// holds.
func TestEverySizeIsDrawn(t *testing.T) {
	var c canvas.Canvas
	m := &Model{canvas: &c, view: newView(), options: Options{Output: canvas.Output{UTF8: true}}}
	f, err := openDemo("thin-barrier")
	if err != nil {
		t.Fatal(err)
	}
	m.file, m.editor, m.chooser = f, newEditor(f), newChooser(t.TempDir())
	m.prompt = &prompt{label: "a question", text: []rune("an answer")}
	m.frame = fixture(40, true)
	m.view.update(m.frame.Outlook, m.frame.Moment, 40)
	count := 0
	for _, m.mode = range []mode{watching, editing, choosing, typing, confirming, helping} {
		for m.w = 0; m.w <= 130; m.w += 1 + m.w/12 {
			for m.h = 0; m.h <= 50; m.h += 1 + m.h/12 {
				lines := strings.Split(m.View(), "\n")
				if len(lines) > max(m.h, 1) {
					t.Fatalf("mode %d at %dx%d: %d lines", m.mode, m.w, m.h, len(lines))
				}
				for _, line := range lines {
					if n := utf8.RuneCountInString(line); n > max(m.w, 1) {
						t.Fatalf("mode %d at %dx%d: a line of %d characters", m.mode, m.w, m.h, n)
					}
				}
				count++
			}
		}
	}
	if count < 1000 {
		t.Errorf("only %d screens drawn", count)
	}
}

// What does not fit gives way in the stated order: spectrum, arrivals,
// numbers, tally; the stage stays.
func TestPanelsGiveWayInOrder(t *testing.T) {
	want := newView().want
	shown := func(w, h int) string {
		l := arrange(w, h, 11, want, false)
		out := ""
		for _, p := range []struct {
			name string
			r    rect
		}{{"stage", l.stage}, {"tally", l.tally}, {"numbers", l.numbers}, {"arrivals", l.arrivals}, {"spectrum", l.spectrum}} {
			if !p.r.empty() {
				out += p.name + " "
			}
		}
		return strings.TrimSpace(out)
	}
	for _, c := range []struct {
		w, h int
		want string
	}{
		{240, 60, "stage tally numbers arrivals spectrum"},
		{80, 24, "stage tally numbers arrivals spectrum"},
		{80, 18, "stage tally numbers arrivals"},
		{60, 24, "stage tally numbers"},
		{80, 12, "stage tally"},
		{30, 24, "stage tally arrivals spectrum"},
		{24, 6, "stage"},
		{23, 6, ""},
	} {
		if got := shown(c.w, c.h); got != c.want {
			t.Errorf("%dx%d shows %q, want %q", c.w, c.h, got, c.want)
		}
	}
}

// Panels lie within the screen and on none of each other, at every size and
// for every choice of panels.
func TestPanelsDoNotOverlap(t *testing.T) {
	for w := leastWide; w < 260; w += 7 {
		for h := leastHigh; h < 70; h += 1 + h/20 {
			for bits := range 32 {
				var want chosen
				for p := range panels {
					want[p] = bits>>p&1 == 1
				}
				l := arrange(w, h, 13, want, bits >= 16)
				if msg := l.clash(w, h); msg != "" {
					t.Fatalf("%dx%d, panels %v: %s", w, h, want, msg)
				}
			}
		}
	}
}

// A packet road that was refused is explained where the packet would be, and
// the numbers of the other road are shown, at every size.
func TestARefusedPacketRoadIsExplained(t *testing.T) {
	f, err := openDemo("thin-barrier")
	if err != nil {
		t.Fatal(err)
	}
	s, err := f.Compile()
	if err != nil {
		t.Fatal(err)
	}
	trial, err := scenarios.Prepare(t.Context(), s, scenarios.Forced{Limits: scenarios.Limits{Nodes: 20}})
	if err != nil {
		t.Fatal(err)
	}
	live, err := scenarios.NewLive(trial)
	if err != nil {
		t.Fatal(err)
	}
	var c canvas.Canvas
	for _, size := range []Size{{80, 24}, {120, 36}, {30, 8}, {5, 1}} {
		v := newView()
		v.still(live, size).draw(&c, size.Wide, size.High)
	}
	v := newView()
	v.still(live, Size{100, 30}).draw(&c, 100, 30)
	screen := c.String(canvas.Output{UTF8: true})
	for _, want := range []string{"the packet road would need", "average only", "0.10126862"} {
		if !strings.Contains(screen, want) {
			t.Errorf("the screen lacks %q:\n%s", want, screen)
		}
	}
}

// The reasons for a shift in words, for either sign.
func TestSentence(t *testing.T) {
	f := format{decimals: 1}
	for _, c := range []struct {
		shift scenarios.Shift
		want  string
	}{
		{scenarios.Shift{Part: "transmitted", Total: 12, Structure: 14.2, Filter: -2.2},
			"What is transmitted comes 12.0 fs late: +14.2 fs, the structure is slower to cross than empty space; -2.2 fs, its faster part passes more easily."},
		{scenarios.Shift{Part: "transmitted", Total: -3, Structure: -4, Exit: 1},
			"What is transmitted comes 3.0 fs early: -4.0 fs, the structure is quicker to cross than empty space; +1.0 fs, it is slower behind the structure."},
		{scenarios.Shift{Part: "reflected", Total: 4, Structure: 3.5, Filter: 0.5},
			"What is reflected comes 4.0 fs late: +3.5 fs, it turns back only within the structure; +0.5 fs, its slower part is reflected more easily."},
	} {
		if got := sentence(c.shift, f, "fs"); got != c.want {
			t.Errorf("%q, want %q", got, c.want)
		}
	}
}

// clash says which rectangles overlap or leave the screen.
func (l layout) clash(w, h int) string {
	list := []rect{l.header, l.stage, l.tally, l.footer, l.arrivals, l.spectrum, l.numbers, l.editor}
	for i, a := range list {
		if a.empty() {
			continue
		}
		if a.x < 0 || a.y < 0 || a.x+a.wide > w || a.y+a.high > h {
			return fmt.Sprintf("%v leaves the screen", a)
		}
		for _, b := range list[i+1:] {
			if !b.empty() && a.x < b.x+b.wide && b.x < a.x+a.wide && a.y < b.y+b.high && b.y < a.y+a.high {
				return fmt.Sprintf("%v and %v overlap", a, b)
			}
		}
	}
	return ""
}
