package main

import (
	"fmt"
	"strings"

	"fluxtoll/scenarios"
)

// report is the result for a person to read, in 80 columns.
func report(r *scenarios.Result) string {
	var b strings.Builder
	if r.Title != "" {
		b.WriteString(r.Title + "\n\n")
	}
	b.WriteString(quantityTable(r) + "\n")
	for _, p := range []struct{ label, text string }{
		{"ledger", ledgerText(r)},
		{"tail", tailText(r)},
		{"budget", budgetText(r.Budget)},
		{"planes", planesText(r)},
		{"numerics", numericsText(r)},
	} {
		if p.text != "" {
			b.WriteString(paragraph(p.label, p.text))
		}
	}
	b.WriteString(shiftText(r.Shift, r.Units.Time))
	for _, note := range r.Notes {
		b.WriteString(paragraph("note", note))
	}
	b.WriteString("\n" + paragraph("verdict", verdictText(r)))
	return b.String()
}

// quantityTable lists the quantities in the three columns; digits are left out
// where 80 columns do not hold them.
func quantityTable(r *scenarios.Result) string {
	const columns, narrowest = 80, 10
	for room := 17; ; room-- {
		t := table{{timesIn(r.Units.Time), "plane wave", "average", "packet", "off by", "budget", ""}}
		for _, q := range r.Quantities {
			t = append(t, quantityRow(q, room))
		}
		if room == narrowest || t.width() <= columns {
			return t.String()
		}
	}
}

// timesIn heads the column of names with the unit of the times.
func timesIn(unit string) string {
	if unit == "" {
		return ""
	}
	return "times in " + unit
}

// quantityRow shows the packet's value with the digits that its budget
// supports, and those of the stationary road with as many, or with five where
// the budget is larger than that. The plane wave, which is there to be
// compared, is kept short.
func quantityRow(q scenarios.Measure, room int) []string {
	budget := first(q.Budget, q.AverageError)
	stationary := min(budget, 1e-5*magnitude(q.Average))
	row := []string{
		q.Name, cell(q.PlaneWave, stationary, 10), cell(q.Average, max(stationary, first(q.AverageError)), room),
		cell(q.Packet, budget, room), "-", "-", "",
	}
	if q.Difference != nil && q.Budget != nil {
		row[4], row[5], row[6] = brief(*q.Difference), brief(*q.Budget), mark(q)
	}
	return row
}

// magnitude is the size of a value that may be missing.
func magnitude(v *float64) float64 { return max(first(v), -first(v)) }

// first is the first value that is there, or 0.
func first(values ...*float64) float64 {
	for _, v := range values {
		if v != nil {
			return *v
		}
	}
	return 0
}

// cell is a value in at most so many characters, if six digits fit in them.
func cell(v *float64, e float64, room int) string {
	if v == nil {
		return "-"
	}
	for digits := 15; ; digits-- {
		if text := known(*v, e, digits); digits == 6 || len(text) <= room {
			return text
		}
	}
}

// mark says whether the roads agree on a quantity.
func mark(q scenarios.Measure) string {
	if q.Agrees {
		return "ok"
	}
	if differs(q) {
		return "NO"
	}
	return "wide"
}

// differs reports whether the difference exceeds the budget.
func differs(q scenarios.Measure) bool {
	return q.Difference != nil && q.Budget != nil && !(max(*q.Difference, -*q.Difference) <= *q.Budget)
}

func ledgerText(r *scenarios.Result) string {
	if r.Ledger == nil {
		return ""
	}
	const digits = 1e-6 // at least: of what was counted itself, all are right
	l, e := r.Ledger, min(digits, probabilityBudget(r))
	return fmt.Sprintf("reflected %s + transmitted %s + lost %s + trapped %s = 1, to %s",
		known(l.Reflected, e, 15), known(l.Transmitted, e, 15), known(l.Lost, e, 15), brief(l.Trapped), brief(max(l.Closure, -l.Closure)))
}

// probabilityBudget is the largest budget of a probability.
func probabilityBudget(r *scenarios.Result) float64 {
	e := 0.0
	for _, q := range r.Quantities {
		if q.Unit == "" && (q.Name == "reflected" || q.Name == "transmitted" || q.Name == "lost") {
			e = max(e, first(q.Budget))
		}
	}
	return e
}

func budgetText(b *scenarios.Budget) string {
	if b == nil {
		return ""
	}
	return fmt.Sprintf("space %s, time %s, edges %s, packet %s, tail %s, average %s, rounding %s",
		brief(b.Space), brief(b.Time), brief(b.Edges), brief(b.Packet), brief(b.Tail), brief(b.Average), brief(b.Rounding))
}

func planesText(r *scenarios.Result) string {
	if r.Planes == nil {
		return ""
	}
	at := func(x float64) string { return withUnit(x, r.Units.Length) }
	text := fmt.Sprintf("near %s, start %s, far %s", at(r.Planes.Near), at(r.Planes.Start), at(r.Planes.Far))
	if r.Planes.Width > 0 {
		text += "; structure from 0 to " + at(r.Planes.Width)
	}
	return text
}

func numericsText(r *scenarios.Result) string {
	if r.Numerics == nil {
		return ""
	}
	n, u := r.Numerics, r.Units
	return fmt.Sprintf("%d nodes in %d elements of order %d, %s to %s, edges of %d and %d elements;"+
		" Pade member %d, %d steps of %s to %s; energies %s to %s resolved, %d on the stationary road",
		n.Nodes, n.Elements, n.Order, short(n.Shortest), withUnit(n.Longest, u.Length), n.EdgeNear, n.EdgeFar,
		n.Pade, n.Steps, withUnit(n.TimeStep, u.Time), withUnit(n.EndTime, u.Time),
		short(n.BandLow), withUnit(n.BandHigh, u.Energy), n.Evaluations)
}

// withUnit writes a setting with its unit.
func withUnit(v float64, unit string) string {
	if unit == "" {
		return short(v)
	}
	return short(v) + " " + unit
}
