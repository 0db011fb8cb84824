package published

import (
	"math"
	"slices"

	"fluxtoll/scenarios"
)

// Case is one scattering problem with a source.
type Case struct {
	Name       string
	Source     string // of the formula
	FromMemory bool
	Scenario   string // a scenario file
	Checks     []Check
}

// Road is the column of a result.
type Road string

// The roads. PlaneWave is the stationary road at one energy. Resonances and
// bound states are found on the stationary road and again on the elements of
// the packet road.
const (
	PlaneWave Road = "plane wave"
	Average   Road = "average"
	Packet    Road = "packet"
	States    Road = "stationary"
	Elements  Road = "elements"
)

// Check is one number that a case expects on some roads. Quantity is one of a
// result's, or phase_delay_transmitted or phase_delay_reflected: the group
// delay less the flight at the leads' speeds from the faces to the middle of
// the structure.
type Check struct {
	Quantity string
	Expected float64
	Roads    []Road
}

const (
	phaseDelayTransmitted = "phase_delay_transmitted"
	phaseDelayReflected   = "phase_delay_reflected"
)

// Cases lists all cases.
func Cases() []Case {
	return slices.Concat(steps(), barriers(), points(), smooth(), ramps(), stacks(), packets(), states())
}

// isProbability tells probabilities from times.
func (c Check) isProbability() bool {
	return slices.Contains([]string{"transmitted", "reflected", "lost"}, c.Quantity)
}

// allowed is how far a number may be from the expected one. Where the packet
// road measures, it is what the tolerance of the run allows (m is its
// measure); the stationary road promises 1e-10 on probabilities and 1e-8
// relative on times.
func (c Check) allowed(road Road, m *scenarios.Measure) float64 {
	switch {
	case road == Packet && m != nil:
		return m.Allowed
	case road == Packet:
		return 0
	case c.isProbability():
		return 1e-10
	case c.isOfState():
		// Rounding of the heights, and of the constants behind the units.
		return 1e-10 * math.Abs(c.Expected)
	}
	return 1e-8 * math.Max(1, math.Abs(c.Expected))
}
