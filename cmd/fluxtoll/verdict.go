package main

import (
	"fmt"
	"strconv"

	"fluxtoll/scenarios"
)

// verdictText is the verdict with its reason.
func verdictText(r *scenarios.Result) string {
	return fmt.Sprintf("%s: %s (%.3f s)", r.Verdict, reason(r), r.Seconds)
}

func reason(r *scenarios.Result) string {
	switch r.Verdict {
	case scenarios.Agrees:
		return fmt.Sprintf("every difference is within its budget, and every budget within the tolerance %s", short(r.Tolerance))
	case scenarios.Disagrees:
		return disagreement(r)
	case scenarios.Incomplete:
		return "the packet column and the ledger stand as they were then"
	}
	return excess(r)
}

// disagreement names the quantity that exceeds its budget most.
func disagreement(r *scenarios.Result) string {
	worst, most := "", 0.0
	for _, q := range r.Quantities {
		if ratio := *q.Difference / *q.Budget; differs(q) && !(max(ratio, -ratio) <= most) {
			worst, most = q.Name, max(ratio, -ratio)
		}
	}
	return fmt.Sprintf("%s differs by %s times its budget", worst, ratioText(most))
}

// excess says what kept the budget above the tolerance.
func excess(r *scenarios.Result) string {
	if r.Budget == nil {
		return "the packet road was not taken"
	}
	worst, most := "", 0.0
	for _, q := range r.Quantities {
		if q.Budget != nil && !(*q.Budget <= q.Allowed) && !(*q.Budget <= q.Allowed*most) {
			worst, most = q.Name, *q.Budget/q.Allowed
		}
	}
	if worst == "" {
		return "the averages were not accurate enough"
	}
	return fmt.Sprintf("the budget of %s is %s times what the tolerance %s allows; the run ended by %s",
		worst, ratioText(most), short(r.Tolerance), ending(r.Ended))
}

// ratioText writes a ratio with three digits, so that 1.03 is more than 1.
func ratioText(v float64) string { return plainExponent(strconv.FormatFloat(v, 'g', 3, 64)) }

// ending words why the packet road ended.
func ending(ended string) string {
	if ended == "settled" {
		return "settling"
	}
	return "its " + ended
}
