package main

import (
	"bytes"
	"os"
	"os/exec"
	"regexp"
	"testing"
	"time"

	"github.com/creack/pty"
)

// TestWatchAsksTheTerminalNothing watches on a terminal that never answers: a
// frame comes at once, no report is requested, and the first key is not
// swallowed.
func TestWatchAsksTheTerminalNothing(t *testing.T) {
	cmd := exec.Command(program(t), "watch", "thin-barrier")
	cmd.Env = append(os.Environ(), "TERM=xterm-256color", "LC_ALL=C.UTF-8")
	screen, err := pty.StartWithSize(cmd, &pty.Winsize{Rows: 24, Cols: 80})
	if err != nil {
		t.Fatal(err)
	}
	defer screen.Close()
	deadline := time.AfterFunc(20*time.Second, func() { _ = cmd.Process.Kill() })
	defer deadline.Stop()
	began := time.Now()
	received := quitOn(t, screen, "free flight")
	if took := time.Since(began); took > 5*time.Second {
		t.Errorf("it took %v until the program had shown a frame and left", took)
	}
	if code, err := exitOf(cmd.Wait()); err != nil || code != exitDone {
		t.Errorf("exit code %d, %v", code, err)
	}
	// Device attributes (CSI c), cursor position (CSI 6n), colours (OSC 10, 11).
	if asked := regexp.MustCompile(`\x1b\[[>=]?[0-9]*c|\x1b\[\??6n|\x1b\]1[01];\?`).Find(received); asked != nil {
		t.Errorf("the terminal was asked %q", asked)
	}
	if !bytes.Contains(received, []byte("\x1b[?1049l")) {
		t.Error("the alternate screen is left on")
	}
}

// quitOn reads the terminal to its end and types q when a text shows.
func quitOn(t *testing.T, screen *os.File, text string) []byte {
	t.Helper()
	var received []byte
	chunk, typed := make([]byte, 4096), false
	for {
		n, err := screen.Read(chunk)
		received = append(received, chunk[:n]...)
		if !typed && bytes.Contains(received, []byte(text)) {
			typed = true
			if _, err := screen.WriteString("q"); err != nil {
				t.Fatal(err)
			}
		}
		if err != nil { // EIO: the program has ended
			return received
		}
	}
}
