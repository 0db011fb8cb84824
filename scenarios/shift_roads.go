package scenarios

import (
	"math"

	"fluxtoll/propagate"
)

// Shifts are by how much the parts arrive later than in free flight and why,
// on both roads. A part too small to be timed is nil.
type Shifts struct {
	Transmitted *ShiftRoads `json:"transmitted"`
	Reflected   *ShiftRoads `json:"reflected"`
}

// ShiftRoads is a Shift on both roads, in display units: of the packet road
// the arrival, and the mean 1/v of what arrived, from the energies in it.
type ShiftRoads struct {
	Free      float64     `json:"free"` // mean time of free flight
	Total     ShiftNumber `json:"total"`
	Structure ShiftNumber `json:"structure"`
	Filter    ShiftNumber `json:"filter"`
	ExitLead  ShiftNumber `json:"exit_lead"`
	Reading   string      `json:"reading"` // what it means, in a sentence
}

// ShiftNumber is one number on both roads; Packet is nil where the packet road
// was not taken to its end, and Error then that of the average.
type ShiftNumber struct {
	Average float64  `json:"average"`
	Packet  *float64 `json:"packet"`
	Error   float64  `json:"error"`
	Agrees  bool     `json:"agrees"`
}

// shiftsOnBoth compares the shifts of the two roads; a run that goes on gives
// those of the averages alone.
func (t *Trial) shiftsOnBoth(limits *errorSet, status propagate.Status) *Shifts {
	if t.Plan == nil {
		return nil
	}
	out := &Shifts{}
	for _, s := range t.shifts() {
		r := newShiftRoads(s)
		if limits != nil && status != propagate.Running && t.recorded() {
			t.measureShift(s.Part == "transmitted", limits, r)
		}
		r.Reading = r.reading(s.Part)
		if s.Part == "transmitted" {
			out.Transmitted = r
		} else {
			out.Reflected = r
		}
	}
	return out
}

func newShiftRoads(s Shift) *ShiftRoads {
	n := func(v float64) ShiftNumber { return ShiftNumber{Average: v, Error: s.Error, Agrees: true} }
	return &ShiftRoads{
		Free: s.Free, Total: n(s.Total), Structure: n(s.Structure), Filter: n(s.Filter), ExitLead: n(s.Exit),
	}
}

// measureShift fills in the packet road: the parts of Shift with the arrival
// and the slownesses that the packet itself had.
func (t *Trial) measureShift(far bool, limits *errorSet, r *ShiftRoads) {
	p, free := t.Plan, t.Averages.SlownessFree
	near, beyond := t.passages()
	passed, way, budget, slip := near, p.start+p.near, limits.arrivalReflected, limits.reflected
	if far {
		passed, way, budget, slip = beyond, p.start+p.width+p.far, limits.arrivalTransmitted, limits.transmitted
	}
	lead, _ := t.Scenario.leads()
	o := t.out(far)
	in := t.energiesOf(&o, lead, far)
	if !(in.probability > 0) || !(passed.Flux() > 0) {
		return
	}
	late := passed.MeanTime()
	parts := [3]float64{late - way*in.slowness, way * (in.slowness - free.Value), 0}
	if far {
		out := t.energiesOf(&o, o.lead, far)
		parts[2] = p.far*(out.slowness-in.slowness) - t.beyond.Value/t.Averages.Transmitted.Value
		parts[0] = late - way*in.slowness - parts[2]
	}
	// What was not seen, or seen in longer steps only, may have had any speed
	// that lets it pass by the end of the run.
	unseen := math.Abs(in.probability-o.flowed)*way*(in.slowness+free.Value) +
		(math.Abs(o.late)+math.Max(0, t.Run.Remaining)+slip)*math.Max(t.Run.Ledger().Time, late)
	bound := budget + unseen/in.probability + way*free.Error
	scale := t.Scenario.Scale.Time
	for i, n := range []*ShiftNumber{&r.Structure, &r.Filter, &r.ExitLead} {
		n.measure(parts[i]*scale, bound*scale)
	}
	r.Total.measure((late-way*free.Value)*scale, (budget+way*free.Error)*scale)
}

func (n *ShiftNumber) measure(packet, bound float64) {
	n.Packet, n.Error = &packet, bound
	n.Agrees = math.Abs(packet-n.Average) <= bound
}

// recorded reports whether there is a record to read.
func (t *Trial) recorded() bool {
	return t.Run != nil && t.record != nil && len(t.record.Stretches) > 0
}
