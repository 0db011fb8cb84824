package main

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"fluxtoll/scenarios"
)

// trustReport is the answer for a person to read, in 80 columns.
func trustReport(t *scenarios.Trust) string {
	var b strings.Builder
	if t.Title != "" {
		b.WriteString(t.Title + "\n\n")
	}
	asked := trustAsked(t)
	for _, q := range asked {
		b.WriteString(paragraph("answer", trustSentence(t, q)))
	}
	b.WriteString("\n" + deviationTable(t).String())
	b.WriteString("\n" + lengthTable(t).String())
	for _, q := range asked {
		if rows := trustRuns(t, q); len(rows) > 1 {
			b.WriteString("\n" + q.Name + "\n" + rows.String())
		}
	}
	b.WriteString("\n" + paragraph("searched", searchedText(t)))
	for _, r := range t.Runs {
		if r.Refused != "" {
			b.WriteString(paragraph("note", fmt.Sprintf("the run at %s was refused: %s", numberWithUnit(r.Length, t.Units.Length), r.Refused)))
		}
	}
	for _, note := range t.Notes {
		b.WriteString(paragraph("note", note))
	}
	b.WriteString("\n" + paragraph("verdict", trustVerdictText(t)))
	return b.String()
}

// trustAsked are the quantities that the runs confirm.
func trustAsked(t *scenarios.Trust) []scenarios.Trusted {
	var out []scenarios.Trusted
	for _, name := range t.Of {
		for _, q := range t.Quantities {
			if q.Name == name {
				out = append(out, q)
			}
		}
	}
	return out
}

// trustSentence is the answer for one quantity.
func trustSentence(t *scenarios.Trust, q scenarios.Trusted) string {
	return fmt.Sprintf("%s: the plane-wave number %s is %s for this packet; %s.",
		q.Name, numberWithUnit(q.PlaneWave, q.Unit), offText(q), reachText(t, q))
}

// offText says how far and to which side the plane-wave number is off.
func offText(q scenarios.Trusted) string {
	side := "too low"
	if q.Off < 0 {
		side = "too high"
	}
	size := max(q.Off, -q.Off)
	by := strings.TrimPrefix(percentText(size), "+")
	switch {
	case size <= q.OffError:
		return "right"
	case q.PercentOf == scenarios.OfPlaneWave:
		return fmt.Sprintf("%s by %s of itself", side, by)
	case q.PercentOf == scenarios.OfPacket:
		return fmt.Sprintf("%s by %s of the whole", side, by)
	}
	return fmt.Sprintf("%s by %s of the time it takes to pass", side, by)
}

// reachText says where the number holds.
func reachText(t *scenarios.Trust, q scenarios.Trusted) string {
	u, within := t.Units, short(t.Within)+" %"
	switch q.Reached {
	case scenarios.ReachedFrom:
		return fmt.Sprintf("it is within %s from a length of %s on (a spread of %s or less), %s times the length given",
			within, numberWithUnit(*q.Length, u.Length), numberWithUnit(*q.Spread, u.Energy), digits4(*q.Times))
	case scenarios.ReachedEverywhere:
		return fmt.Sprintf("it is within %s at every length searched, from %s on",
			within, numberWithUnit(t.Searched.From, u.Length))
	case scenarios.ReachedNowhere:
		return fmt.Sprintf("it is not within %s at any length up to %s, %s times the length given, where it is still off by %s",
			within, numberWithUnit(t.Searched.To, u.Length), short(t.Searched.To/t.Length), offOrNone(q.OffLongest))
	}
	return "from which length on it holds was not found before the interruption"
}

// digits4 writes four digits, and those before the point.
func digits4(v float64) string {
	if v == 0 {
		return "0"
	}
	size := max(v, -v)
	return known(v, 1e-3*math.Pow(10, float64(exponentOf(size))), 15)
}

func numberWithUnit(v float64, unit string) string {
	if unit == "" {
		return digits4(v)
	}
	return digits4(v) + " " + unit
}

// deviationTable shows both numbers and the deviation.
func deviationTable(t *scenarios.Trust) table {
	rows := table{{timesIn(t.Units.Time), "plane wave", "average", "error", "off by", ""}}
	for _, q := range t.Quantities {
		digits := 1e-6 // as many as that asks for are enough to compare
		if q.PercentOf != scenarios.OfPlaneWave {
			digits = 1e-4
		}
		rows = append(rows, []string{
			q.Name, cell(&q.PlaneWave, digits*magnitude(&q.PlaneWave), 10),
			cell(&q.Average, max(q.AverageError, digits*magnitude(&q.Average)), 10), brief(q.AverageError),
			percentText(q.Off), standingText(q),
		})
	}
	return rows
}

// standingText says how a deviation stands, and what its percentage is of
// where it is not of the plane-wave number.
func standingText(q scenarios.Trusted) string {
	if q.PercentOf == scenarios.OfPlaneWave {
		return string(q.Standing)
	}
	return fmt.Sprintf("%s, %s", q.Standing, q.PercentOf)
}

// percentText writes a signed deviation.
func percentText(v float64) string {
	if v == 0 {
		return "0 %"
	}
	text := brief(v)
	if size := max(v, -v); size >= 10 && size < 1e4 {
		text = strconv.FormatFloat(v, 'f', 1, 64)
	}
	return plus(v) + text + " %"
}

func plus(v float64) string {
	if v > 0 {
		return "+"
	}
	return ""
}

// lengthTable shows from where on the numbers hold.
func lengthTable(t *scenarios.Trust) table {
	rows := table{{
		"within " + short(t.Within) + " %", inUnit("from length", t.Units.Length), "error",
		inUnit("up to spread", t.Units.Energy), "times given", "",
	}}
	for _, q := range t.Quantities {
		if q.Reached != scenarios.ReachedFrom {
			rows = append(rows, []string{q.Name, string(q.Reached), "-", "-", "-", ""})
			continue
		}
		e := max(first(q.LengthError), 1e-6**q.Length)
		rows = append(rows, []string{
			q.Name, known(*q.Length, e, 8), errorText(q.LengthError), digits4(*q.Spread), digits4(*q.Times), "",
		})
	}
	return rows
}

func errorText(v *float64) string {
	if v == nil {
		return "-"
	}
	return brief(*v)
}

// inUnit heads a column with its unit.
func inUnit(what, unit string) string {
	if unit == "" {
		return what
	}
	return what + ", " + unit
}

// trustRuns shows the packet runs for a quantity.
func trustRuns(t *scenarios.Trust, q scenarios.Trusted) table {
	rows := table{{"packet runs", inUnit("length", t.Units.Length), "average", "packet", "budget", "off by", "found"}}
	for _, r := range t.Runs {
		if r.Name != q.Name {
			continue
		}
		rows = append(rows, []string{
			r.At, digits4(r.Length), cell(r.Average, max(first(r.Budget), 1e-6*magnitude(r.Average)), 10),
			cell(r.Packet, max(first(r.Budget), 1e-6*magnitude(r.Average)), 10), errorText(r.Budget), offOrNone(r.OffPacket), foundText(r),
		})
	}
	return rows
}

// offOrNone is a deviation that may be missing.
func offOrNone(v *float64) string {
	if v == nil {
		return "-"
	}
	return percentText(*v)
}

// foundText is what the packet says, and the run's own verdict where that is
// not agreement.
func foundText(r scenarios.TrustRun) string {
	switch {
	case r.Refused != "":
		return "refused"
	case r.Found == "":
		return string(r.Verdict)
	case r.Verdict == scenarios.Disagrees:
		return fmt.Sprintf("%s, %s", r.Found, r.Verdict)
	case r.Found != r.Expected:
		return fmt.Sprintf("%s, not %s", r.Found, r.Expected)
	}
	return string(r.Found)
}

func searchedText(t *scenarios.Trust) string {
	return fmt.Sprintf("lengths from %s to %s, %d averages; this packet's is %s (spread %s)",
		numberWithUnit(t.Searched.From, t.Units.Length), numberWithUnit(t.Searched.To, t.Units.Length), t.Searched.Averages,
		numberWithUnit(t.Length, t.Units.Length), numberWithUnit(t.Spread, t.Units.Energy))
}

// trustVerdictText is the outcome with its reason.
func trustVerdictText(t *scenarios.Trust) string {
	reason := map[scenarios.TrustVerdict]string{
		scenarios.Confirmed:    "every packet run agrees with its average and stands to the percentage as expected",
		scenarios.Contradicted: "a packet run does not agree with the averages",
		scenarios.Unconfirmed:  "a packet run was refused, or its budget is too large to tell",
		scenarios.Unreached:    "no length searched brings the plane-wave number within " + short(t.Within) + " %",
		scenarios.Unfinished:   "what was found until then stands above",
	}[t.Verdict]
	return fmt.Sprintf("%s: %s (%.3f s)", t.Verdict, reason, t.Seconds)
}
