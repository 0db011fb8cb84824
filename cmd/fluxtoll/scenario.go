package main

import (
	"errors"
	"io"
	"os"
	"strings"

	"fluxtoll/scenarios"
)

// openScenario reads the scenario that an argument names: "-" is standard
// input; a file that exists is that file; anything else without a slash and
// the ending .toml is a demo. So a file shadows a demo of the same name.
func openScenario(name string, stdin io.Reader) (*scenarios.File, error) {
	switch {
	case name == "":
		return nil, errors.New("the name of the scenario is empty; a file, a demo or - is accepted")
	case name == "-":
		return scenarios.Read("standard input", stdin, scenarios.Beside("."))
	case isFile(name) || strings.ContainsRune(name, os.PathSeparator) || strings.HasSuffix(name, ".toml"):
		return scenarios.ReadFile(name)
	}
	f, err := scenarios.OpenDemo(name)
	var bad *scenarios.InputError
	if errors.As(err, &bad) && bad.Line == 0 {
		bad.Msg = "is neither a file nor a demo"
		if isDirectory(name) {
			bad.Msg = "is a directory, and no demo has that name"
		}
	}
	return f, err
}

// isFile reports whether something other than a directory has the name.
func isFile(name string) bool {
	info, err := os.Stat(name)
	return err == nil && !info.IsDir()
}

func isDirectory(name string) bool {
	info, err := os.Stat(name)
	return err == nil && info.IsDir()
}
