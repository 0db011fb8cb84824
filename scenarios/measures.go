package scenarios

import (
	"fmt"
	"math"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// measurer builds the quantities of a result. limits is the budget of each,
// nil where the packet road was not taken.
type measurer struct {
	*Trial
	limits *errorSet
	out    []Measure
}

// measures lists every quantity that has a meaning for this trial.
func (t *Trial) measures(limits *errorSet) []Measure {
	m := &measurer{Trial: t, limits: limits}
	m.probabilities()
	if t.Plan != nil {
		m.times()
	} else {
		m.delays()
	}
	if t.Scenario.Structure.Width() > 0 {
		m.dwell()
	}
	return m.out
}

// add enters a probability (scale 1) or a time.
func (m *measurer) add(q Measure, average stationary.Mean, plane, packet *float64, budget, allowed, scale float64) {
	q.Average, q.AverageError = scaled(average.Value, scale), scaled(average.Error, scale)
	if plane != nil {
		q.PlaneWave = scaled(*plane, scale)
	}
	q.Allowed = allowed * scale
	if packet != nil {
		q.Packet = scaled(*packet, scale)
		q.Difference = scaled(*packet-average.Value, scale)
		q.Budget = scaled(budget, scale)
		q.Agrees = math.Abs(*packet-average.Value) <= budget && budget <= allowed
	}
	m.out = append(m.out, q)
}

// scaled returns a pointer to v*scale, or nil where that is no number.
func scaled(v, scale float64) *float64 {
	v *= scale
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return nil
	}
	return &v
}

func (m *measurer) probabilities() {
	a, tol := m.Averages, m.Scenario.Tolerance
	var reflected, transmitted, lost *float64
	limits := errorSet{}
	if m.limits != nil {
		l := m.ledger()
		reflected, transmitted, lost, limits = &l.Reflected, &l.Transmitted, &l.Lost, *m.limits
	}
	p := m.PlaneWave
	m.add(Measure{Name: "reflected"}, a.Reflected, &p.Reflection, reflected, limits.reflected, tol, 1)
	m.add(Measure{Name: "transmitted"}, a.Transmitted, &p.Transmission, transmitted, limits.transmitted, tol, 1)
	if m.Scenario.Structure.Lossy() {
		m.add(Measure{Name: "lost"}, a.Lost, &p.Absorption, lost, limits.lost, tol, 1)
	}
}

// part is what times need to know of the transmitted or the reflected part.
type part struct {
	name           string
	probability    float64
	delay, arrival stationary.Mean
	planeDelay     *float64
	planeFlight    float64
	packet         *float64 // measured arrival, nil where next to nothing passed
	budget         float64
}

// times adds arrivals and group delays of the parts that are large enough to
// be timed.
func (m *measurer) times() {
	var both []part
	for _, p := range m.parts() {
		if p.probability > leastPart {
			both = append(both, p)
		}
	}
	unit, scale := m.Scenario.Scale.TimeUnit, m.Scenario.Scale.Time
	for _, p := range both {
		var plane *float64
		if p.planeDelay != nil {
			arrival := *p.planeDelay + p.planeFlight
			plane = &arrival
		}
		allowed := m.Scenario.timeTolerance() * p.arrival.Value
		m.add(Measure{Name: "arrival_" + p.name, Unit: unit}, p.arrival, plane, p.packet, p.budget, allowed, scale)
	}
	for _, p := range both {
		var packet *float64
		if p.packet != nil {
			delay := *p.packet - (p.arrival.Value - p.delay.Value)
			packet = &delay
		}
		allowed := m.Scenario.timeTolerance() * p.arrival.Value
		m.add(Measure{Name: "group_delay_" + p.name, Unit: unit}, p.delay, p.planeDelay, packet, p.budget, allowed, scale)
	}
}

// measured is the mean time of a passage, or nil where next to nothing passed.
func measured(p propagate.Passage) *float64 {
	if p.Flux() <= leastPart {
		return nil
	}
	t := p.MeanTime()
	return &t
}

// parts describes the transmitted and the reflected part.
func (m *measurer) parts() []part {
	a, plan, w := m.Averages, m.Plan, m.PlaneWave
	near, far := m.passages()
	arrivalT, arrivalR := m.averageArrivals()
	t := part{
		name: "transmitted", probability: a.Transmitted.Value, delay: a.GroupDelayTransmitted,
		arrival: arrivalT, packet: measured(far), budget: m.limits.arrivalTransmitted,
	}
	if w.SpeedOut > 0 {
		t.planeDelay, t.planeFlight = &w.GroupDelayTransmitted, plan.start/w.SpeedIn+plan.far/w.SpeedOut
	}
	r := part{
		name: "reflected", probability: a.Reflected.Value, delay: a.GroupDelayReflected,
		arrival: arrivalR, packet: measured(near), budget: m.limits.arrivalReflected,
	}
	if w.Reflection > 0 {
		r.planeDelay, r.planeFlight = &w.GroupDelayReflected, (plan.start+plan.near)/w.SpeedIn
	}
	return []part{t, r}
}

// delays adds the group delays where the packet road was refused: no plane
// was placed, so there is no arrival.
func (m *measurer) delays() {
	a, w := m.Averages, m.PlaneWave
	unit, scale := m.Scenario.Scale.TimeUnit, m.Scenario.Scale.Time
	if a.Transmitted.Value > leastPart {
		m.add(Measure{Name: "group_delay_transmitted", Unit: unit}, a.GroupDelayTransmitted, &w.GroupDelayTransmitted, nil, 0, m.Scenario.timeTolerance()*math.Abs(a.GroupDelayTransmitted.Value), scale)
	}
	if a.Reflected.Value > leastPart {
		m.add(Measure{Name: "group_delay_reflected", Unit: unit}, a.GroupDelayReflected, &w.GroupDelayReflected, nil, 0, m.Scenario.timeTolerance()*math.Abs(a.GroupDelayReflected.Value), scale)
	}
}

func (m *measurer) dwell() {
	var packet *float64
	budget := 0.0
	if m.limits != nil {
		d := m.Run.Booked().TotalDwell()
		packet, budget = &d, m.limits.dwell
	}
	a := m.Averages.Dwell
	m.add(Measure{Name: "dwell", Unit: m.Scenario.Scale.TimeUnit}, a, &m.PlaneWave.Dwell, packet,
		budget, m.Scenario.timeTolerance()*a.Value, m.Scenario.Scale.Time)
}

// notes are remarks that a reader of the numbers needs.
func (t *Trial) notes() []string {
	var out []string
	out = append(out, t.Scenario.Notes...)
	if t.Refused != nil {
		out = append(out, t.Refused.Error())
	}
	if away := wrongWay(t.Scenario.Packet); away > t.Scenario.Tolerance {
		out = append(out, fmt.Sprintf("up to %.2g of the packet moves away from the structure or interferes with what does: it is too short for its energy, and the averages leave that out", away))
	}
	if t.unsettled != nil {
		out = append(out, "the averages did not reach their accuracy: "+t.unsettled.Error())
	}
	for _, p := range []struct {
		name  string
		value float64
	}{{"transmitted", t.Averages.Transmitted.Value}, {"reflected", t.Averages.Reflected.Value}} {
		if p.value > 0 && p.value <= leastPart {
			out = append(out, fmt.Sprintf("the %s part (%.3g) is too small for the packet road to time; its arrival and group delay are left out", p.name, p.value))
		}
	}
	return out
}
