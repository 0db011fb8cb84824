package scenarios

import (
	"math"

	"fluxtoll/potential/stationary"
)

// planeWave is one plane-wave number and the average that it stands for.
type planeWave struct {
	name    string
	value   float64
	unit    float64 // what the percentages are of
	of      PercentOf
	time    bool
	average func(*stationary.Averages) stationary.Mean
}

// PercentOf says what a percentage is of.
type PercentOf string

// What percentages are of: the plane-wave number, or where that is zero the
// whole packet (for a probability) and the time length/v0 that the packet as
// given takes to pass a point (for a time).
const (
	OfPlaneWave PercentOf = "plane wave"
	OfPacket    PercentOf = "packet"
	OfPassage   PercentOf = "passage"
)

// off is the deviation of an average from the plane-wave number, as a
// fraction.
func (n planeWave) off(a *stationary.Averages) stationary.Mean {
	m := n.average(a)
	return stationary.Mean{Value: (m.Value - n.value) / n.unit, Error: m.Error / n.unit}
}

// planeWaves lists the plane-wave numbers that have a meaning.
func planeWaves(s *Scenario, p stationary.Amplitudes) []planeWave {
	list := []planeWave{
		{name: "reflected", value: p.Reflection, average: func(a *stationary.Averages) stationary.Mean { return a.Reflected }},
		{name: "transmitted", value: p.Transmission, average: func(a *stationary.Averages) stationary.Mean { return a.Transmitted }},
	}
	add := func(there, time bool, name string, value float64, average func(*stationary.Averages) stationary.Mean) {
		if there {
			list = append(list, planeWave{name: name, value: value, time: time, average: average})
		}
	}
	add(s.Structure.Lossy(), false, "lost", p.Absorption, func(a *stationary.Averages) stationary.Mean { return a.Lost })
	add(p.Transmission > leastPart, true, "group_delay_transmitted", p.GroupDelayTransmitted,
		func(a *stationary.Averages) stationary.Mean { return a.GroupDelayTransmitted })
	add(p.Reflection > leastPart, true, "group_delay_reflected", p.GroupDelayReflected,
		func(a *stationary.Averages) stationary.Mean { return a.GroupDelayReflected })
	add(s.Structure.Width() > 0, true, "dwell", p.Dwell, func(a *stationary.Averages) stationary.Mean { return a.Dwell })
	for i := range list {
		list[i].setUnit(s.Packet.Length)
	}
	return list
}

// setUnit decides what the percentages are of. passage is length/v0, v0 = 1.
func (n *planeWave) setUnit(passage float64) {
	n.unit, n.of = math.Abs(n.value), OfPlaneWave
	switch {
	case n.time && n.unit <= leastTimeTolerance*passage:
		n.unit, n.of = passage, OfPassage
	case !n.time && n.unit <= leastSmall:
		n.unit, n.of = 1, OfPacket
	}
}
