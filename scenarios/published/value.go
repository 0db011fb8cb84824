package published

import "fluxtoll/scenarios"

// measure is the packet road's measure from which a quantity is read, nil
// where it was not taken.
func (a *answers) measure(quantity string) *scenarios.Measure {
	switch quantity {
	case phaseDelayTransmitted:
		quantity = "group_delay_transmitted"
	case phaseDelayReflected:
		quantity = "group_delay_reflected"
	}
	if a.result == nil {
		return nil
	}
	for i := range a.result.Quantities {
		if m := &a.result.Quantities[i]; m.Name == quantity {
			return m
		}
	}
	return nil
}

// value is a quantity on a road, in display units; false where there is none.
func (a *answers) value(quantity string, road Road) (float64, bool) {
	switch road {
	case PlaneWave:
		return a.planeWave(quantity)
	case Average:
		return a.average(quantity)
	case States, Elements:
		return a.state(quantity, road)
	}
	m := a.measure(quantity)
	if m == nil || m.Packet == nil {
		return 0, false
	}
	return *m.Packet - a.toMiddle(quantity), true
}

func (a *answers) planeWave(quantity string) (float64, bool) {
	w, time := &a.plane, a.scenario.Scale.Time
	width := a.scenario.Structure.Width()
	switch quantity {
	case "transmitted":
		return w.Transmission, true
	case "reflected":
		return w.Reflection, true
	case "lost":
		return w.Absorption, true
	case "group_delay_transmitted":
		return w.GroupDelayTransmitted * time, true
	case "group_delay_reflected":
		return w.GroupDelayReflected * time, true
	case phaseDelayTransmitted:
		return (w.GroupDelayTransmitted - width/2*(1/w.SpeedIn+1/w.SpeedOut)) * time, true
	case phaseDelayReflected:
		return (w.GroupDelayReflected - width/w.SpeedIn) * time, true
	case "dwell":
		return w.Dwell * time, true
	}
	return 0, false
}

func (a *answers) average(quantity string) (float64, bool) {
	v, time := a.trial.Averages, a.scenario.Scale.Time
	switch quantity {
	case "transmitted":
		return v.Transmitted.Value, true
	case "reflected":
		return v.Reflected.Value, true
	case "lost":
		return v.Lost.Value, true
	case "group_delay_transmitted", phaseDelayTransmitted:
		return v.GroupDelayTransmitted.Value*time - a.toMiddle(quantity), true
	case "group_delay_reflected", phaseDelayReflected:
		return v.GroupDelayReflected.Value*time - a.toMiddle(quantity), true
	case "dwell":
		return v.Dwell.Value * time, true
	}
	if m := a.measure(quantity); m != nil && m.Average != nil {
		return *m.Average, true // an arrival: only a result places the planes
	}
	return 0, false
}

// toMiddle is the mean flight, at the leads' speeds, from the faces to the
// middle of the structure that a phase delay leaves out.
func (a *answers) toMiddle(quantity string) float64 {
	v, half := a.trial.Averages, a.scenario.Structure.Width()/2*a.scenario.Scale.Time
	switch quantity {
	case phaseDelayTransmitted:
		return half * (v.SlownessInTransmitted.Value + v.SlownessOutTransmitted.Value)
	case phaseDelayReflected:
		return 2 * half * v.SlownessInReflected.Value
	}
	return 0
}
