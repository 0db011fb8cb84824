package main

import (
	"bytes"
	"io"
	"os"
	"os/exec"
	"regexp"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/creack/pty"
)

// TestStartOnMuteTerminal starts the program on a terminal that answers
// nothing: it must not ask, and must not wait.
func TestStartOnMuteTerminal(t *testing.T) {
	const allowed = 50 * time.Millisecond
	path, fastest := program(t), time.Hour
	for range 10 { // the machine may be busy: one quick start is enough
		cmd := exec.Command(path, "--version")
		began := time.Now()
		screen := onTerminal(t, cmd)
		fastest = min(fastest, time.Since(began))
		if !regexp.MustCompile(`^fluxtoll [^\r\n]*\r\n$`).Match(screen) {
			t.Fatalf("the terminal received %q, want one line without an escape sequence", screen)
		}
	}
	if fastest > allowed {
		t.Errorf("the quickest of ten starts took %v, want at most %v", fastest, allowed)
	}
}

// onTerminal runs a program with everything connected to a terminal that
// never answers and returns what the terminal received.
func onTerminal(t *testing.T, cmd *exec.Cmd) []byte {
	t.Helper()
	cmd.Env = append(os.Environ(), "TERM=xterm-256color")
	screen, err := pty.Start(cmd)
	if err != nil {
		t.Fatal(err)
	}
	defer screen.Close()
	received, _ := io.ReadAll(screen) // ends with EIO when the program does
	if err := cmd.Wait(); err != nil {
		t.Fatalf("%v; the terminal received %q", err, received)
	}
	return received
}

// TestInterrupt interrupts a long run once its progress shows: the line
// vanishes, what was measured so far is printed, and the exit code tells the
// signal.
func TestInterrupt(t *testing.T) {
	for _, c := range []struct {
		name   string
		signal os.Signal
		exit   int
	}{{"SIGINT", os.Interrupt, exitInterrupted}, {"SIGTERM", syscall.SIGTERM, exitTerminated}} {
		t.Run(c.name, func(t *testing.T) {
			t.Parallel()
			out, screen, exit := interrupt(t, c.signal)
			if exit != c.exit {
				t.Errorf("exit code %d, want %d", exit, c.exit)
			}
			for _, want := range []string{"Pulse on a collector step", "ledger    reflected ", "verdict   interrupted: "} {
				if !strings.Contains(out, want) {
					t.Errorf("standard output lacks %q:\n%s", want, out)
				}
			}
			if !strings.Contains(screen, " %, about ") || strings.Contains(screen, "\x1b") {
				t.Errorf("the terminal received %q, want progress without escape sequences", screen)
			}
			if !regexp.MustCompile(`\r *\r$`).MatchString(screen) {
				t.Errorf("the terminal received %q, want the line erased at the end", screen)
			}
		})
	}
}

// interrupt starts a run that would take hours, with standard error on a
// terminal, and sends the signal when progress shows there.
func interrupt(t *testing.T, s os.Signal) (out, screen string, exit int) {
	t.Helper()
	cmd := exec.Command(program(t), "run", "collector-step", "--time-step", "1e-5 fs", "--max-steps", "2147483647")
	ours, theirs, err := pty.Open()
	if err != nil {
		t.Fatal(err)
	}
	defer ours.Close()
	if err := pty.Setsize(ours, &pty.Winsize{Rows: 24, Cols: 80}); err != nil {
		t.Fatal(err)
	}
	var stdout bytes.Buffer
	cmd.Stdout, cmd.Stderr = &stdout, theirs
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	theirs.Close()
	deadline := time.AfterFunc(60*time.Second, func() { _ = cmd.Process.Kill() })
	defer deadline.Stop()
	received := signalOnProgress(t, ours, cmd.Process, s)
	exit, err = exitOf(cmd.Wait())
	if err != nil {
		t.Fatal(err)
	}
	return stdout.String(), received, exit
}

// signalOnProgress reads the terminal to its end and sends the signal at the
// first sign of progress.
func signalOnProgress(t *testing.T, terminal io.Reader, p *os.Process, s os.Signal) string {
	t.Helper()
	var received []byte
	chunk, sent := make([]byte, 4096), false
	for {
		n, err := terminal.Read(chunk)
		received = append(received, chunk[:n]...)
		if !sent && bytes.Contains(received, []byte(" left")) {
			sent = true
			if err := p.Signal(s); err != nil {
				t.Fatal(err)
			}
		}
		if err != nil { // EIO: the program has ended
			return string(received)
		}
	}
}
