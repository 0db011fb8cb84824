package main

import (
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"fluxtoll": main})
}

// TestScripts runs the command line's contract, one script for each command.
func TestScripts(t *testing.T) {
	const dir = "testdata/script"
	if list, err := filepath.Glob(filepath.Join(dir, "*.txt")); err != nil || len(list) < 6 {
		t.Fatalf("%d scripts (%v), want at least 6", len(list), err)
	}
	testscript.Run(t, testscript.Params{
		Dir:                 dir,
		RequireExplicitExec: true,
		Setup: func(e *testscript.Env) error {
			e.Setenv("LC_ALL", "C.UTF-8")
			return nil
		},
		Cmds: map[string]func(*testscript.TestScript, bool, []string){"exits": exits},
	})
}

// exits runs the program and checks its exit code: exits CODE ARGUMENT...
func exits(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 1 {
		ts.Fatalf("usage: exits CODE ARGUMENT...")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	got, err := exitOf(ts.Exec("fluxtoll", args[1:]...))
	ts.Check(err)
	if got != want {
		ts.Fatalf("exit code %d, want %d", got, want)
	}
}

// exitOf is the exit code that an error of running a program stands for.
func exitOf(err error) (int, error) {
	var exit *exec.ExitError
	switch {
	case err == nil:
		return 0, nil
	case errors.As(err, &exit):
		return exit.ExitCode(), nil
	}
	return 0, fmt.Errorf("the program did not run: %w", err)
}

// program returns the path of the program for tests that start it themselves:
// this test binary by the name that makes it the program (see TestMain).
func program(t testing.TB) string {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(t.TempDir(), "fluxtoll")
	if err := os.Symlink(self, path); err != nil {
		t.Fatal(err)
	}
	return path
}
