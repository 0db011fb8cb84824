package scenarios

import (
	"fmt"
	"math"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// pulseReader reads one pulse off the record.
type pulseReader struct {
	*Trial
	outgoing
	far                bool
	name               string
	probability        float64 // by the averages
	passed             propagate.Passage
	arrival            stationary.Mean
	slip, late         float64 // budgets of the probability and of the arrival
	way                float64 // of free flight from the start to the plane
	steps, first, fine moments
	series             series
	out                []PulseMeasure
}

func (t *Trial) newPulseReader(far bool, budget errorSet) *pulseReader {
	near, beyond := t.passages()
	arrivalT, arrivalR := t.averageArrivals()
	p := t.Plan
	r := &pulseReader{
		Trial: t, far: far, name: "reflected", probability: t.Averages.Reflected.Value,
		passed: near, arrival: arrivalR, slip: budget.reflected, late: budget.arrivalReflected, way: p.start + p.near,
	}
	if far {
		r.name, r.probability, r.passed, r.arrival = "transmitted", t.Averages.Transmitted.Value, beyond, arrivalT
		r.slip, r.late, r.way = budget.transmitted, budget.arrivalTransmitted, p.start+p.width+p.far
	}
	return r
}

// pulse reads it.
func (r *pulseReader) pulse() Pulse {
	right := r.far == (r.Plan.side == FromLeft)
	r.outgoing = r.Trial.out(r.far)
	r.steps = stepMoments(r.record.Stretches, right, r.Run.Tail())
	r.first = stepMoments(r.record.Stretches[:1], right, nil)
	r.series = r.outgoing.fine()
	r.fine = r.series.moments()
	r.times()
	r.widths()
	r.spectrum()
	parts, left := r.parts()
	plane := r.Plan.farAt()
	if !r.far {
		plane = r.Plan.at(r.Plan.near)
	}
	return Pulse{
		Part: r.name, Plane: plane * r.Scenario.Scale.Length, Quantities: r.out,
		Parts: parts, LeftOut: left, Series: r.shown(),
	}
}

// add enters a number; average may be nil.
func (r *pulseReader) add(name, unit string, average *float64, packet, bound, scale float64) {
	m := PulseMeasure{Name: name, Unit: unit, Packet: scaled(packet, scale), Error: scaled(bound, scale), Agrees: true}
	if average != nil {
		m.Average = scaled(*average, scale)
		m.Agrees = math.Abs(packet-*average) <= bound
	}
	r.out = append(r.out, m)
}

// addAverage enters a number that follows from the spectrum alone.
func (r *pulseReader) addAverage(name, unit string, average, bound, scale float64) {
	r.out = append(r.out, PulseMeasure{
		Name: name, Unit: unit, Average: scaled(average, scale), Error: scaled(bound, scale), Agrees: true,
	})
}

// times adds what the ledger has counted, and the highest flow.
func (r *pulseReader) times() {
	unit, scale := r.Scenario.Scale.TimeUnit, r.Scenario.Scale.Time
	average := r.Averages.Reflected
	if r.far {
		average = r.Averages.Transmitted
	}
	r.add("probability", "", &average.Value, r.passed.Probability, r.slip, 1)
	r.add("arrival", unit, &r.arrival.Value, r.passed.MeanTime(), r.late, scale)
	peak := 0
	for i, v := range r.series.flow {
		if v > r.series.flow[peak] {
			peak = i
		}
	}
	t, height, slipT, slipH := r.peak(peak)
	r.add("peak_time", unit, nil, t, slipT, scale)
	r.add("peak_flow", per(unit), nil, height, slipH, 1/scale)
}

// per is the unit of a probability per time.
func per(unit string) string {
	if unit == "" {
		return ""
	}
	return "1/" + unit
}

// peak is a maximum of the series, and how far that moves if only every other
// point is looked at, besides what moves the whole pulse. A wrong probability
// counts as a flow of the pulse's own length.
func (r *pulseReader) peak(at int) (time, height, slipTime, slipHeight float64) {
	time, height = r.series.top(at, 1)
	t, h := r.series.top(at, 2)
	moved := r.phaseMoments().deviation + r.late
	return time, height, math.Abs(t-time) + moved, math.Abs(h-height) + r.flowSlip() + height*moved/r.steps.deviation
}

// flowSlip is the error of the flow: what the series and the ledger do not
// agree on and the budget of the probability, over the pulse's length, and the
// square of what the series was cut off at, which makes it ring.
func (r *pulseReader) flowSlip() float64 {
	last := r.series.flow[len(r.series.flow)-1]
	return (r.slip+math.Abs(r.fine.total-r.first.total))/(math.Sqrt(2*math.Pi)*r.steps.deviation) + math.Abs(last)
}

// widths adds what describes the shape in time. The moments of the flow over
// the steps are held against those of the series between the steps.
func (r *pulseReader) widths() {
	unit, scale := r.Scenario.Scale.TimeUnit, r.Scenario.Scale.Time
	m := r.steps
	tail := r.tailMoments()
	phase := r.phaseMoments()
	slip := math.Abs(r.fine.deviation-r.first.deviation) + r.late + tail.deviation + phase.deviation
	r.add("width", unit, nil, m.deviation, slip, scale)
	r.add("skewness", "", nil, m.skewness, math.Abs(r.fine.skewness-r.first.skewness)+
		tail.skewness+phase.skewness+3*(1+math.Abs(m.skewness))*slip/m.deviation, 1)
	if arriving, e, ok := r.Scenario.freeWidth(r.Plan.start); ok {
		r.addAverage("incoming_width", unit, arriving, e, scale)
		r.add("broadening", "", nil, m.deviation/arriving, slip/arriving+e*m.deviation/(arriving*arriving), 1)
	}
	if free, e, ok := r.Scenario.freeWidth(r.way); ok {
		r.addAverage("free_width", unit, free, e, scale)
	}
}

// phaseMoments is what the phase error of the steps does to the moments: it
// moves the time of each energy, by which the flow's own deviation may add.
func (r *pulseReader) phaseMoments() moments {
	var first, second, total float64
	p, s := r.Plan, r.steps.deviation
	for _, e := range p.all {
		passes, back := e.arrivals(p.geometry)
		w := e.weight * e.Transmission
		if !r.far {
			passes, w = back, e.weight*e.Reflection
		}
		slope := math.Min(0.5, math.Abs(p.Pade.SlopeError((e.energy-p.Origin)*p.TimeStep)))
		moved := w * passes * slope / (1 - slope)
		d := math.Abs(passes-r.steps.mean) + s
		first += moved * d
		second += moved * d * d
		total += w
	}
	return moments{deviation: ratio(first, total*s), skewness: ratio(3*second, total*s*s*s)}
}

// tailMoments is what the rest, which leaves later, may add to the moments.
func (r *pulseReader) tailMoments() moments {
	rest := math.Max(0, r.Run.Remaining) / r.passed.Flux()
	lifetime := math.Min(r.Run.Lifetime, r.Run.Ledger().Time)
	d := r.Run.Ledger().Time - r.steps.mean
	second := rest * (d*d + 2*d*lifetime + 2*lifetime*lifetime)
	third := rest * (d*d*d + 3*d*d*lifetime + 6*d*lifetime*lifetime + 6*lifetime*lifetime*lifetime)
	s := r.steps.deviation
	if tail := r.Run.Tail(); tail != nil {
		// An error of the tail's first moment is one of its lifetimes.
		longest := 0.0
		for _, h := range tail.Held {
			if w := h.State.Width(); w > 0 && !h.Bound {
				longest = math.Max(longest, 1/w)
			}
		}
		e := r.poleTail()
		moved := e.arrivalReflected
		if r.far {
			moved = e.arrivalTransmitted
		}
		second += moved * 2 * (math.Abs(d) + 2*longest)
		third += moved * 3 * (d*d + 4*math.Abs(d)*longest + 6*longest*longest)
	}
	return moments{deviation: second / (2 * s), skewness: third/(s*s*s) + 1.5*math.Abs(r.steps.skewness)*second/(s*s)}
}

// spectrum adds the energies of what passed on both roads.
func (r *pulseReader) spectrum() {
	near, _ := r.Scenario.leads()
	e := r.energiesOf(&r.outgoing, near, r.far)
	mean, spread := r.averageEnergies()
	missing := math.Abs(e.probability-r.flowed) + 2*math.Abs(r.outgoing.late) + math.Max(0, r.Run.Remaining) + r.slip
	reach := math.Max(r.Plan.High-e.energy, e.energy-r.Plan.Low)
	slip := missing/r.probability*reach + 1e-12*reach
	unit, scale := r.Scenario.Scale.EnergyUnit, r.Scenario.Scale.Energy
	r.add("mean_energy", unit, &mean, e.energy, slip, scale)
	r.add("energy_spread", unit, &spread, e.spread, slip*(1+reach/(2*e.spread)), scale)
}

// averageEnergies are mean and standard deviation over |phi|^2 T or |phi|^2 R.
func (r *pulseReader) averageEnergies() (mean, spread float64) {
	var sum, first, second float64
	origin := r.Plan.Origin
	for _, n := range r.Averages.Nodes {
		w := n.Weight * n.Amplitudes.Reflection
		if r.far {
			w = n.Weight * n.Amplitudes.Transmission
		}
		d := n.Amplitudes.Energy - origin
		sum += w
		first += w * d
		second += w * d * d
	}
	m := ratio(first, sum)
	return origin + m, math.Sqrt(math.Max(0, ratio(second, sum)-m*m))
}

// mostParts bounds the parts of a pulse that are listed.
const mostParts = 24

// parts splits the series.
func (r *pulseReader) parts() (list []PulsePart, left int) {
	scale := r.Scenario.Scale.Time
	differ := math.Abs(r.fine.total - r.first.total)
	for i, piece := range split(r.series.flow) {
		if i == mostParts {
			return list, len(split(r.series.flow)) - mostParts
		}
		s := r.shapeOf(piece)
		peak, height, slipPeak, slipHeight := r.peak(piece.peak)
		// What may be wrong with the pulse may all be wrong with this part.
		span := r.series.step * float64(piece.to-piece.from)
		moved := r.late * math.Min(1, ratio(r.probability, s.probability)) * math.Max(1, ratio(r.probability, s.probability))
		slip := r.slip + differ
		list = append(list, PulsePart{
			From: r.series.at(piece.from) * scale, To: r.series.at(piece.to) * scale,
			Probability: s.probability, Time: s.mean * scale, Width: s.deviation * scale,
			Peak: peak * scale, Height: height / scale,
			ProbabilityError: slip, TimeError: (moved + slip/s.probability*span) * scale,
			WidthError: (moved + slip/s.probability*span*span/math.Max(s.deviation, r.series.step)) * scale,
			PeakError:  slipPeak * scale, HeightError: slipHeight / scale,
		})
	}
	return list, 0
}

// shapeOf is the shape of a part; the last one has the tail, if there is one.
func (r *pulseReader) shapeOf(piece stretchOfPulse) shape {
	s, tail := r.series.shape(piece), r.Run.Tail()
	if tail == nil || piece.to < len(r.series.flow)-1 {
		return s
	}
	m := momentSum{
		total: s.probability, second: s.probability * s.deviation * s.deviation, mean: s.mean,
	}
	m.addTail(tail.Time, tail.TailMoments(r.far == (r.Plan.side == FromLeft)))
	all := m.moments(0)
	return shape{all.total, all.mean, all.deviation}
}

// mostShown bounds the points of a series that is written out; outside of what
// is shown the flow is below leastShown of its peak.
const (
	mostShown  = 1200
	leastShown = 1e-6
)

// shown thins the series out.
func (r *pulseReader) shown() PulseSeries {
	scale, flow := r.Scenario.Scale.Time, r.series.flow
	top := 0.0
	for _, v := range flow {
		top = math.Max(top, v)
	}
	from, to := len(flow), 0
	for i, v := range flow {
		if v > leastShown*top {
			from, to = min(from, i), i
		}
	}
	out := PulseSeries{Time: []float64{}, Flow: []float64{}, Error: r.flowSlip() / scale}
	stride := 1 + (to-from)/mostShown
	for i := from; i <= to; i += stride {
		out.Time = append(out.Time, r.series.at(i)*scale)
		out.Flow = append(out.Flow, flow[i]/scale)
	}
	return out
}

// missedNote says that a run was longer than a record holds.
func missedNote(missed int) string {
	return fmt.Sprintf("the last %d steps are beyond what a record holds (%d) and are left out of pulses and curves", missed, propagate.MostRecorded)
}
