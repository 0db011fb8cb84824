package main

import (
	"fmt"

	"fluxtoll/scenarios"
)

// tailText says what of the packet road's numbers came from resonances after the
// last step.
func tailText(r *scenarios.Result) string {
	t := r.Tail
	if t == nil {
		return ""
	}
	who := "the one resonance left sends"
	if t.Poles != 1 {
		who = fmt.Sprintf("the %d resonances left send", t.Poles)
	}
	s := fmt.Sprintf("after the last step %s reflected %s, transmitted %s", who, brief(t.Reflected), brief(t.Transmitted))
	if t.Lost != 0 {
		s += ", lost " + brief(t.Lost)
	}
	longest := 0.0
	for _, l := range t.States {
		longest = max(longest, l.Lifetime)
	}
	return s + fmt.Sprintf("; longest lifetime %s, error %s", withUnit(longest, r.Units.Time), brief(t.Error))
}
