package scenarios

import (
	"fmt"
	"math"
)

// Band is a range of energies in internal units; nil: to be chosen.
type Band struct{ From, To *float64 }

// bandWidths is how many standard deviations of the packet's wave numbers its
// band reaches to either side; beyond lie 6e-5 of it.
const bandWidths = 4

// packetBand is the band of the packet's energies, with ends that read well.
func (s *Scenario) packetBand() (from, to float64) {
	near, _ := s.leads()
	const slowest = 0.05 // of the mean wave number
	half := bandWidths / (2 * s.Packet.Length)
	at := func(k float64) float64 { return near.Height + k*k/(2*near.Mass) }
	low, high := at(math.Max(s.Packet.K0-half, slowest*s.Packet.K0)), at(s.Packet.K0+half)
	from, to = s.roundOut(low, high)
	if !(from > near.Height) {
		from = low
	}
	return from, to
}

// roundOut moves the ends of a range outwards to whole hundredths of its size,
// in display units.
func (s *Scenario) roundOut(low, high float64) (from, to float64) {
	u := s.Scale.Energy
	unit := math.Pow(10, math.Floor(math.Log10((high-low)*u))-2)
	return math.Floor(low*u/unit) * unit / u, math.Ceil(high*u/unit) * unit / u
}

// band fills in what is open and refuses what does not lie above a height;
// name says whose height it is.
func (s *Scenario) band(b Band, height float64, name string) (from, to float64, err error) {
	from, to = s.packetBand()
	if b.From != nil {
		from = *b.From
	}
	if b.To != nil {
		to = *b.To
	}
	refuse := func(flag string, v float64, msg, accepted string) error {
		return &InputError{File: "--" + flag, Msg: s.energyText(v) + " " + msg, Accepted: accepted}
	}
	lead := s.energyText(height)
	switch {
	case !(from > height):
		return 0, 0, refuse("from", from, fmt.Sprintf("is not above the height of the %s, %s", name, lead), "an energy greater than "+lead+" is accepted")
	case b.To != nil && !(to > height):
		return 0, 0, refuse("to", to, fmt.Sprintf("is not above the height of the %s, %s", name, lead), "an energy greater than "+lead+" is accepted")
	case b.To != nil && b.From == nil && !(to > from):
		return 0, 0, refuse("to", to, "is not above the start of the packet's band, "+s.energyText(from), "give --from as well, or an energy greater than "+s.energyText(from))
	case b.To != nil && !(to > from):
		return 0, 0, refuse("to", to, "is not above the first energy, "+s.energyText(from), "an energy greater than "+s.energyText(from)+" is accepted")
	case !(to > from):
		return 0, 0, refuse("from", from, "is not below the end of the packet's band, "+s.energyText(to), "give --to as well, or an energy less than "+s.energyText(to))
	case !(to-from > 1e-12*(math.Abs(from)+math.Abs(to))):
		return 0, 0, refuse("to", to, "is the first energy but for rounding", "an energy clearly greater than "+s.energyText(from)+" is accepted")
	}
	return from, to, nil
}

// energyText is an energy in display units.
func (s *Scenario) energyText(v float64) string {
	text := fmt.Sprintf("%.6g", v*s.Scale.Energy)
	if s.Scale.EnergyUnit != "" {
		text += " " + s.Scale.EnergyUnit
	}
	return text
}

// units names the units of the output.
func (s *Scenario) units() Units {
	return Units{s.Scale.LengthUnit, s.Scale.EnergyUnit, s.Scale.TimeUnit}
}
