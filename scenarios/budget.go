package scenarios

import (
	"math"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// Budget lists the terms of a run's error budget. Each is the largest over the
// quantities: absolute for probabilities, relative to the time for times.
type Budget struct {
	Space    float64 `json:"space"`    // the elements' own scattering against the exact one
	Time     float64 `json:"time"`     // phase error of the time step
	Edges    float64 `json:"edges"`    // reflection of the absorbing edges
	Packet   float64 `json:"packet"`   // overlap at the start, wrong-way components
	Tail     float64 `json:"tail"`     // what had not left when the run ended
	Average  float64 `json:"average"`  // quadrature error of the stationary averages
	Rounding float64 `json:"rounding"` // accumulated rounding of the solves
}

// terms are the same, by quantity.
type terms struct{ space, time, edges, packet, tail, average, rounding errorSet }

func (t terms) total() errorSet {
	return t.space.plus(t.time).plus(t.edges).plus(t.packet).plus(t.tail).plus(t.average).plus(t.rounding)
}

// terms computes every term of the budget from the run's own operators. Space
// counts twice: scattering on the elements is off, and so are the energies
// that the elements give the packet's wave numbers.
func (t *Trial) terms() terms {
	return terms{
		space: t.Plan.grids.space.times(2), edges: t.Plan.grids.edges,
		time: t.timeTerm(), packet: t.Plan.start0,
		tail:    t.tail(t.Run.Ledger(), t.Run.Remaining, t.Run.Lifetime).plus(t.astray()).plus(t.poleTail()),
		average: t.averageTerm(), rounding: t.roundingTerm(),
	}
}

// means are the mean arrivals of the averages.
func (t *Trial) means() partMeans { return timedMeans(t.Averages, t.Plan.geometry) }

// timedMeans are the parts and their mean arrivals; a part too small to be
// timed has none.
func timedMeans(a *stationary.Averages, g geometry) partMeans {
	transmitted, reflected := averageArrivals(a, g)
	m := partMeans{transmitted: a.Transmitted.Value, reflected: a.Reflected.Value}
	if m.transmitted > leastPart {
		m.timeTransmitted = transmitted.Value
	}
	if m.reflected > leastPart {
		m.timeReflected = reflected.Value
	}
	return m
}

// phaseSafety covers what the phase error does beyond first order.
const phaseSafety = 1.5

// timeTerm is the spectrum average of the step's phase error times each time;
// the aliasing of a flow sampled once a step, its spectrum at 2 pi/dt; and one
// step for what was in the wrong place at the start, whose motion is not
// resolved.
func (t *Trial) timeTerm() errorSet {
	var e errorSet
	m, p := t.means(), t.Plan
	for _, s := range p.all {
		slope := math.Abs(p.Pade.SlopeError((s.energy - p.Origin) * p.TimeStep))
		if slope < 1 {
			slope /= 1 - slope
		} else {
			slope = 1
		}
		transmitted, reflected := s.arrivals(p.geometry)
		dwell := s.Dwell
		if t.Run.Tail() != nil { // which has no error of phase
			end := t.Run.Tail().Time
			transmitted, reflected, dwell = math.Min(transmitted, end), math.Min(reflected, end), math.Min(dwell, end)
		}
		e.dwell += s.weight * dwell * slope
		if m.transmitted > leastPart {
			e.arrivalTransmitted += s.weight * s.Transmission * transmitted * slope / m.transmitted
		}
		if m.reflected > leastPart {
			e.arrivalReflected += s.weight * s.Reflection * reflected * slope / m.reflected
		}
	}
	front := math.Erfc(p.start/t.Scenario.Packet.Length/math.Sqrt2) / 2
	alias := t.aliasing() + front*p.TimeStep
	grown := t.slow.times(lengthened)
	grown.transmitted, grown.reflected, grown.lost = 0, 0, 0 // no step misplaces those
	return e.times(phaseSafety).plus(grown).plus(t.perPart(alias, alias))
}

// aliasing is dt times the weight of the packet's flow at the frequency
// 2 pi/dt, exp(-(2 pi/dt)^2 / (8 sigma^2)), sigma its spread in energy.
func (t *Trial) aliasing() float64 {
	packet, dt := t.Scenario.Packet, t.Plan.TimeStep
	near, _ := t.Scenario.leads()
	width := 1 / (2 * packet.Length)
	sigma := (packet.K0 + width/2) * width / near.Mass
	omega := 2 * math.Pi / dt
	return dt * math.Exp(-omega*omega/(8*sigma*sigma))
}

// perPart divides a time-like error by each part's probability, and gives the
// dwell its own.
func (t *Trial) perPart(time, dwell float64) errorSet {
	e, a := errorSet{dwell: dwell}, t.Averages
	if a.Transmitted.Value > leastPart {
		e.arrivalTransmitted = time / a.Transmitted.Value
	}
	if a.Reflected.Value > leastPart {
		e.arrivalReflected = time / a.Reflected.Value
	}
	return e
}

// slowest is the power of t that a flow is trusted to fall with at most: what
// remains may beat, and for a moment seem to fall faster.
const slowest = 4

// tail charges what remains between the planes to every part, and what may
// still flow through the planes to and fro: near a threshold, waves beyond the
// far plane return. Both come later than now, by about the time in which what
// remains decays; a decay slower than that of exp(-t) goes as a power of t, for
// which the delay counts twice.
// As much of what remains as was astray from the start is left out: it may
// never leave.
func (t *Trial) tail(l *propagate.Ledger, remaining, lifetime float64) errorSet {
	lifetime = math.Min(lifetime, l.Time)
	reach := math.Max(lifetime, l.Time/slowest)
	m := t.means()
	leaving := math.Max(0, remaining-2*t.stray())
	moving := math.Max(leaving, t.Run.Flow*reach) + t.Run.Cross
	late := moving * math.Abs(l.Time+reach-math.Min(m.timeTransmitted, m.timeReflected))
	inLayers := 0.0
	for _, p := range l.InLayer {
		inLayers += p
	}
	e := t.perPart(2*late, math.Min(inLayers, leaving)*lifetime+leaving*t.Averages.Dwell.Value)
	e.transmitted, e.reflected, e.lost = 2*moving, 2*moving, 2*leaving
	return e
}

// stray is the probability that at the start was no part of the incoming
// packet: its front within the structure, of which a bound state may keep
// some, and the waves of the grid that sampling it adds.
func (t *Trial) stray() float64 {
	front := math.Erfc(t.Plan.start/t.Scenario.Packet.Length/math.Sqrt2) / 2
	return front + t.Plan.sampling
}

// astray charges what is left of it now, with the whole run as its delay.
func (t *Trial) astray() errorSet {
	left := math.Min(t.Run.Remaining, 2*t.stray())
	time := left * t.Run.Ledger().Time
	e := t.perPart(time, time)
	e.transmitted, e.reflected, e.lost = left, left, left
	if t.Scenario.Structure.Width() == 0 {
		e.dwell = 0
	}
	return e
}

// averageTerm is the averages' own error.
func (t *Trial) averageTerm() errorSet {
	a := t.Averages
	transmitted, reflected := t.averageArrivals()
	return errorSet{
		transmitted: a.Transmitted.Error, reflected: a.Reflected.Error, lost: a.Lost.Error,
		arrivalTransmitted: transmitted.Error, arrivalReflected: reflected.Error, dwell: a.Dwell.Error,
	}
}

// roundingTerm is what the ledger fails to close by, and a random walk of one
// rounding (2^-53) for each solve and for each of the sums.
func (t *Trial) roundingTerm() errorSet {
	solves := float64(t.Run.Ledger().Steps * t.Plan.Pade.Member)
	r := math.Abs(t.ledger().Closure) + 4*math.Sqrt(solves+16)*0x1p-53
	m := t.means()
	return errorSet{
		transmitted: r, reflected: r, lost: r, arrivalTransmitted: r * m.timeTransmitted,
		arrivalReflected: r * m.timeReflected, dwell: r * t.Averages.Dwell.Value,
	}
}

// summary reduces the terms to one number each.
func (t *Trial) summary(list terms) Budget {
	m := t.means()
	worst := func(e errorSet) float64 {
		probability, time := e.relative(t.Averages, m)
		return math.Max(probability, time)
	}
	return Budget{
		worst(list.space), worst(list.time), worst(list.edges), worst(list.packet),
		worst(list.tail), worst(list.average), worst(list.rounding),
	}
}
