package main

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"fluxtoll/scenarios"
)

// curveColumn is one column of the table: a value and what bounds its error.
type curveColumn struct {
	head, unit    string
	values, error scenarios.Series
}

// curveColumns lists the columns in order, without the energies.
func curveColumns(c *scenarios.Curve) []curveColumn {
	p, t, unit := c.ProbabilityError, c.TimeError, c.Units.Time
	list := []curveColumn{
		{"transmission", "", c.Transmission, p},
		{"reflection", "", c.Reflection, p},
		{"loss", "", c.Loss, p},
		{"group_delay_transmitted", unit, c.GroupDelayTransmitted, t},
		{"group_delay_reflected", unit, c.GroupDelayReflected, t},
		{"dwell", unit, c.Dwell, t},
	}
	for i, layer := range c.LayerDwell {
		list = append(list, curveColumn{fmt.Sprintf("layer[%d].dwell", i), unit, layer, t})
	}
	return list
}

// curveReport is the curve as a table for a person.
func curveReport(c *scenarios.Curve) string {
	var b strings.Builder
	if c.Title != "" {
		b.WriteString(c.Title + "\n\n")
	}
	if c.Units.Energy != "" {
		fmt.Fprintf(&b, "energies in %s, times in %s\n", c.Units.Energy, c.Units.Time)
	}
	b.WriteString(curveTable(c))
	b.WriteString("\n" + paragraph("energies", curveNote(c)))
	return b.String()
}

// shortHeads are the names of columns where room is scarce.
func shortHeads() map[string]string {
	return map[string]string{
		"transmission": "T", "reflection": "R",
		"group_delay_transmitted": "delay T", "group_delay_reflected": "delay R",
	}
}

// curveTable has a row for each energy; loss is left out where there is none.
func curveTable(c *scenarios.Curve) string {
	columns := curveColumns(c)
	head := []string{"energy"}
	var kept []curveColumn
	for _, col := range columns {
		if col.head == "loss" && !anyAbove(col.values, 0) {
			continue
		}
		name := col.head
		if s := shortHeads()[name]; s != "" {
			name = s
		}
		kept, head = append(kept, col), append(head, strings.TrimSuffix(name, ".dwell"))
	}
	t := table{append(head, "")}
	decimals := energyDecimals(c.Energy)
	for i, e := range c.Energy {
		row := []string{strconv.FormatFloat(e, 'f', decimals, 64)}
		for _, col := range kept {
			row = append(row, curveCell(col.values[i], col.error[i]))
		}
		t = append(t, append(row, ""))
	}
	return t.String()
}

func anyAbove(s scenarios.Series, v float64) bool {
	for _, x := range s {
		if x > v {
			return true
		}
	}
	return false
}

// curveCell is a value with the digits that its error supports, at most seven.
func curveCell(v, e float64) string {
	if math.IsNaN(v) {
		return "-"
	}
	const room = 11
	return cell(&v, math.Max(e, 1e-7*math.Abs(v)), room)
}

// energyDecimals is how many decimals tell neighbouring energies apart, as far
// as double precision goes.
func energyDecimals(energies scenarios.Series) int {
	gap, size := math.Inf(1), 0.0
	for i, e := range energies {
		size = math.Max(size, math.Abs(e))
		if i > 0 {
			gap = math.Min(gap, e-energies[i-1])
		}
	}
	gap = math.Max(gap, 1e-14*size)
	return min(max(0, 1-exponentOf(gap)), 20)
}

// curveNote says how the energies were chosen.
func curveNote(c *scenarios.Curve) string {
	n := len(c.Energy)
	text := fmt.Sprintf("%d evenly spaced", n)
	if c.Fineness != nil {
		text = fmt.Sprintf("%d, so that straight lines between them miss T and R by %s at most and times by %s of them",
			n, short(c.Fineness.Probability), short(c.Fineness.Time))
	}
	if !c.Complete {
		text = fmt.Sprintf("%d, the limit", n)
	}
	if c.Unresolved > 0 {
		text += fmt.Sprintf("; %d resonances are too narrow to be seen in double precision, 'fluxtoll resonances' lists them", c.Unresolved)
	}
	return text
}

// curveCSV is the curve with all digits; what has no meaning is empty.
func curveCSV(c *scenarios.Curve) []byte {
	columns := append([]curveColumn{{"energy", c.Units.Energy, c.Energy, nil}}, curveColumns(c)...)
	columns = append(columns, curveColumn{"probability_error", "", c.ProbabilityError, nil}, curveColumn{"time_error", c.Units.Time, c.TimeError, nil})
	var out []byte
	for i, col := range columns {
		out = append(out, separator(i)...)
		out = append(out, col.head...)
		if col.unit != "" {
			out = append(out, " ["+col.unit+"]"...)
		}
	}
	for row := range c.Energy {
		out = append(out, '\n')
		for i, col := range columns {
			out = append(out, separator(i)...)
			if v := col.values[row]; !math.IsNaN(v) {
				out = strconv.AppendFloat(out, v, 'g', -1, 64)
			}
		}
	}
	return append(out, '\n')
}

func separator(i int) string {
	if i == 0 {
		return ""
	}
	return ","
}
