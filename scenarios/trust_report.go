package scenarios

import (
	"math"

	"fluxtoll/potential/stationary"
)

// Trusted is one plane-wave number: what it is, what this packet's average is
// instead, and where they come together.
type Trusted struct {
	Name         string    `json:"name"`
	Unit         string    `json:"unit"`
	PlaneWave    float64   `json:"plane_wave"`
	Average      float64   `json:"average"`
	AverageError float64   `json:"average_error"`
	Off          float64   `json:"off"` // average less plane wave, per cent
	OffError     float64   `json:"off_error"`
	PercentOf    PercentOf `json:"percent_of"`
	Standing     Standing  `json:"standing"`
	Reached      Reach     `json:"reached"`
	OffLongest   *float64  `json:"off_longest"` // at the longest length searched; nil if Reached is ReachedUnknown
	Length       *float64  `json:"length"`      // from which on it is within; nil unless Reached is ReachedFrom
	LengthError  *float64  `json:"length_error"`
	Spread       *float64  `json:"spread"` // the same as a spread
	Times        *float64  `json:"times"`  // the same in lengths of the packet as given
}

// Standing is how a deviation stands to the percentage.
type Standing string

// The standings.
const (
	StandsWithin  Standing = "within"
	StandsBeyond  Standing = "beyond"
	StandsAtLimit Standing = "at the limit" // by its error on either side
)

// standing compares a deviation with what is allowed.
func (t *trustSearch) standing(off stationary.Mean) Standing {
	size := math.Abs(off.Value)
	switch {
	case size+off.Error <= t.within:
		return StandsWithin
	case size-off.Error > t.within:
		return StandsBeyond
	}
	return StandsAtLimit
}

// scaleOf is the display unit of a number.
func (t *trustSearch) scaleOf(n planeWave) (unit string, scale float64) {
	if n.time {
		return t.scenario.Scale.TimeUnit, t.scenario.Scale.Time
	}
	return "", 1
}

// spread is hbar v0/(2 length) in display units, v0 = 1.
func (s *Scenario) spread(length float64) float64 { return s.Scale.Energy / (2 * length) }

// report puts the answers in display units.
func (t *trustSearch) report(answers []answer) *Trust {
	s := t.scenario
	scale := s.Scale
	out := &Trust{
		Format: trustLabel, Title: s.Title, Units: Units{scale.LengthUnit, scale.EnergyUnit, scale.TimeUnit},
		Tolerance: s.Tolerance, Within: 100 * t.within,
		Length: s.Packet.Length * scale.Length, Spread: s.spread(s.Packet.Length),
		Searched: Searched{math.Exp(t.lo) * scale.Length, math.Exp(t.hi) * scale.Length, len(t.known) + 1},
	}
	for i, n := range t.numbers {
		out.Quantities = append(out.Quantities, t.trusted(i, n, answers[i]))
	}
	return out
}

func (t *trustSearch) trusted(i int, n planeWave, a answer) Trusted {
	unit, scale := t.scaleOf(n)
	average, off := n.average(t.given), n.off(t.given)
	q := Trusted{
		Name: n.name, Unit: unit, PlaneWave: n.value * scale,
		Average: average.Value * scale, AverageError: average.Error * scale,
		Off: 100 * off.Value, OffError: 100 * off.Error, PercentOf: n.of,
		Standing: t.standing(off), Reached: a.reach,
	}
	if a.reach != ReachedUnknown {
		q.OffLongest = scaled(t.known[t.hi][i].Value, 100)
	}
	if a.reach == ReachedFrom {
		length, s := math.Exp(a.x), t.scenario
		q.Length, q.LengthError = scaled(length, s.Scale.Length), scaled(length*a.error, s.Scale.Length)
		q.Spread, q.Times = scaled(s.spread(length), 1), scaled(length/s.Packet.Length, 1)
	}
	return q
}

// remarks are what a reader of the numbers needs besides.
func (t *trustSearch) remarks() []string {
	var out []string
	s := t.scenario
	if s.Packet.Start != nil || s.Planes != (Planes{}) {
		out = append(out, "the runs choose start and planes for their own lengths; those of the scenario are left aside, and no number here depends on them")
	}
	if t.unsure {
		out = append(out, "some averages did not reach their accuracy; their errors are larger for it")
	}
	return out
}
