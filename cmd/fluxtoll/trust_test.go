package main

import (
	"bytes"
	"os"
	"os/exec"
	"strings"
	"testing"
	"time"

	"github.com/creack/pty"
)

// TestTrustInterrupt interrupts packet runs of long packets, which would take
// several seconds: the lengths found stand, and the exit code tells.
func TestTrustInterrupt(t *testing.T) {
	t.Parallel()
	out, screen, exit := interruptTrust(t, exec.Command(program(t), "trust", "thin-barrier", "--within", "1e-5"))
	if exit != exitInterrupted {
		t.Errorf("exit code %d, want %d", exit, exitInterrupted)
	}
	for _, want := range []string{"answer    transmitted: ", "from there", "interrupted\n", "verdict   interrupted: "} {
		if !strings.Contains(out, want) {
			t.Errorf("standard output lacks %q:\n%s", want, out)
		}
	}
	if !strings.Contains(screen, "confirming with packet runs: ") || !strings.HasSuffix(screen, "\r") {
		t.Errorf("the terminal received %q, want progress that is erased at the end", screen)
	}
}

// interruptTrust runs a program with standard error on a terminal and sends
// SIGINT when progress shows there.
func interruptTrust(t *testing.T, cmd *exec.Cmd) (out, screen string, exit int) {
	t.Helper()
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
	screen = signalOnProgress(t, ours, cmd.Process, os.Interrupt)
	exit, err = exitOf(cmd.Wait())
	if err != nil {
		t.Fatal(err)
	}
	return stdout.String(), screen, exit
}
