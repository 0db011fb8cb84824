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
		if math.Abs(s.Exit) > 1e-9*math.Abs(s.Free) {
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
		return f
	}
	f.decimals = min(f.decimals, 3)
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

// sentence says why a part is late.
func sentence(s scenarios.Shift, f format, unit string) string {
	time := func(v float64) string { return withUnit(f.text(math.Abs(v)), unit) }
	text := fmt.Sprintf("What is %s arrives %s %s than in free flight (%s)", s.Part, time(s.Total), pick(s.Total, "later", "earlier"), time(s.Free))
	reasons := []string{}
	for _, part := range []struct {
		value         float64
		slower, quick string
	}{
		{s.Structure, structureWords(s.Part)[0], structureWords(s.Part)[1]},
		{s.Filter, "because the slower part of the spectrum is " + s.Part + " more easily", "because the faster part of the spectrum is " + s.Part + " more easily"},
		{s.Exit, "because it is slower behind the structure", "because it is faster behind the structure"},
	} {
		if f.text(math.Abs(part.value)) != f.text(0) {
			reasons = append(reasons, fmt.Sprintf("%s %s %s", time(part.value), pick(part.value, "later", "earlier"), pick(part.value, part.slower, part.quick)))
		}
	}
	return join(text, reasons)
}

// structureWords are the words for a structure that delays and for one that
// hurries.
func structureWords(part string) [2]string {
	if part == "reflected" {
		return [2]string{"because it turns back only within the structure", "because it turns back before the structure's face would send it"}
	}
	return [2]string{"because the structure takes longer to cross than empty space", "because the structure takes less time to cross than empty space"}
}

func pick(v float64, positive, negative string) string {
	if v < 0 {
		return negative
	}
	return positive
}

// join makes the sentence.
func join(text string, reasons []string) string {
	for i, r := range reasons {
		switch {
		case i == 0:
			text += ": " + r
		case i == len(reasons)-1:
			text += ", and " + r
		default:
			text += ", " + r
		}
	}
	return text + "."
}
