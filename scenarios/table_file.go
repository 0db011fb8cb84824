package scenarios

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"path"
	"slices"
	"strings"
)

// Table is a height, and optionally a mass, given at points by a CSV file: a
// line that names the columns x, height and mass, each with its unit in
// brackets ("x [nm]"; in natural units without), then one line for each point,
// x rising. Lines that start with # are comments. A Table is not changed once
// it is read.
type Table struct {
	File            string // as written in the scenario
	Smooth          bool   // joined by a smooth curve instead of straight lines
	X, Height, Mass Column
}

// Column is one column of a table. Values is nil where there is none.
type Column struct {
	Unit   string
	Values []float64
}

// table reads the table of layer i.
func (r *reader) table(i int, item *node) error {
	l := &r.file.Layers[i]
	key := layerPath(i) + ".file"
	m := item.find("file")
	if m == nil || m.value.kind != textNode || m.value.text == "" {
		return &fault{at: item.at, key: key, msg: "is missing or no text", accepted: "the name of a CSV file beside the scenario is accepted"}
	}
	t, err := r.load(m.value.text, key, m.value.at)
	if err != nil {
		return err
	}
	if r.rows += len(t.X.Values); r.rows > mostLayers {
		return &fault{at: m.value.at, key: key, msg: "brings the rows of all tables above the limit", accepted: fmt.Sprintf("up to %d rows in total are accepted", mostLayers)}
	}
	if t.Mass.Values != nil && l.Mass.Given {
		return &fault{at: l.Mass.at, key: layerPath(i) + ".mass", msg: "is given here and by the table", accepted: "give the mass once"}
	}
	if m := item.find("interpolate"); m != nil {
		word, err := choose(layerPath(i)+".interpolate", m, []string{"linear", "smooth"})
		if err != nil {
			return err
		}
		t.Smooth = word == "smooth"
	}
	l.Table = &t
	return nil
}

// load opens and reads a table, once for each name.
func (r *reader) load(name, key string, at place) (Table, error) {
	if t, ok := r.tables[name]; ok {
		return *t, nil
	}
	const accepted = "the name of a CSV file beside the scenario is accepted"
	if r.open == nil {
		return Table{}, &fault{at: at, key: key, msg: "no table can be opened here", accepted: "read the scenario from a file"}
	}
	src, err := r.open(name)
	if err != nil {
		return Table{}, &fault{at: at, key: key, msg: excerpt(name) + " " + because(err), accepted: accepted}
	}
	defer src.Close()
	t, err := readTable(path.Join(path.Dir(r.file.Name), name), src, r.file.Natural)
	if err != nil {
		return Table{}, err
	}
	t.File = name
	if r.tables == nil {
		r.tables = map[string]*Table{}
	}
	r.tables[name] = t
	return *t, nil
}

// readTable reads a CSV file. The error is an *InputError about that file.
func readTable(name string, src io.Reader, natural bool) (*Table, error) {
	text, err := readText(src)
	if err != nil {
		return nil, (&File{Name: name, source: string(text)}).locate(err)
	}
	lines := csv.NewReader(bytes.NewReader(text))
	lines.Comment, lines.FieldsPerRecord, lines.TrimLeadingSpace, lines.ReuseRecord = '#', -1, true, true
	t := &tableReader{name: name, natural: natural, lines: lines, table: &Table{}}
	if err := t.read(); err != nil {
		return nil, err
	}
	return t.table, nil
}

// tableReader fills a Table line by line.
type tableReader struct {
	name    string
	natural bool
	lines   *csv.Reader
	table   *Table
	columns []*Column
	kinds   []Kind
}

func (t *tableReader) read() error {
	header, err := t.lines.Read()
	if err != nil {
		return t.broken(err)
	}
	if err := t.header(header); err != nil {
		return err
	}
	for {
		row, err := t.lines.Read()
		if err == io.EOF {
			return t.enough()
		}
		if err != nil {
			return t.broken(err)
		}
		if err := t.row(row); err != nil {
			return err
		}
	}
}

// fault is an error at a field of the line read last.
func (t *tableReader) fault(column int, msg, accepted string) error {
	line, at := t.lines.FieldPos(column)
	return &InputError{File: t.name, Line: line, Column: at, Msg: msg, Accepted: accepted}
}

const tableAccepted = `a first line such as "x [nm], height [meV]" and at least two lines of numbers are accepted`

// broken is an error of the CSV format itself.
func (t *tableReader) broken(err error) error {
	bad := &InputError{File: t.name, Line: 1, Column: 1, Msg: "is empty", Accepted: tableAccepted}
	var parse *csv.ParseError
	if errors.As(err, &parse) {
		bad.Line, bad.Column, bad.Msg = parse.Line, parse.Column, parse.Err.Error()
	}
	return bad
}

// header reads the names and units of the columns.
func (t *tableReader) header(names []string) error {
	for i, text := range names {
		name, unit, bracket := strings.Cut(strings.TrimSpace(text), "[")
		column, kind := t.column(strings.TrimSpace(name))
		if column == nil {
			return t.fault(i, "column "+excerpt(text)+" is not known here", suggestion(strings.TrimSpace(name), []string{"x", "height", "mass"})+"accepted are x, height and mass, each with its unit")
		}
		if slices.Contains(t.columns, column) {
			return t.fault(i, "column "+excerpt(text)+" is given twice", "give each column once")
		}
		unit = canonical(strings.TrimSuffix(strings.TrimSpace(unit), "]"))
		if msg := t.unitFault(kind, unit, bracket); msg != "" {
			return t.fault(i, "column "+excerpt(text)+" "+msg, t.unitAccepted(kind))
		}
		column.Unit = unit
		t.columns, t.kinds = append(t.columns, column), append(t.kinds, kind)
	}
	for _, need := range []struct {
		name   string
		column *Column
	}{{"x", &t.table.X}, {"height", &t.table.Height}} {
		if !slices.Contains(t.columns, need.column) {
			return t.fault(0, "the column "+need.name+" is missing", tableAccepted)
		}
	}
	return nil
}

func (t *tableReader) column(name string) (*Column, Kind) {
	switch name {
	case "x":
		return &t.table.X, Length
	case "height":
		return &t.table.Height, Energy
	case "mass":
		return &t.table.Mass, Mass
	}
	return nil, Plain
}

// unitFault says what is wrong with a column's unit, or nothing.
func (t *tableReader) unitFault(kind Kind, unit string, bracket bool) string {
	_, known := unitSize(kind, unit)
	switch {
	case t.natural && bracket:
		return "has a unit, beside a scenario in natural units"
	case t.natural || known:
		return ""
	case unit == "":
		return "has no unit"
	}
	return "has no unit of " + kind.String()
}

func (t *tableReader) unitAccepted(kind Kind) string {
	if t.natural {
		return "leave the brackets out"
	}
	return "write the unit in brackets: " + kind.String() + " " + spelledUnits(kind)
}

// row reads one point.
func (t *tableReader) row(fields []string) error {
	if len(fields) != len(t.columns) {
		return t.fault(0, fmt.Sprintf("has %d columns, the first line %d", len(fields), len(t.columns)), "give one number for each column")
	}
	if len(t.table.X.Values) == mostLayers {
		return t.fault(0, fmt.Sprintf("is row %d", mostLayers+1), fmt.Sprintf("up to %d rows are accepted", mostLayers))
	}
	for i, text := range fields {
		digits, rest := cutNumber(strings.TrimSpace(text))
		v, err := number(digits, rest)
		switch {
		case err != nil:
			return t.fault(i, excerpt(text)+" "+err.Error(), "a plain number is accepted")
		case rest != "":
			return t.fault(i, excerpt(text)+" has text after its number", "a plain number is accepted; units stand in the first line")
		}
		if msg := t.misfit(i, v); msg != "" {
			return t.fault(i, excerpt(text)+" "+msg, accepts(t.kinds[i], t.natural, anySign))
		}
		t.columns[i].Values = append(t.columns[i].Values, v)
	}
	return nil
}

// misfit says what is wrong with a value, or nothing.
func (t *tableReader) misfit(column int, v float64) string {
	c := t.columns[column]
	q := Quantity{Kind: t.kinds[column], Number: v, Unit: c.Unit}
	if c == &t.table.Mass && v <= 0 {
		return "is no mass: it must be greater than zero"
	}
	if n := len(c.Values); c == &t.table.X && n > 0 && v <= c.Values[n-1] {
		return "is not above the x before it; x must rise"
	}
	return q.misfit(t.natural)
}

// enough refuses a table of fewer than two points.
func (t *tableReader) enough() error {
	if n := len(t.table.X.Values); n < 2 {
		line, _ := t.lines.FieldPos(0)
		return &InputError{File: t.name, Line: line, Column: 1, Msg: fmt.Sprintf("has %d rows of numbers", n), Accepted: tableAccepted}
	}
	return nil
}
