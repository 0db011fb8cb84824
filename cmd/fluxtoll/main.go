package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"
)

func main() {
	os.Exit(run(context.Background(), os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
}

// run is the whole program: it does what args ask and returns the exit code.
func run(ctx context.Context, args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	if !utf8Locale(os.Getenv) {
		stdout, stderr = asciiWriter{stdout}, asciiWriter{stderr}
	}
	out := &checkedWriter{Writer: stdout}
	root := newRoot()
	root.SetArgs(args)
	root.SetIn(stdin)
	root.SetOut(out)
	root.SetErr(stderr)
	err := root.ExecuteContext(ctx)
	if out.err != nil {
		err = fmt.Errorf("standard output: %w", out.err)
	}
	return conclude(err, stderr)
}

// conclude says what went wrong, if anything, and returns the exit code.
func conclude(err error, stderr io.Writer) int {
	var code exitCode
	switch {
	case err == nil:
		return exitDone
	case errors.As(err, &code):
		return int(code)
	}
	fmt.Fprintf(stderr, "fluxtoll: %s\n", strings.TrimSpace(err.Error()))
	var short *shortfall
	if errors.As(err, &short) {
		return exitNotReached
	}
	return exitBadRequest
}

// checkedWriter keeps the first error of the writer below it.
type checkedWriter struct {
	io.Writer
	err error
}

func (w *checkedWriter) Write(p []byte) (int, error) {
	if w.err != nil {
		return 0, w.err
	}
	n, err := w.Writer.Write(p)
	w.err = err
	return n, err
}
