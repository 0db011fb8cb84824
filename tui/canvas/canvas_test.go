package canvas

import (
	"encoding/xml"
	"errors"
	"io"
	"strings"
	"testing"
)

func TestDotsBecomeBraille(t *testing.T) {
	var c Canvas
	c.Reset(3, 1)
	b := c.Box(0, 0, 3, 1)
	b.Plot()
	// Unicode, Braille Patterns: dots 1 and 8 are 0x01 and 0x80.
	b.Dot(0, 0, Plain)
	b.Dot(1, 3, Plain)
	b.Fill(2, 4, Plain) // the left column: dots 1 2 3 7
	if got, want := c.String(Output{UTF8: true}), "\u2881\u2847\u2800"; got != want {
		t.Errorf("%q, want %q", got, want)
	}
	if got, want := c.String(Output{}), "::"; got != want {
		t.Errorf("ASCII %q, want %q", got, want)
	}
}

func TestInvertShowsALineOnBothGrounds(t *testing.T) {
	var c Canvas
	c.Reset(2, 1)
	b := c.Box(0, 0, 2, 1)
	b.Plot()
	b.Fill(0, 4, Right)
	b.Fill(1, 4, Right)
	for x := range 4 {
		b.Invert(x, 0, Ghost)
	}
	if got, want := c.String(Output{UTF8: true}), "\u28f6\u2809"; got != want {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestColourCodesOnlyWhereTheColourChanges(t *testing.T) {
	var c Canvas
	c.Reset(40, 2)
	c.Text(0, 0, Right, "aaaa")
	c.Text(4, 0, Right, "bbbb")
	c.Text(8, 0, Left, "cc")
	c.Text(0, 1, Plain, "plain")
	want := "\x1b[36maaaabbbb\x1b[0m\x1b[33mcc\x1b[0m\nplain"
	if got := c.String(Output{Depth: Colors16}); got != want {
		t.Errorf("%q, want %q", got, want)
	}
	if got, want := c.String(Output{}), "aaaabbbbcc\nplain"; got != want {
		t.Errorf("without colour %q, want %q", got, want)
	}
}

// Right and left never share a colour at any depth, and without colour there
// is no code at all.
func TestFlowHasTwoColours(t *testing.T) {
	for _, d := range []Depth{Colors16, Colors256, TrueColor} {
		table := codes(d)
		seen := map[string]Style{}
		for _, s := range []Style{Right, Left, Still} {
			if other, ok := seen[table[s]]; ok {
				t.Errorf("depth %d: styles %d and %d look alike", d, s, other)
			}
			seen[table[s]] = s
		}
	}
	for s, code := range codes(NoColor) {
		if code != "" {
			t.Errorf("style %d has the code %q without colour", s, code)
		}
	}
}

func TestDrawingOutsideIsIgnored(t *testing.T) {
	var c Canvas
	c.Reset(0, -3)
	if c.W != 1 || c.H != 1 {
		t.Fatalf("size %dx%d, want 1x1", c.W, c.H)
	}
	c.Text(-2, 0, Plain, "abcdef")
	c.Text(0, 7, Plain, "x")
	b := c.Box(0, 0, 1, 1)
	for x := -3; x < 6; x++ {
		b.Dot(x, 9, Plain)
		b.Invert(9, x, Plain)
		b.Fill(x+5, 100, Plain)
	}
	if got := c.String(Output{UTF8: true}); got != "c" {
		t.Errorf("%q, want c", got)
	}
}

// A character that is wide, combining or a command would break the columns.
func TestEveryCharacterFillsOneCell(t *testing.T) {
	var c Canvas
	c.Reset(9, 1)
	c.Text(0, 0, Plain, "a\u4e2db\u0301c\x1b\tħψ")
	if got, want := c.String(Output{UTF8: true}), "a?b?c??ħψ"; got != want {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestSVGIsWellFormed(t *testing.T) {
	var c Canvas
	c.Reset(20, 3)
	c.Text(0, 0, Strong, "a < b & c > d")
	b := c.Box(0, 1, 20, 2)
	b.Plot()
	b.Fill(5, 3, Left)
	b.Fill(9, 3, Right)
	var out strings.Builder
	if err := c.SVG(&out); err != nil {
		t.Fatal(err)
	}
	elements := map[string]int{}
	d := xml.NewDecoder(strings.NewReader(out.String()))
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			t.Fatal(err)
		}
		if start, ok := token.(xml.StartElement); ok {
			elements[start.Name.Local]++
		}
	}
	if elements["svg"] != 1 || elements["path"] != 2 || elements["text"] == 0 {
		t.Errorf("elements %v", elements)
	}
}

func BenchmarkString(b *testing.B) {
	var c Canvas
	c.Reset(200, 60)
	box := c.Box(0, 0, 200, 60)
	box.Plot()
	for x := range 400 {
		box.Fill(x, x%240, Style(x/10%5)+Right)
	}
	for b.Loop() {
		c.String(Output{Depth: Colors256, UTF8: true})
	}
}
