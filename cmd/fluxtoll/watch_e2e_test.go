//go:build e2e

package main

import (
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"syscall"
	"testing"
	"time"

	"fluxtoll/internal/tmuxtest"
)

// watchIn starts `fluxtoll watch ARGS` in a terminal whose shell then says how
// it ended.
func watchIn(t *testing.T, x *tmuxtest.Terminal, args string) {
	t.Helper()
	x.Type(program(t) + " watch " + args + `; echo "exit=$?"; stty -a | tr ' ' '\n' | grep -E '^-?(icanon|echo);?$' | tr '\n' ' '`)
}

// left checks that the program is gone with an exit code and the terminal is
// as it was: the shell's screen, the cursor, and lines edited and echoed.
func left(t *testing.T, x *tmuxtest.Terminal, code string) {
	t.Helper()
	x.Wait("exit="+code, "icanon")
	screen := x.Screen()
	if x.Alternate() || !x.CursorShown() || strings.Contains(screen, "-icanon") || strings.Contains(screen, "-echo") {
		t.Errorf("alternate screen %t, cursor %t, screen\n%s", x.Alternate(), x.CursorShown(), screen)
	}
}

// clock is the time that the screen shows, in fs.
func clock(t *testing.T, screen string) float64 {
	t.Helper()
	m := regexp.MustCompile(`([0-9.]+) fs `).FindStringSubmatch(screen)
	if m == nil {
		t.Fatalf("no time on the screen\n%s", screen)
	}
	v, err := strconv.ParseFloat(m[1], 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// average is the predicted transmission that the screen shows.
func average(t *testing.T, screen string) string {
	t.Helper()
	m := regexp.MustCompile(`transmitted +[0-9.]+ +([0-9.]+) `).FindStringSubmatch(screen)
	if m == nil {
		t.Fatalf("no average on the screen\n%s", screen)
	}
	return m[1]
}

// A user starts a demo, pauses, steps back, changes a quantity, runs to the
// end and leaves.
func TestWatchInATerminal(t *testing.T) {
	x := tmuxtest.Open(t, 100, 30, "LC_ALL=C.UTF-8")
	x.Type("echo before")
	watchIn(t, x, "thin-barrier")
	x.Wait("Tunnelling through a thin barrier", "▸", "free flight", "space pause")
	if !x.Alternate() {
		t.Error("the alternate screen is not on")
	}
	x.Until("time that passes", func(s string) bool { return strings.Contains(s, " fs ") && clock(t, s) > 20 })

	x.Keys("Space")
	paused := clock(t, x.Wait("‖"))
	x.Keys("Left", "Left", "Left")
	back := clock(t, x.Until("earlier time", func(s string) bool { return clock(t, s) < paused }))
	if !strings.Contains(x.Screen(), "‖") || back <= 0 {
		t.Errorf("after three steps back from %g the time is %g", paused, back)
	}

	before := average(t, x.Screen())
	x.Keys("e")
	x.Wait("change a quantity", "layer[0].thickness", "3 nm")
	x.Keys("Down", "Down", "Right")
	screen := x.Until("another prediction", func(s string) bool { return average(t, s) != before })
	if !strings.Contains(screen, "3.1 nm") || clock(t, screen) != 0 || average(t, screen) > before {
		t.Errorf("transmission %s before; afterwards\n%s", before, screen)
	}
	x.Keys("Escape")
	x.Wait("space pause")

	x.Keys("G")
	x.Wait("■", "agrees")
	x.Keys("?")
	x.Wait("Time", "Panels", "density linear or log")
	x.Keys("q")
	x.Wait("■")
	x.Keys("q")
	x.Wait("before")
	left(t, x, "0")
}

// Whatever the signal, the terminal is as it was.
func TestSignalsRestoreTheTerminal(t *testing.T) {
	for _, c := range []struct {
		signal syscall.Signal
		code   string
	}{{syscall.SIGTERM, "143"}, {syscall.SIGINT, "130"}, {syscall.SIGHUP, "129"}} {
		t.Run(c.signal.String(), func(t *testing.T) {
			x := tmuxtest.Open(t, 80, 24, "LC_ALL=C.UTF-8")
			watchIn(t, x, "twin-barrier")
			x.Wait("twin-barrier resonator", "▸")
			if err := syscall.Kill(watched(t), c.signal); err != nil {
				t.Fatal(err)
			}
			left(t, x, c.code)
		})
	}
}

// watched is the process id of the program that this test binary is in the
// terminal, found by its open executable's name and its arguments.
func watched(t *testing.T) int {
	t.Helper()
	list, err := filepath.Glob("/proc/[0-9]*/cmdline")
	if err != nil || len(list) == 0 {
		t.Fatalf("no processes: %v", err)
	}
	for _, name := range list {
		text, err := os.ReadFile(name)
		args := strings.Split(string(text), "\x00")
		if err != nil || len(args) < 2 || !strings.HasPrefix(args[0], os.TempDir()) || !strings.Contains(args[0], t.Name()[:8]) || args[1] != "watch" {
			continue
		}
		pid, err := strconv.Atoi(filepath.Base(filepath.Dir(name)))
		if err != nil {
			t.Fatal(err)
		}
		return pid
	}
	t.Fatal("the program does not run")
	return 0
}

func TestCtrlCLeaves(t *testing.T) {
	x := tmuxtest.Open(t, 80, 24, "LC_ALL=C.UTF-8")
	watchIn(t, x, "thin-barrier")
	x.Wait("▸")
	x.Keys("C-c")
	left(t, x, "0")
}

// When the terminal goes away, so does the program.
func TestClosedTerminalEndsTheProgram(t *testing.T) {
	x := tmuxtest.Open(t, 80, 24, "LC_ALL=C.UTF-8")
	watchIn(t, x, "thin-barrier")
	x.Wait("▸")
	pid := watched(t)
	x.Close()
	for began := time.Now(); syscall.Kill(pid, 0) == nil; time.Sleep(20 * time.Millisecond) {
		if time.Since(began) > 10*time.Second {
			t.Fatalf("process %d still runs 10 s after its terminal was closed", pid)
		}
	}
}

// Any size at any moment.
func TestResize(t *testing.T) {
	x := tmuxtest.Open(t, 80, 24, "LC_ALL=C.UTF-8")
	watchIn(t, x, "thin-barrier")
	x.Wait("▸")
	for _, size := range [][2]int{{200, 60}, {23, 5}, {1, 1}, {40, 12}, {3, 60}, {240, 2}, {120, 36}} {
		x.Resize(size[0], size[1])
		x.Until("screen", func(s string) bool { return strings.TrimSpace(s) != "" })
	}
	x.Wait("plane wave", "measured", "What is transmitted comes")
	x.Keys("q")
	left(t, x, "0")
}

// Colours and characters follow the environment alone.
func TestColoursFollowTheEnvironment(t *testing.T) {
	for _, c := range []struct {
		env     []string
		colours bool
		ascii   bool
	}{
		{[]string{"TERM=screen-256color", "LC_ALL=C.UTF-8"}, true, false},
		{[]string{"TERM=screen", "LC_ALL=C.UTF-8"}, true, false},
		{[]string{"TERM=screen-256color", "LC_ALL=C.UTF-8", "NO_COLOR=1"}, false, false},
		{[]string{"TERM=screen", "LC_ALL=C", "LANG=C"}, true, true},
	} {
		x := tmuxtest.Open(t, 80, 24, c.env...)
		watchIn(t, x, "thin-barrier")
		x.Wait("free flight", "space pause")
		screen := x.Coloured()
		if coloured := strings.Contains(screen, "\x1b["); coloured != c.colours {
			t.Errorf("%v: colours %t, want %t", c.env, coloured, c.colours)
		}
		if ascii := strings.IndexFunc(screen, func(r rune) bool { return r > 0x7f }) < 0; ascii != c.ascii {
			t.Errorf("%v: ASCII %t, want %t", c.env, ascii, c.ascii)
		}
		x.Keys("q")
		left(t, x, "0")
	}
}

// A reader that has seen enough ends the program without a word.
func TestClosedPipeIsQuiet(t *testing.T) {
	x := tmuxtest.Open(t, 100, 30, "LC_ALL=C.UTF-8")
	x.Type(program(t) + ` watch thin-barrier --frames 2000 | head -n 1; echo "over"`)
	screen := x.Wait("Tunnelling through", "\nover")
	if strings.Contains(screen, "pipe") {
		t.Errorf("the screen shows\n%s", screen)
	}
}

// ctrl+z gives the shell back, and fg the picture.
func TestSuspend(t *testing.T) {
	x := tmuxtest.Open(t, 80, 24, "LC_ALL=C.UTF-8")
	x.Type("set -m; " + program(t) + " watch thin-barrier")
	x.Wait("▸")
	x.Keys("C-z")
	x.Wait("Stopped")
	if x.Alternate() {
		t.Error("the alternate screen is still on")
	}
	x.Type("fg")
	x.Wait("free flight", "▸")
	x.Keys("q")
	x.Until("shell", func(string) bool { return !x.Alternate() })
}

// Without an argument there is a choice.
func TestChooserInATerminal(t *testing.T) {
	x := tmuxtest.Open(t, 80, 24, "LC_ALL=C.UTF-8")
	watchIn(t, x, "")
	x.Wait("Which scenario?", "collector-step", "twin-barrier")
	x.Keys("Down", "Down", "Enter")
	x.Wait("Pulse on a collector step", "free flight")
	x.Keys("q")
	left(t, x, "0")
}
