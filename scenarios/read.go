package scenarios

import (
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"slices"
	"strings"
)

// mostLayers bounds the layers of a scenario, and the rows of its tables.
const mostLayers = 100_000

// Read reads a scenario. Messages call it by name; open finds the tables it
// refers to, and may be nil where there are none. The error is an *InputError.
func Read(name string, src io.Reader, open OpenFunc) (*File, error) {
	text, err := readText(src)
	r := &reader{file: &File{Name: name, Tolerance: DefaultTolerance, source: string(text)}, open: open}
	if err == nil {
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

// topKeys are the keys outside any table.
func topKeys() []string {
	return []string{"title", "tolerance", "units", "particle", "entry", "layer", "exit", "bias", "packet", "planes", "display"}
}

// checkKeys refuses what no section has, before anything else: a misspelt key
// would otherwise be reported as a missing one.
func (r *reader) checkKeys(root *node) error {
	if err := known("", root, topKeys()); err != nil {
		return err
	}
	for _, s := range r.file.singles() {
		if err := knownTable(root, s.path, append(fieldKeys(s.fields), extraWords(s.path)...)); err != nil {
			return err
		}
	}
	if err := knownTable(root, "display", displayKeys()); err != nil {
		return err
	}
	return checkLayers(root.find("layer"))
}

// extraWords lists the keys of a section that are no quantities.
func extraWords(path string) []string {
	if path == "packet" {
		return []string{"from"}
	}
	return nil
}

// checkLayers refuses what is no array of tables with layer keys.
func checkLayers(m *member) error {
	if m == nil {
		return nil
	}
	if m.value.kind != arrayNode {
		return &fault{at: m.at, key: "layer", msg: "is " + m.value.kind.String(), accepted: "write each layer as [[layer]], from left to right"}
	}
	if n := len(m.value.items); n > mostLayers {
		return &fault{at: m.value.items[mostLayers].at, key: "layer", msg: fmt.Sprintf("there are %d of them", n), accepted: fmt.Sprintf("up to %d layers are accepted; a [[layer]] of shape \"table\" may replace many", mostLayers)}
	}
	keys := layerKeys()
	for i, item := range m.value.items {
		if item.kind != tableNode {
			return &fault{at: item.at, key: layerPath(i), msg: "is " + item.kind.String(), accepted: "write each layer as [[layer]], from left to right"}
		}
		if err := known(layerPath(i), item, keys); err != nil {
			return err
		}
	}
	return nil
}

// knownTable checks the keys of one table of the document, if it is there.
func knownTable(root *node, name string, keys []string) error {
	m := root.find(name)
	if m == nil {
		return nil
	}
	if m.value.kind != tableNode {
		return &fault{at: m.at, key: name, msg: "is " + m.value.kind.String(), accepted: "write it as the table [" + name + "] with " + strings.Join(keys, ", ")}
	}
	return known(name, m.value, keys)
}

// known refuses keys that are not listed.
func known(path string, table *node, keys []string) error {
	for _, m := range table.keys {
		if !slices.Contains(keys, m.name) {
			return unknownKey(path, m, keys)
		}
	}
	return nil
}

func unknownKey(path string, m member, keys []string) error {
	return &fault{
		at: m.at, key: section{path: path}.key(excerptKey(m.name)), msg: "is no key known here",
		accepted: suggestion(m.name, keys) + "accepted are " + strings.Join(keys, ", "),
	}
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

func (f *File) setTolerance(text string, at place) error {
	q, bad := parseQuantity(Plain, true, text)
	if bad == nil && !(q.Number >= 1e-13 && q.Number <= 1e-2) {
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

// complete refuses a file that lacks what it needs.
func (f *File) complete() error {
	for _, s := range f.singles() {
		if err := f.needs(s); err != nil {
			return err
		}
	}
	for i := range f.Layers {
		if err := f.needs(f.layer(i)); err != nil {
			return err
		}
	}
	return f.one()
}

// needs refuses a section that lacks a key.
func (f *File) needs(s section) error {
	for _, fd := range s.fields {
		if !fd.need || fd.q.Given {
			continue
		}
		at := *s.at
		if at == 0 {
			at = f.end()
		}
		return &fault{at: at, key: s.key(fd.key), msg: "is missing", accepted: accepts(fd.kind, f.Natural, fd.rule)}
	}
	return nil
}

// one refuses both and neither of length and spread.
func (f *File) one() error {
	const accepted = "give one of them: length is the standard deviation in x, spread the one in energy"
	p := &f.Packet
	switch {
	case p.Length.Given && p.Spread.Given:
		return &fault{at: max(p.Length.at, p.Spread.at), key: "packet", msg: "length and spread are both given", accepted: accepted}
	case !p.Length.Given && !p.Spread.Given:
		return &fault{at: p.at, key: "packet.length", msg: "neither length nor spread is given", accepted: accepted}
	}
	return nil
}
