// Package tmuxtest runs a program in a real terminal for tests: in tmux, on a
// server of the test's own. It waits by looking at the screen again and again,
// up to a deadline, and never by sleeping for a while.
package tmuxtest

import (
	"fmt"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"
)

// patience is how long a screen may take to show what is expected.
const patience = 20 * time.Second

// Terminal is one terminal with a shell in it.
type Terminal struct {
	t      testing.TB
	socket string
}

// Open starts a terminal of a size with a shell whose prompt is "$ ", in an
// empty folder. The environment is added to the shell's.
func Open(t testing.TB, wide, high int, env ...string) *Terminal {
	t.Helper()
	if _, err := exec.LookPath("tmux"); err != nil {
		t.Fatal("this test needs tmux: apt-get install tmux")
	}
	dir := t.TempDir()
	term := &Terminal{t: t, socket: filepath.Join(dir, "s")}
	start := []string{"-f", "/dev/null", "new-session", "-d", "-x", strconv.Itoa(wide), "-y", strconv.Itoa(high), "-c", dir}
	start = append(start, "env", "-u", "ENV", "PS1=$ ")
	start = append(start, env...)
	term.tmux(append(start, "sh")...)
	t.Cleanup(func() { _ = exec.Command("tmux", "-S", term.socket, "kill-server").Run() })
	term.Wait("$")
	return term
}

// tmux runs a command of tmux and returns its output.
func (x *Terminal) tmux(args ...string) string {
	x.t.Helper()
	out, err := exec.Command("tmux", append([]string{"-S", x.socket}, args...)...).CombinedOutput()
	if err != nil {
		x.t.Fatalf("tmux %s: %v: %s", strings.Join(args, " "), err, out)
	}
	return string(out)
}

// Type sends a line of text and Enter.
func (x *Terminal) Type(line string) {
	x.t.Helper()
	x.tmux("send-keys", "-l", line)
	x.Keys("Enter")
}

// Keys sends keys by the names that tmux has for them.
func (x *Terminal) Keys(names ...string) {
	x.t.Helper()
	x.tmux(append([]string{"send-keys"}, names...)...)
}

// Screen is what the terminal shows.
func (x *Terminal) Screen() string {
	x.t.Helper()
	return x.tmux("capture-pane", "-p")
}

// Coloured is what it shows, with the colours as escape sequences.
func (x *Terminal) Coloured() string {
	x.t.Helper()
	return x.tmux("capture-pane", "-p", "-e")
}

// Resize changes the terminal's size.
func (x *Terminal) Resize(wide, high int) {
	x.t.Helper()
	x.tmux("resize-window", "-x", strconv.Itoa(wide), "-y", strconv.Itoa(high))
}

// Close takes the terminal away from under what runs in it.
func (x *Terminal) Close() {
	x.t.Helper()
	x.tmux("kill-session")
}

// Alternate reports whether the alternate screen is on.
func (x *Terminal) Alternate() bool {
	x.t.Helper()
	return strings.TrimSpace(x.tmux("display-message", "-p", "#{alternate_on}")) == "1"
}

// CursorShown reports whether the cursor is shown.
func (x *Terminal) CursorShown() bool {
	x.t.Helper()
	return strings.TrimSpace(x.tmux("display-message", "-p", "#{cursor_flag}")) == "1"
}

// Wait waits until the screen holds all of the texts and returns it.
func (x *Terminal) Wait(texts ...string) string {
	x.t.Helper()
	return x.Until(fmt.Sprintf("%q", texts), func(screen string) bool {
		for _, text := range texts {
			if !strings.Contains(screen, text) {
				return false
			}
		}
		return true
	})
}

// Until waits until the screen is as wanted; what names that in a failure.
func (x *Terminal) Until(what string, wanted func(screen string) bool) string {
	x.t.Helper()
	for began := time.Now(); ; time.Sleep(20 * time.Millisecond) {
		screen := x.Screen()
		if wanted(screen) {
			return screen
		}
		if time.Since(began) > patience {
			x.t.Fatalf("no %s after %v; the screen shows\n%s", what, patience, screen)
		}
	}
}
