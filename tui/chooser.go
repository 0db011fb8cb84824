package tui

import (
	"os"
	"path/filepath"
	"strings"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// choice is a scenario that can be watched.
type choice struct{ name, title string }

// chooser lists demos and the scenario files of a folder.
type chooser struct {
	list []choice
	at   int
}

// mostFiles bounds the files listed of a folder.
const mostFiles = 200

func newChooser(folder string) *chooser {
	c := &chooser{}
	for _, d := range scenarios.Demos() {
		c.list = append(c.list, choice{d.Name, d.Title})
	}
	entries, err := os.ReadDir(folder)
	if err != nil {
		return c
	}
	for _, e := range entries {
		if strings.HasSuffix(e.Name(), ".toml") && !e.IsDir() && len(c.list) < mostFiles {
			c.list = append(c.list, choice{filepath.Join(folder, e.Name()), "file in this folder"})
		}
	}
	return c
}

func (c *chooser) move(n int) { c.at = max(0, min(len(c.list)-1, c.at+n)) }

// name is the picked scenario.
func (c *chooser) name() string { return c.list[c.at].name }

func (c *chooser) draw(b canvas.Box, hints, note string) {
	b.Text(0, 0, canvas.Strong, cut("Which scenario?", b.Wide))
	rows := b.High - 2
	first := max(0, min(c.at-rows/2, len(c.list)-rows))
	for y := 0; y < rows && first+y < len(c.list); y++ {
		c.line(b, y+1, first+y)
	}
	if note != "" {
		b.Text(0, b.High-1, canvas.Strong, cut(note, b.Wide))
		return
	}
	b.Text(0, b.High-1, canvas.Faint, cut(hints, b.Wide))
}

func (c *chooser) line(b canvas.Box, y, i int) {
	const names = 24
	style, sign := canvas.Plain, " "
	if i == c.at {
		style, sign = canvas.Picked, "▸"
		for x := range b.Wide {
			b.Put(x, y, style, ' ')
		}
	}
	x := b.Text(0, y, style, cut(sign+c.list[i].name, b.Wide))
	title := canvas.Faint
	if i == c.at {
		title = style
	}
	b.Text(max(x+1, names), y, title, cut(c.list[i].title, b.Wide-max(x+1, names)))
}
