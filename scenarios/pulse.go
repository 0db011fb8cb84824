package scenarios

import (
	"context"
	"math"
	"time"
)

// PulseReport is what one run says about the pulses at both planes and about
// scattering at every energy of the packet. Display units. Its JSON is the
// document that `pulse --json` prints.
type PulseReport struct {
	Format    string    `json:"format"`
	Title     string    `json:"title"`
	Units     Units     `json:"units"`
	Tolerance float64   `json:"tolerance"`
	Planes    *PlanesAt `json:"planes"`
	Pulses    []Pulse   `json:"pulse"`
	Trapped   *Trapped  `json:"trapped"`
	Shift     *Shifts   `json:"shift"`
	OneShot   *OneShot  `json:"one_shot"`
	Notes     []string  `json:"notes,omitempty"`
	Verdict   Verdict   `json:"verdict"` // that of the run, and of every number here that both roads give
	Ended     string    `json:"ended"`
	Seconds   float64   `json:"seconds"`
}

const pulseLabel = "fluxtoll.pulse/1"

// Pulse is what passes one plane, against time.
type Pulse struct {
	Part       string         `json:"part"` // "transmitted" or "reflected"
	Plane      float64        `json:"plane"`
	Quantities []PulseMeasure `json:"quantities"`
	Parts      []PulsePart    `json:"parts"`    // in order of time
	LeftOut    int            `json:"left_out"` // parts beyond the last of these
	Series     PulseSeries    `json:"series"`
}

// PulseMeasure is one number of a pulse. Average is what the stationary road
// says, where it says something; Error bounds the difference, and where there
// is none the error of Packet.
type PulseMeasure struct {
	Name    string   `json:"name"`
	Unit    string   `json:"unit"`
	Average *float64 `json:"average"`
	Packet  *float64 `json:"packet"`
	Error   *float64 `json:"error"`
	Agrees  bool     `json:"agrees"` // true where there is nothing to compare
}

// PulsePart is one part of a pulse that is split.
type PulsePart struct {
	From        float64 `json:"from"` // where it was split, or the ends of the run
	To          float64 `json:"to"`
	Probability float64 `json:"probability"`
	Time        float64 `json:"time"` // mean
	Width       float64 `json:"width"`
	Peak        float64 `json:"peak"`   // time of the highest flow
	Height      float64 `json:"height"` // that flow, probability per time
	// Errors, in the same order.
	ProbabilityError float64 `json:"probability_error"`
	TimeError        float64 `json:"time_error"`
	WidthError       float64 `json:"width_error"`
	PeakError        float64 `json:"peak_error"`
	HeightError      float64 `json:"height_error"`
}

// PulseSeries is the flow through a plane, outward, probability per time.
type PulseSeries struct {
	Time  []float64 `json:"time"`
	Flow  []float64 `json:"flow"`
	Error float64   `json:"error"` // of the flow
}

// Trapped is what had not left when the run ended, and the resonances that the
// packet meets: what they hold falls by a factor e in their lifetime.
type Trapped struct {
	Probability float64       `json:"probability"`
	Error       float64       `json:"error"`
	Lifetime    *float64      `json:"lifetime"` // in which it fell by a factor e at last; null where it did not fall or is nothing but error
	Resonances  []LifetimeFor `json:"resonances"`
}

// LifetimeFor is a resonance in the packet's band.
type LifetimeFor struct {
	Energy   float64 `json:"energy"`
	Width    float64 `json:"width"`
	Lifetime float64 `json:"lifetime"`
	Share    float64 `json:"share"` // |phi|^2 at its energy over its peak
}

// FinishPulses is Finish, and then reads pulses and energies, at about so many
// points, off what was recorded.
func (t *Trial) FinishPulses(ctx context.Context, progress func(Progress), points int) (*PulseReport, error) {
	result := t.Finish(ctx, progress)
	out := &PulseReport{
		Format: pulseLabel, Title: result.Title, Units: result.Units, Tolerance: result.Tolerance,
		Planes: result.Planes, Pulses: []Pulse{}, Notes: result.Notes,
		Verdict: result.Verdict, Ended: result.Ended, Shift: result.Shift,
	}
	if t.recorded() {
		t.readPulses(out)
		var err error
		if out.OneShot, err = t.OneShot(points); err != nil {
			return nil, err
		}
	}
	if out.Verdict == Agrees && !out.agrees() {
		out.Verdict = Disagrees
	}
	out.Seconds = time.Since(t.started).Seconds()
	return out, nil
}

// agrees reports whether all that both roads give is within its error.
func (r *PulseReport) agrees() bool {
	all := r.OneShot == nil || r.OneShot.Agrees
	for _, p := range r.Pulses {
		for _, q := range p.Quantities {
			all = all && q.Agrees
		}
	}
	return all
}

// readPulses fills the pulses of the parts large enough to be timed.
func (t *Trial) readPulses(out *PulseReport) {
	budget := t.terms().total()
	for _, far := range []bool{true, false} {
		if r := t.newPulseReader(far, budget); r.probability > leastPart {
			out.Pulses = append(out.Pulses, r.pulse())
		}
	}
	out.Trapped = t.trapped()
	if missed := t.record.Missed; missed > 0 {
		out.Notes = append(out.Notes, missedNote(missed))
	}
}

// trapped lists what is left and the resonances in the band.
func (t *Trial) trapped() *Trapped {
	unit := t.Scenario.Scale
	out := &Trapped{
		Probability: t.ledger().Trapped, Error: t.roundingTerm().transmitted + t.stray(),
		Resonances: []LifetimeFor{},
	}
	if life := t.Run.Lifetime; out.Probability > out.Error && !math.IsInf(life, 0) {
		out.Lifetime = scaled(life, unit.Time)
	}
	near, _ := t.Scenario.leads()
	for _, r := range t.Averages.Resonances {
		d := (wave(near, r.Energy) - t.Scenario.Packet.K0) * t.Scenario.Packet.Length
		if share := math.Exp(-2 * d * d); share > shotShare {
			out.Resonances = append(out.Resonances, LifetimeFor{
				r.Energy * unit.Energy, r.Width * unit.Energy, unit.Time / r.Width, share,
			})
		}
	}
	return out
}
