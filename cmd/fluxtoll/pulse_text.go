package main

import (
	"fmt"
	"strings"

	"fluxtoll/scenarios"
)

// pulseReport is what `pulse` says to a person, in 80 columns.
func pulseReport(r *scenarios.PulseReport) string {
	var b strings.Builder
	if r.Title != "" {
		b.WriteString(r.Title + "\n\n")
	}
	for _, p := range r.Pulses {
		b.WriteString(pulseTable(p, r.Units) + "\n")
	}
	for _, p := range r.Pulses {
		if len(p.Parts) > 1 {
			b.WriteString(partsTable(p, r.Units) + "\n")
		}
	}
	if r.OneShot != nil {
		b.WriteString(shotTable(r.OneShot, r.Units) + "\n" + worstTable(r.OneShot, r.Units) + "\n")
	}
	if s := shiftText(r.Shift, r.Units.Time); s != "" {
		b.WriteString(s)
	}
	if r.Trapped != nil {
		b.WriteString(paragraph("trapped", trappedText(r.Trapped, r.Units)))
	}
	if p := r.Planes; p != nil {
		at := func(x float64) string { return withUnit(x, r.Units.Length) }
		b.WriteString(paragraph("planes", fmt.Sprintf("near %s, start %s, far %s", at(p.Near), at(p.Start), at(p.Far))))
	}
	for _, note := range r.Notes {
		b.WriteString(paragraph("note", note))
	}
	b.WriteString("\n" + paragraph("verdict", pulseVerdict(r)))
	return b.String()
}

// pulseVerdict is the verdict with its reason.
func pulseVerdict(r *scenarios.PulseReport) string {
	reason := "the run itself says why ('fluxtoll run')"
	switch r.Verdict {
	case scenarios.Agrees:
		reason = "both roads agree within the errors, on the run and at every energy shown"
	case scenarios.Disagrees:
		reason = "a number differs by more than its error"
	case scenarios.Incomplete:
		reason = "what had passed by then"
	}
	return fmt.Sprintf("%s: %s (%.3f s)", r.Verdict, reason, r.Seconds)
}

// pulseTable lists the numbers of a pulse with their errors.
func pulseTable(p scenarios.Pulse, u scenarios.Units) string {
	t := table{{p.Part + " at " + withUnit(p.Plane, u.Length), "average", "packet", "error", "unit"}}
	for _, q := range p.Quantities {
		e := first(q.Error)
		unit := q.Unit
		if !q.Agrees {
			unit += " NO"
		}
		t = append(t, []string{q.Name, cell(q.Average, e, 15), cell(q.Packet, e, 15), brief(e), unit})
	}
	return t.String()
}

// partsTable lists the parts of a split pulse.
func partsTable(p scenarios.Pulse, u scenarios.Units) string {
	t := table{{p.Part, "probability", "mean time", "width", "peak at", "height", "from", "to", ""}}
	for i, q := range p.Parts {
		t = append(t, []string{
			fmt.Sprintf("part %d", i+1),
			known(q.Probability, q.ProbabilityError, 6), known(q.Time, q.TimeError, 7), known(q.Width, q.WidthError, 5),
			known(q.Peak, q.PeakError, 7), known(q.Height, q.HeightError, 5), short(q.From), short(q.To), "",
		})
	}
	text := t.String()
	if p.LeftOut > 0 {
		text += fmt.Sprintf("and %d more\n", p.LeftOut)
	}
	return text
}

// shotRows is about how many energies the text shows of those that there are.
const shotRows = 13

// shotTable shows some of the energies.
func shotTable(o *scenarios.OneShot, u scenarios.Units) string {
	head := "energy"
	if u.Energy != "" {
		head += " in " + u.Energy
	}
	t := table{{head, "share", "T", "off by", "R", "off by", timesShort(u.Time), "off by", ""}}
	through, back, delay := curve(o, "transmission"), curve(o, "reflection"), curve(o, "group_delay_transmitted")
	for i := range thinned(len(o.Energy), shotRows) {
		row := []string{short(o.Energy[i]), brief(o.Weight[i])}
		for _, c := range []*scenarios.ShotCurve{through, back, delay} {
			e := first(c.Error[i])
			row = append(row, cell(c.Packet[i], e, 10), offBy(c, i))
		}
		t = append(t, append(row, ""))
	}
	return t.String()
}

// offBy is the packet less the stationary road, where there is a point.
func offBy(c *scenarios.ShotCurve, i int) string {
	if c.Packet[i] == nil {
		return "-"
	}
	return brief(*c.Packet[i] - *c.Stationary[i])
}

func timesShort(unit string) string {
	if unit == "" {
		return "delay T"
	}
	return "delay T/" + unit
}

// thinned yields about so many of n numbers, evenly spread, ends included.
func thinned(n, rows int) func(yield func(int) bool) {
	return func(yield func(int) bool) {
		rows = min(rows, n)
		for i := range rows {
			if !yield(i * (n - 1) / max(1, rows-1)) {
				return
			}
		}
	}
}

// curve is the one of a name.
func curve(o *scenarios.OneShot, name string) *scenarios.ShotCurve {
	for i := range o.Curves {
		if o.Curves[i].Name == name {
			return &o.Curves[i]
		}
	}
	panic("fluxtoll: no curve " + name)
}

// worstTable says how far the packet's curves are off at most.
func worstTable(o *scenarios.OneShot, u scenarios.Units) string {
	t := table{{fmt.Sprintf("%d energies, worst", len(o.Energy)), "off by", "error", "at", "weighted", "error", "at", ""}}
	for _, c := range o.Curves {
		if c.Worst.Energy == 0 {
			continue
		}
		mark := "ok"
		if !c.Agrees {
			mark = "NO"
		}
		name := c.Name
		if c.Unit != "" {
			name += "/" + c.Unit
		}
		t = append(t, []string{
			name, brief(c.Worst.Size), brief(c.Worst.Error), short(c.Worst.Energy),
			brief(c.WorstWeight.Size), brief(c.WorstWeight.Error), short(c.WorstWeight.Energy), mark,
		})
	}
	return t.String()
}

// mostResonances bounds the resonances that the text names.
const mostResonances = 4

func trappedText(t *scenarios.Trapped, u scenarios.Units) string {
	text := fmt.Sprintf("%s (error %s)", brief(t.Probability), brief(t.Error))
	if t.Lifetime != nil {
		text += ", last falling by a factor e in " + withUnit(*t.Lifetime, u.Time)
	}
	for i, r := range t.Resonances {
		if i == mostResonances {
			return text + fmt.Sprintf("; and %d resonances more", len(t.Resonances)-i)
		}
		text += fmt.Sprintf("; resonance at %s, lifetime %s", withUnit(r.Energy, u.Energy), withUnit(r.Lifetime, u.Time))
	}
	return text
}
