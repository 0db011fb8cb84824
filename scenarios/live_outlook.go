package scenarios

import (
	"math"

	"fluxtoll/potential/stationary"
)

// Outlook is what is known of a trial before its packet moves, in display
// units.
type Outlook struct {
	Title      string
	Units      Units
	Tolerance  float64
	Side       Side
	Width      float64   // of the structure
	Faces      []float64 // of all layers, from 0 to Width
	Deltas     []float64 // positions of delta layers
	Lossy      bool
	Energy     float64 // mean energy of the packet
	Spread     float64 // standard deviation of its energy, to first order
	Planes     *PlanesAt
	From, To   float64 // ends of the grid's real axis
	Fringe     float64 // distance of the interference fringes before the structure
	Duration   float64 // expected end of the run, when next to nothing is left
	Event      float64 // when what can be seen with the eye is over; at most Duration
	Top        float64 // largest density at the start
	Contact    float64 // time of the first contact
	Predicted  Ledger  // averages; Trapped and Closure are 0
	Arrivals   Arrivals
	Shifts     []Shift
	Spectrum   Spectrum
	Resonances []SeenResonance // in the packet's band, in ascending energy
	Refused    string          // why the packet road was refused
}

// Arrivals are predicted mean times at the planes, nil where nothing arrives.
type Arrivals struct {
	Transmitted, Reflected *float64
	// FreeTransmitted is the free packet's mean time at the far plane, as if
	// the packet's lead went on for ever; FreeReflected its mean time at the
	// near plane after a hard wall at the near face.
	FreeTransmitted, FreeReflected *float64
	// Peak flow to be expected at the planes, probability per time: that of
	// the free packet at that time, times the part that arrives.
	PeakTransmitted, PeakReflected float64
}

func newOutlook(t *Trial) *Outlook {
	s, unit := t.Scenario, t.Scenario.Scale
	o := &Outlook{
		Title: s.Title, Units: Units{unit.LengthUnit, unit.EnergyUnit, unit.TimeUnit}, Tolerance: s.Tolerance,
		Side: s.Packet.Side, Width: s.Structure.Width() * unit.Length, Lossy: s.Structure.Lossy(),
		Energy: s.Packet.Energy * unit.Energy, Spread: s.energySpread() * unit.Energy,
		Fringe:    math.Pi / s.Packet.K0 * unit.Length,
		Predicted: Ledger{Reflected: t.Averages.Reflected.Value, Transmitted: t.Averages.Transmitted.Value, Lost: t.Averages.Lost.Value},
		Spectrum:  t.spectrum(), Resonances: s.seenResonances(),
	}
	o.Faces = append(o.Faces, 0)
	for _, span := range s.Structure.Layers {
		o.Faces = append(o.Faces, span.To*unit.Length)
	}
	for _, d := range s.Structure.Deltas {
		o.Deltas = append(o.Deltas, d.X*unit.Length)
	}
	if t.Plan != nil {
		t.schedule(o)
	} else {
		o.Refused = t.Refused.Error()
		margin := 10 * s.Packet.Length * unit.Length
		o.From, o.To = -margin, o.Width+margin
	}
	return o
}

// schedule fills what follows from the plan.
func (t *Trial) schedule(o *Outlook) {
	p, unit := t.Plan, t.Scenario.Scale
	o.Planes = &PlanesAt{p.at(p.near) * unit.Length, p.farAt() * unit.Length, p.at(p.start) * unit.Length, p.width * unit.Length}
	x := p.extent()
	o.From, o.To = x.Left*unit.Length, x.Right*unit.Length
	o.Duration = p.Expected * unit.Time
	o.Event = t.event() * unit.Time
	o.Top = 1 / (math.Sqrt(2*math.Pi) * t.Scenario.Packet.Length * unit.Length)
	o.Contact = t.contact() * unit.Time
	o.Shifts = t.shifts()
	transmitted, reflected := t.averageArrivals()
	show := func(part, m stationary.Mean) *float64 {
		if part.Value <= leastPart {
			return nil
		}
		return scaled(m.Value, unit.Time)
	}
	a, free := t.Averages, t.Averages.SlownessFree.Value
	o.Arrivals = Arrivals{
		Transmitted: show(a.Transmitted, transmitted), Reflected: show(a.Reflected, reflected),
		FreeTransmitted: scaled((p.start+p.width+p.far)*free, unit.Time),
		FreeReflected:   scaled((p.start+p.near)*free, unit.Time),
		PeakTransmitted: a.Transmitted.Value * t.freePeak(transmitted.Value) / unit.Time,
		PeakReflected:   a.Reflected.Value * t.freePeak(reflected.Value) / unit.Time,
	}
}

// freePeak is the largest flow of the free packet past a point that its
// centre passes at a time: speed times density at the centre.
func (t *Trial) freePeak(time float64) float64 {
	near, _ := t.Scenario.leads()
	_, width := t.freeAt(time)
	return t.Scenario.Packet.K0 / near.Mass / (math.Sqrt(2*math.Pi) * width)
}

// energySpread is the standard deviation of the packet's energy to first
// order: hbar v0/(2 length).
func (s *Scenario) energySpread() float64 {
	near, _ := s.leads()
	return s.Packet.K0 / near.Mass / (2 * s.Packet.Length)
}

// freeAt is the free packet at a time: its centre's distance before the near
// face and its standard deviation, length sqrt(1 + (t/(2 m length^2))^2)
// (L. I. Schiff, Quantum Mechanics, section 12; from memory).
func (t *Trial) freeAt(time float64) (before, width float64) {
	near, _ := t.Scenario.leads()
	l := t.Scenario.Packet.Length
	return t.Plan.start - t.Scenario.Packet.K0/near.Mass*time, l * math.Hypot(1, time/(2*near.Mass*l*l))
}

// contact is the time at which the free packet's front, two standard
// deviations before its centre, is at the near face: by bisection, since the
// front moves forward for as long as the packet is faster than it spreads.
func (t *Trial) contact() float64 {
	front := func(time float64) float64 {
		before, width := t.freeAt(time)
		return before - 2*width
	}
	low, high := 0.0, t.Plan.Expected
	if front(low) <= 0 || front(high) > 0 {
		return low
	}
	for range 60 {
		if mid := (low + high) / 2; front(mid) > 0 {
			low = mid
		} else {
			high = mid
		}
	}
	return high
}

// event is when what can be seen is over: four standard deviations of the
// arrival times after the later mean arrival. The variance is that of the
// arrivals over the spectrum and of the packet's passage length/v0.
func (t *Trial) event() float64 {
	end := 0.0
	near, _ := t.Scenario.leads()
	passage := t.Scenario.Packet.Length * near.Mass / t.Scenario.Packet.K0
	for _, share := range []func(sample) (weight, arrival float64){
		func(s sample) (float64, float64) { a, _ := s.arrivals(t.Plan.geometry); return s.Transmission, a },
		func(s sample) (float64, float64) { _, a := s.arrivals(t.Plan.geometry); return s.Reflection, a },
	} {
		var sum, first, second float64
		for _, s := range t.Plan.samples {
			w, a := share(s)
			w *= s.weight
			sum, first, second = sum+w, first+w*a, second+w*a*a
		}
		if sum > seen {
			mean := first / sum
			end = math.Max(end, mean+4*math.Sqrt(math.Max(0, second/sum-mean*mean)+passage*passage))
		}
	}
	return math.Min(end, t.Plan.Expected)
}

// seen is the smallest probability that is worth waiting for.
const seen = 1e-3
