package scenarios

import (
	"bytes"
	"embed"
	"fmt"
	"path"
	"strings"
)

//go:embed demos
var demoFiles embed.FS

// Demo is a scenario that comes with the program.
type Demo struct {
	Name   string // such as collector-step
	Title  string
	Text   string      // the file, to start one's own from
	Tables []DemoTable // that the file refers to
}

// DemoTable is a CSV file that a demo expects beside it.
type DemoTable struct{ Name, Text string }

// Demos returns the demos in the order of their names.
func Demos() []Demo {
	names := demoNames()
	demos := make([]Demo, len(names))
	for i, name := range names {
		f, err := OpenDemo(name)
		if err != nil {
			panic("scenarios: a demo is broken: " + err.Error())
		}
		demos[i] = Demo{Name: name, Title: f.Title, Text: demoText(name + ".toml"), Tables: demoTables(f)}
	}
	return demos
}

// demoTables collects the tables of a demo.
func demoTables(f *File) []DemoTable {
	var tables []DemoTable
	for i := range f.Layers {
		if t := f.Layers[i].Table; t != nil {
			tables = append(tables, DemoTable{t.File, demoText(t.File)})
		}
	}
	return tables
}

// demoText returns one of the embedded files.
func demoText(file string) string {
	text, err := demoFiles.ReadFile(path.Join("demos", file))
	if err != nil {
		panic("scenarios: a demo is broken: " + err.Error())
	}
	return string(text)
}

// demoNames lists the demos in order.
func demoNames() []string {
	files, err := demoFiles.ReadDir("demos")
	if err != nil {
		panic("scenarios: the demos are missing: " + err.Error())
	}
	var names []string
	for _, f := range files {
		if name, ok := strings.CutSuffix(f.Name(), ".toml"); ok {
			names = append(names, name)
		}
	}
	return names
}

// OpenDemo reads a demo. The error is an *InputError.
func OpenDemo(name string) (*File, error) {
	text, err := demoFiles.ReadFile("demos/" + name + ".toml")
	if err != nil {
		names := demoNames()
		return nil, &InputError{
			File: line(name), Msg: "is no demo",
			Accepted: fmt.Sprintf("%saccepted are %s", suggestion(name, names), strings.Join(names, ", ")),
		}
	}
	return Read(name, bytes.NewReader(text), Within(demoFiles, "demos"))
}
