package scenarios

import (
	"embed"
	"fmt"
	"io/fs"
	"path"
	"strings"
)

//go:embed demos
var demoFiles embed.FS

// Demo is a scenario that comes with the program.
type Demo struct {
	Name  string // collector-step
	Title string
	Text  string // the file, to start one's own from
}

// Demos returns the demos in order of their names.
func Demos() []Demo {
	names, err := fs.Glob(demoFiles, "demos/*.toml")
	if err != nil {
		panic("scenarios: " + err.Error())
	}
	demos := make([]Demo, len(names))
	for i, name := range names {
		demos[i] = demo(strings.TrimSuffix(path.Base(name), ".toml"))
	}
	return demos
}

// demo reads one that is known to exist.
func demo(name string) Demo {
	text, err := demoFiles.ReadFile(demoPath(name))
	if err != nil {
		panic("scenarios: " + err.Error())
	}
	f, err := OpenDemo(name)
	if err != nil {
		panic("scenarios: demo " + err.Error())
	}
	return Demo{Name: name, Title: f.Title, Text: string(text)}
}

func demoPath(name string) string { return "demos/" + name + ".toml" }

// demoNames lists the demos without reading them.
func demoNames() []string {
	files, _ := fs.Glob(demoFiles, "demos/*.toml")
	for i, name := range files {
		files[i] = strings.TrimSuffix(path.Base(name), ".toml")
	}
	return files
}

// OpenDemo reads a demo.
func OpenDemo(name string) (*File, error) {
	src, err := demoFiles.Open(demoPath(name))
	if err != nil {
		names := demoNames()
		return nil, &InputError{
			File: line(name), Msg: "is no demo",
			Accepted: fmt.Sprintf("%saccepted are %s", suggestion(name, names), strings.Join(names, ", ")),
		}
	}
	defer src.Close()
	return Read(name, src, Within(demoFiles, "demos"))
}
