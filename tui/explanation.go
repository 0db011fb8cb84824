package tui

import (
	"fmt"
	"math"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// explanation says by how much each part comes later than in free flight, and
// why: the structure itself, the filtering of the packet, the exit lead. Where
// there is room, also in words.
type explanation struct {
	canvas.Box
	shifts []scenarios.Shift
	result *scenarios.Result
	unit   string
}

// shiftColumn is a column of the table: where it ends and what it shows.
type shiftColumn struct {
	name string
	end  int
	of   func(scenarios.Shift) *float64
}

func (e explanation) draw() {
	f := e.format()
	e.Text(0, 0, canvas.Faint, "free flight")
	for i, c := range e.columns() {
		e.TextRight(c.end, 0, canvas.Faint, c.name)
		style := canvas.Plain
		if i == 0 {
			style = canvas.Strong
		}
		for y, s := range e.shifts {
			text := missing
			if v := c.of(s); v != nil {
				text = f.signed(*v)
			}
			e.TextRight(c.end, y+1, style, text)
		}
	}
	for y, s := range e.shifts {
		e.Text(0, y+1, canvas.Plain, s.Part)
	}
	e.words(len(e.shifts)+2, f)
}

// columns are those that have something to say and room to say it.
func (e explanation) columns() []shiftColumn {
	list := []shiftColumn{
		{"late by", 20, func(s scenarios.Shift) *float64 { return &s.Total }},
		{"structure", 30, func(s scenarios.Shift) *float64 { return &s.Structure }},
		{"filter", 39, func(s scenarios.Shift) *float64 { return &s.Filter }},
	}
	end := 49
	if e.exit() {
		list = append(list, shiftColumn{"exit lead", end, func(s scenarios.Shift) *float64 { return &s.Exit }})
		end += 10
	}
	if e.Wide >= end {
		list = append(list, shiftColumn{"measured", end, e.measured})
	}
	return list
}

// exit reports whether the leads' difference matters.
func (e explanation) exit() bool {
	for _, s := range e.shifts {
		if math.Abs(s.Exit) > 1e-7*math.Abs(s.Free) {
			return true
		}
	}
	return false
}

// measured is by how much the packet itself is late, once next to all of the
// part has arrived: when its group delay is given.
func (e explanation) measured(s scenarios.Shift) *float64 {
	var arrival, delay *float64
	for _, q := range e.result.Quantities {
		switch q.Name {
		case "arrival_" + s.Part:
			arrival = q.Packet
		case "group_delay_" + s.Part:
			delay = q.Packet
		}
	}
	if arrival == nil || delay == nil {
		return nil
	}
	v := *arrival - s.Free
	return &v
}

// format has no digit below the error of the shifts.
func (e explanation) format() format {
	size, err := 0.0, 0.0
	for _, s := range e.shifts {
		size = math.Max(size, math.Max(math.Abs(s.Total), math.Max(math.Abs(s.Structure), math.Abs(s.Filter))))
		err = math.Max(err, s.Error)
	}
	f := timeFormat(size, 8)
	if f.scientific {
		return format{1, true}
	}
	f.decimals = min(f.decimals, max(3, 3-int(math.Floor(math.Log10(size)))))
	if err > 0 {
		f.decimals = max(0, min(f.decimals, int(math.Floor(-math.Log10(err)))))
	}
	return f
}

// words explains every part in sentences from a line on, as far as they fit.
func (e explanation) words(y int, f format) {
	for _, s := range e.shifts {
		lines := wrap(sentence(s, f, e.unit), e.Wide)
		if y+len(lines) > e.High {
			return
		}
		for _, line := range lines {
			e.Text(0, y, canvas.Faint, line)
			y++
		}
	}
}

// sentence says why a part is late, reasons that round to nothing left out.
func sentence(s scenarios.Shift, f format, unit string) string {
	text := fmt.Sprintf("What is %s comes %s %s", s.Part, withUnit(f.text(math.Abs(s.Total)), unit), pick(s.Total, "late", "early"))
	mark := ": "
	for _, r := range reasons(s) {
		if f.text(math.Abs(r.value)) != f.text(0) {
			text += mark + withUnit(f.signed(r.value), unit) + ", " + pick(r.value, r.late, r.early)
			mark = "; "
		}
	}
	return text + "."
}

// reason is a part of a shift with the words for either sign.
type reason struct {
	value       float64
	late, early string
}

func reasons(s scenarios.Shift) []reason {
	if s.Part == "reflected" {
		return []reason{
			{s.Structure, "it turns back only within the structure", "it turns back sooner than at a hard wall"},
			{s.Filter, "its slower part is reflected more easily", "its faster part is reflected more easily"},
		}
	}
	return []reason{
		{s.Structure, "the structure is slower to cross than empty space", "the structure is quicker to cross than empty space"},
		{s.Filter, "its slower part passes more easily", "its faster part passes more easily"},
		{s.Exit, "it is slower behind the structure", "it is faster behind the structure"},
	}
}

func pick(v float64, positive, negative string) string {
	if v < 0 {
		return negative
	}
	return positive
}
