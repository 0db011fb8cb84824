package main

import (
	"fmt"

	"fluxtoll/scenarios"
)

// shiftText says by how much each part is late against free flight and why.
func shiftText(s *scenarios.Shifts, unit string) string {
	if s == nil {
		return ""
	}
	text := ""
	for _, p := range []*scenarios.ShiftRoads{s.Transmitted, s.Reflected} {
		if p != nil {
			text += paragraph("shift", shiftSentence(p, unit))
		}
	}
	return text
}

// shiftSentence is the reading and the numbers of the averages, with the
// packet's difference where it was measured.
func shiftSentence(p *scenarios.ShiftRoads, unit string) string {
	number := func(n scenarios.ShiftNumber) string {
		e := max(n.Error, 1e-5*max(n.Average, -n.Average), 1e-7*p.Free)
		return signed(known(n.Average, e, 7), n.Average)
	}
	text := fmt.Sprintf("%s (%s", p.Reading, number(p.Total))
	if unit != "" {
		text += " " + unit
	}
	text += fmt.Sprintf(": structure %s, filter %s", number(p.Structure), number(p.Filter))
	if e := p.ExitLead.Average; max(e, -e) > 1e-7*p.Free {
		text += ", exit lead " + number(p.ExitLead)
	}
	if p.Structure.Packet == nil {
		return text + ")"
	}
	off := 0.0
	agrees := true
	for _, n := range []scenarios.ShiftNumber{p.Total, p.Structure, p.Filter, p.ExitLead} {
		if n.Packet != nil {
			off = max(off, *n.Packet-n.Average, n.Average-*n.Packet)
		}
		agrees = agrees && n.Agrees
	}
	if !agrees {
		return text + "; the packet differs by " + brief(off) + ", more than its error)"
	}
	return text + "; the packet agrees to " + brief(off) + ")"
}

// signed puts a plus before a positive number.
func signed(text string, v float64) string {
	if v > 0 {
		return "+" + text
	}
	return text
}
