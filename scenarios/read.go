package scenarios

import (
	"bytes"
	"errors"
	"io"
	"path/filepath"
	"slices"
	"strings"
)

// mostLayers bounds the layers of a scenario, and the rows of its tables.
const mostLayers = 20_000

// Read reads a scenario. Messages call it by name; open finds the tables it
// refers to, and may be nil where there are none. The error is an *InputError.
func Read(name string, src io.Reader, open OpenFunc) (*File, error) {
	text, err := readText(src)
	r := &reader{file: &File{Name: name, Tolerance: DefaultTolerance, source: string(text)}, open: open}
	switch {
	case err == nil && len(bytes.TrimSpace(text)) == 0:
		err = &fault{at: 1, msg: "is empty", accepted: "a scenario (TOML) is accepted; 'fluxtoll demos' lists some to start from"}
	case err == nil:
		err = r.document(text)
	}
	if err != nil {
		return nil, r.file.locate(err)
	}
	return r.file, nil
}

// ReadFile reads a scenario from a file, and its tables from beside it.
func ReadFile(path string) (*File, error) {
	src, err := openFile(path)
	if err != nil {
		return nil, &InputError{File: path, Msg: because(err), Accepted: "a scenario file (TOML) is accepted"}
	}
	defer src.Close()
	return Read(path, src, Beside(filepath.Dir(path)))
}

// locate makes an error of reading or compiling an *InputError.
func (f *File) locate(err error) error {
	var bad *fault
	if errors.As(err, &bad) {
		return bad.locate(f.Name, f.source)
	}
	return err
}

// end is the place after the last character.
func (f *File) end() place { return place(len(f.source)) + 1 }

// reader fills a File from a document.
type reader struct {
	file   *File
	open   OpenFunc
	tables map[string]*Table
	rows   int // of all tables
}

func (r *reader) document(text []byte) error {
	root, err := parseTree(text)
	if err != nil {
		return err
	}
	for _, step := range []func(*node) error{r.checkKeys, r.top, r.sections, r.layers, r.from, r.display} {
		if err := step(root); err != nil {
			return err
		}
	}
	return r.file.complete()
}

// top reads title, tolerance and units.
func (r *reader) top(root *node) error {
	if m := root.find("units"); m != nil {
		if _, err := choose("units", m, []string{"natural"}); err != nil {
			return err
		}
		r.file.Natural = true
	}
	if m := root.find("title"); m != nil {
		if m.value.kind != textNode {
			return &fault{at: m.value.at, key: "title", msg: "is " + m.value.kind.String(), accepted: "a text is accepted"}
		}
		r.file.Title = line(m.value.text)
	}
	m := root.find("tolerance")
	if m == nil {
		return nil
	}
	if m.value.kind != numberNode {
		return &fault{at: m.value.at, key: "tolerance", msg: "is " + m.value.kind.String(), accepted: toleranceAccepted}
	}
	return r.file.setTolerance(m.value.text, m.value.at)
}

const toleranceAccepted = "a plain number from 1e-13 to 1e-2 is accepted"

func tolerable(tolerance float64) bool { return tolerance >= 1e-13 && tolerance <= 1e-2 }

func (f *File) setTolerance(text string, at place) error {
	q, bad := parseQuantity(Plain, true, text)
	if bad == nil && !tolerable(q.Number) {
		bad = &fault{msg: excerpt(text) + " is out of range"}
	}
	if bad != nil {
		return &fault{at: at, key: "tolerance", msg: bad.msg, accepted: toleranceAccepted}
	}
	f.Tolerance = q.Number
	return nil
}

// choose reads a key that takes one of a few words.
func choose(key string, m *member, words []string) (string, error) {
	if m.value.kind == textNode && slices.Contains(words, m.value.text) {
		return m.value.text, nil
	}
	msg, hint := "is "+m.value.kind.String(), ""
	if m.value.kind == textNode {
		msg, hint = excerpt(m.value.text)+" is not known here", suggestion(m.value.text, words)
	}
	return "", &fault{at: m.value.at, key: key, msg: msg, accepted: hint + `accepted are "` + strings.Join(words, `", "`) + `"`}
}

// sections reads the quantities of the sections that occur once.
func (r *reader) sections(root *node) error {
	for _, s := range r.file.singles() {
		m := root.find(s.path)
		if m == nil {
			continue
		}
		*s.at = m.value.at
		if err := r.quantities(s, m.value); err != nil {
			return err
		}
	}
	return nil
}

// quantities reads those of one section.
func (r *reader) quantities(s section, table *node) error {
	for _, fd := range s.fields {
		m := table.find(fd.key)
		if m == nil {
			continue
		}
		q, bad := r.quantity(fd, s.key(fd.key), m.value)
		if bad != nil {
			return bad
		}
		*fd.q = q
	}
	return nil
}

// quantity reads one: a text with a unit, or in natural units a number.
func (r *reader) quantity(fd field, key string, n *node) (Quantity, *fault) {
	natural := r.file.Natural
	switch {
	case n.kind != textNode && n.kind != numberNode:
		return Quantity{}, fd.refuse("is "+n.kind.String(), natural, key, n.at)
	case n.kind == textNode && natural:
		return Quantity{}, fd.refuse(excerpt(n.text)+" is a text in a file in natural units", natural, key, n.at)
	}
	return fd.read(n.text, natural, key, n.at)
}

// from reads the side the packet comes from.
func (r *reader) from(root *node) error {
	packet := root.find("packet")
	if packet == nil {
		return nil
	}
	m := packet.value.find("from")
	if m == nil {
		return nil
	}
	word, err := choose("packet.from", m, []string{"left", "right"})
	if word == "right" {
		r.file.Packet.From = FromRight
	}
	return err
}
