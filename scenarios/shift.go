package scenarios

import "fluxtoll/potential/stationary"

// Shift is by how much the mean arrival of a part differs from free flight,
// later where positive, and why. Of what is transmitted, with X the whole way
// from start to far plane, b the width of the structure, d the way from its
// far face to the plane, tau the group delay and <.>_T means over what is
// transmitted,
//
//	Structure = <tau>_T - b <1/v_in>_T
//	Exit      = arrival - <tau>_T - (X-b) <1/v_in>_T
//	Filter    = X (<1/v_in>_T - <1/v_in>),
//
// whose sum is arrival - X <1/v_in>. Exit is d (<1/v_out>_T - <1/v_in>_T), but
// for what components for which the far lead is closed take off the times at
// the plane. Of what is reflected, free flight is that to a hard wall at the near face and
// back: Structure = <tau>_R, Exit = 0, Filter = X (<1/v_in>_R - <1/v_in>).
// Display units; the errors are those of the averages.
type Shift struct {
	Part                    string // "transmitted" or "reflected"
	Total                   float64
	Structure, Exit, Filter float64
	Error                   float64 // of Total
	Free                    float64 // mean time of free flight
}

// shifts are those of the parts large enough to be timed.
func (t *Trial) shifts() []Shift {
	var out []Shift
	if t.Averages.Transmitted.Value > leastPart {
		out = append(out, t.shiftTransmitted())
	}
	if t.Averages.Reflected.Value > leastPart {
		out = append(out, t.shiftReflected())
	}
	return out
}

func (t *Trial) shiftTransmitted() Shift {
	a, p := t.Averages, t.Plan
	in, way := a.SlownessInTransmitted, p.start+p.width+p.far
	arrival, _ := t.averageArrivals()
	return t.newShift("transmitted", arrival, way, Shift{
		Structure: a.GroupDelayTransmitted.Value - p.width*in.Value,
		Exit:      arrival.Value - a.GroupDelayTransmitted.Value - (p.start+p.far)*in.Value,
		Filter:    way * (in.Value - a.SlownessFree.Value),
	})
}

func (t *Trial) shiftReflected() Shift {
	a, p := t.Averages, t.Plan
	way := p.start + p.near
	_, arrival := t.averageArrivals()
	return t.newShift("reflected", arrival, way, Shift{
		Structure: a.GroupDelayReflected.Value,
		Filter:    way * (a.SlownessInReflected.Value - a.SlownessFree.Value),
	})
}

// newShift completes a shift and brings it to display units.
func (t *Trial) newShift(part string, arrival stationary.Mean, way float64, s Shift) Shift {
	unit, free := t.Scenario.Scale.Time, t.Averages.SlownessFree
	return Shift{
		Part: part, Total: (arrival.Value - way*free.Value) * unit,
		Structure: s.Structure * unit, Exit: s.Exit * unit, Filter: s.Filter * unit,
		Error: (arrival.Error + way*free.Error) * unit, Free: way * free.Value * unit,
	}
}
