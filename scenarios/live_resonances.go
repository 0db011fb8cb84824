package scenarios

import (
	"context"
	"math"

	"fluxtoll/potential/stationary"
)

// SeenResonance is a resonance that the packet can feel, in display units: a
// pole at Energy - i Width/2. Its lifetime is hbar over the width. The errors
// are what a wave from the other side, whose rounding is different, tells.
type SeenResonance struct {
	Energy, Width, Lifetime                float64
	EnergyError, WidthError, LifetimeError float64
}

// Resonances are looked for up to so many standard deviations from the mean
// energy, and above the higher lead by a part of what the mean energy is above
// it; at no more than so many energies from either side, which takes some
// milliseconds; and both sides must agree on a pole to a part of its width.
const (
	seenSpreads = 3
	seenAbove   = 0.01
	seenBudget  = 2000
	seenAgree   = 0.01
)

// seenResonances are in ascending energy. What is wider than it is high above
// the higher lead is none; of those that a wave from either side does not tell,
// as below the higher lead, nothing is said.
func (s *Scenario) seenResonances() []SeenResonance {
	lead := math.Max(s.Structure.Entry.Height, s.Structure.Exit.Height)
	reach, mean := seenSpreads*s.energySpread(), s.Packet.Energy
	from := math.Max(mean-reach, lead+seenAbove*(mean-lead))
	if from <= lead {
		return nil
	}
	one, other := s.polesFrom(false, from, mean+reach), s.polesFrom(true, from, mean+reach)
	var list []SeenResonance
	for _, p := range one {
		q, found := closestPole(other, p.Energy)
		energy, width := math.Abs(q.Energy-p.Energy), math.Abs(q.Width-p.Width)
		if !found || p.Width >= p.Energy-lead || !(math.Max(energy, width) <= seenAgree*p.Width) {
			continue
		}
		list = append(list, s.seenResonance(p, energy, width))
	}
	return list
}

// polesFrom are those that a wave from one side tells, none where the search
// does not come to an end.
func (s *Scenario) polesFrom(right bool, from, to float64) []stationary.Pole {
	poles, _, err := stationary.New(s.Structure, right).Resonances(context.Background(), from, to, seenBudget)
	if err != nil {
		return nil
	}
	return poles
}

// closestPole is the one whose energy is closest, if there is any.
func closestPole(poles []stationary.Pole, energy float64) (best stationary.Pole, found bool) {
	for _, p := range poles {
		if !found || math.Abs(p.Energy-energy) < math.Abs(best.Energy-energy) {
			best, found = p, true
		}
	}
	return best, found
}

// seenResonance brings a pole to display units. The rounding of its numbers
// themselves is an error, too.
func (s *Scenario) seenResonance(p stationary.Pole, energy, width float64) SeenResonance {
	const rounding = 0x1p-52
	unit, life := s.Scale.Energy, s.Scale.Time/p.Width
	energy += rounding * math.Abs(p.Energy)
	width += rounding * math.Abs(p.Energy)
	return SeenResonance{
		p.Energy * unit, p.Width * unit, life, energy * unit, width * unit, life * width / p.Width,
	}
}

// Nearest is the resonance nearest the packet's mean energy, nil where none is
// seen.
func (o *Outlook) Nearest() *SeenResonance {
	var best *SeenResonance
	for i := range o.Resonances {
		r := &o.Resonances[i]
		if best == nil || math.Abs(r.Energy-o.Energy) < math.Abs(best.Energy-o.Energy) {
			best = r
		}
	}
	return best
}
