package scenarios

import (
	"math"
	"time"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// Result is the answer to a scenario, in display units. Its JSON is the
// document that `run --json` prints.
type Result struct {
	Format     string    `json:"format"`
	Title      string    `json:"title"`
	Units      Units     `json:"units"`
	Tolerance  float64   `json:"tolerance"`
	Quantities []Measure `json:"quantities"`
	Shift      *Shifts   `json:"shift"`
	Ledger     *Ledger   `json:"ledger"`
	Tail       *Tail     `json:"tail,omitempty"`
	Budget     *Budget   `json:"budget"`
	Planes     *PlanesAt `json:"planes"`
	Numerics   *Numerics `json:"numerics"`
	Notes      []string  `json:"notes,omitempty"`
	Verdict    Verdict   `json:"verdict"`
	Ended      string    `json:"ended"` // why the packet road ended
	Seconds    float64   `json:"seconds"`
}

// Units names the display units; empty in natural units.
type Units struct {
	Length string `json:"length"`
	Energy string `json:"energy"`
	Time   string `json:"time"`
}

// Measure is one quantity in the three columns. A column without a value is
// nil (null in JSON).
type Measure struct {
	Name         string   `json:"name"`
	Unit         string   `json:"unit"`
	PlaneWave    *float64 `json:"plane_wave"`
	Average      *float64 `json:"average"`
	AverageError *float64 `json:"average_error"`
	Packet       *float64 `json:"packet"`
	Difference   *float64 `json:"difference"` // packet - average
	Budget       *float64 `json:"budget"`
	Allowed      float64  `json:"allowed"` // the tolerance, in this quantity's unit
	Agrees       bool     `json:"agrees"`
}

// Ledger says where the probability is.
type Ledger struct {
	Reflected   float64 `json:"reflected"`
	Transmitted float64 `json:"transmitted"`
	Lost        float64 `json:"lost"`
	Trapped     float64 `json:"trapped"`
	Closure     float64 `json:"closure"` // 1 - the sum of the four
}

// PlanesAt are the positions that mattered.
type PlanesAt struct {
	Near  float64 `json:"near"`
	Far   float64 `json:"far"`
	Start float64 `json:"start"`
	Width float64 `json:"width"` // of the structure: its far face b
}

// Verdict is the outcome of the comparison.
type Verdict string

// The verdicts.
const (
	Agrees      Verdict = "agrees"
	Disagrees   Verdict = "disagrees"
	NotReached  Verdict = "tolerance not reached"
	Incomplete  Verdict = "interrupted"
	resultLabel         = "fluxtoll.run/1"
)

// Result compares the columns as they stand. status is why the packet road
// ended.
func (t *Trial) Result(status propagate.Status) *Result {
	s := t.Scenario.Scale
	r := &Result{
		Format: resultLabel, Title: t.Scenario.Title,
		Units:     Units{s.LengthUnit, s.EnergyUnit, s.TimeUnit},
		Tolerance: t.Scenario.Tolerance, Ended: status.String(),
		Seconds: time.Since(t.started).Seconds(),
	}
	var limits *errorSet
	if t.Run != nil {
		list := t.terms()
		total, summary, ledger := list.total(), t.summary(list), t.ledger()
		limits, r.Budget, r.Ledger = &total, &summary, &ledger
		p := t.Plan
		r.Planes = &PlanesAt{p.at(p.near) * s.Length, p.farAt() * s.Length, p.at(p.start) * s.Length, p.width * s.Length}
		numerics := t.numerics()
		r.Numerics = &numerics
		r.Tail = t.tailReport()
	}
	if t.Refused != nil {
		r.Ended = "refused"
	}
	r.Quantities = t.measures(limits)
	r.Shift = t.shiftsOnBoth(limits, status)
	r.Notes = t.notes()
	r.Verdict = t.verdict(r, status)
	return r
}

// verdict reads the outcome off the quantities. A run that was cut short has
// no final budget: it cannot disagree.
func (t *Trial) verdict(r *Result, status propagate.Status) Verdict {
	switch {
	case status == propagate.Interrupted || status == propagate.Running && t.Run != nil:
		return Incomplete
	case status != propagate.Settled || t.unsettled != nil:
		return NotReached
	}
	verdict := Agrees
	for _, q := range r.Quantities {
		switch {
		case q.Agrees:
		case q.Budget == nil || q.Difference == nil:
			verdict = NotReached
		case math.Abs(*q.Difference) > *q.Budget:
			return Disagrees
		default:
			verdict = NotReached
		}
	}
	return verdict
}

// ledger reads the packet road's ledger, near and far instead of left and
// right.
func (t *Trial) ledger() Ledger {
	l := t.Run.Booked()
	near, far := t.passages()
	out := Ledger{
		Reflected: near.Probability, Transmitted: far.Probability,
		Lost: l.TotalLost(), Trapped: t.Run.Trapped(),
	}
	out.Closure = 1 - (out.Reflected + out.Transmitted + out.Lost + out.Trapped)
	return out
}

// passages are what has passed the near and the far plane.
func (t *Trial) passages() (near, far propagate.Passage) {
	l := t.Run.Booked()
	if t.Plan.side == FromRight {
		return l.Right, l.Left
	}
	return l.Left, l.Right
}

// averageArrivals are the mean arrivals at the planes on the stationary road.
func (t *Trial) averageArrivals() (transmitted, reflected stationary.Mean) {
	return averageArrivals(t.Averages, t.Plan.geometry)
}

// averageArrivals are the flights outside the structure and the group delays,
// averaged over what is transmitted and what is reflected.
func averageArrivals(a *stationary.Averages, g geometry) (transmitted, reflected stationary.Mean) {
	if a.Transmitted.Value > 0 {
		transmitted = combine(a.GroupDelayTransmitted, g.start, a.SlownessInTransmitted, g.far, a.SlownessOutTransmitted)
		transmitted.Value -= g.beyond.Value / a.Transmitted.Value
		transmitted.Error += g.beyond.Error / a.Transmitted.Value
	}
	if a.Reflected.Value > 0 {
		reflected = combine(a.GroupDelayReflected, g.start+g.near, a.SlownessInReflected, 0, stationary.Mean{})
	}
	return transmitted, reflected
}

// combine adds flights to a delay; the errors add up.
func combine(delay stationary.Mean, in float64, slowIn stationary.Mean, out float64, slowOut stationary.Mean) stationary.Mean {
	return stationary.Mean{
		Value: delay.Value + in*slowIn.Value + out*slowOut.Value,
		Error: delay.Error + in*slowIn.Error + out*slowOut.Error,
	}
}
