package scenarios

import (
	"math"
	"math/cmplx"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// A run is finished by the poles that, at the end of the prompt part, still hold
// more than exp(-stillThere) of what they did, unless they are more than
// mostPoles.
const (
	stillThere = 25
	mostPoles  = 200
)

// poles decides whether the run is to be finished by poles, and finds the
// states of the mesh's own operator, starting from those of the averages. A
// resonance whose state is not found is waited for.
func (p *planner) poles() {
	end := p.expectedEnd(p.averages.Resonances)
	slow := p.outlasting(end)
	if len(slow) > mostPoles {
		return
	}
	for _, r := range slow {
		if u := p.state(p.Mesh, r); u != nil {
			p.States = append(p.States, u)
			p.handled = append(p.handled, r)
		}
	}
}

// outlasting lists the resonances that are still there at a time.
func (p *planner) outlasting(end float64) []stationary.Pole {
	var out []stationary.Pole
	for _, r := range p.averages.Resonances {
		if r.Width*end < stillThere {
			out = append(out, r)
		}
	}
	return out
}

// state is the mesh's own state for a resonance, nil where none is found that
// is plainly the same: as near as the elements' accuracy allows, of a width
// within a tenth, and not one that another resonance has led to.
func (p *planner) state(mesh *propagate.Mesh, r stationary.Pole) *propagate.Eigenstate {
	guess := complex(r.Energy, -r.Width/2)
	u, err := mesh.Eigenstate(guess)
	if err != nil {
		return nil
	}
	reach := 0.1*r.Width + 1e-3*p.scenario.Tolerance*(p.High-p.Low) + 1e-12*math.Abs(r.Energy)
	if !(cmplx.Abs(u.Energy-guess) < reach) || !(math.Abs(u.Width()-r.Width) < 0.1*r.Width+1e-12*math.Abs(r.Energy)) {
		return nil
	}
	for _, v := range p.States {
		if cmplx.Abs(u.Energy-v.Energy) < 1e-3*u.Width() {
			return nil
		}
	}
	return u
}

// forgetDelays sets the delays to 0 if they are those of resonances that are
// taken, which the run does not wait for. Each pole adds
// (Width/2)/((E-Energy)^2 + Width^2/4) to the delay of t, and up to twice
// that to the delay of r.
func (s *sample) forgetDelays(taken []stationary.Pole) {
	const near = 1000 // widths: within them r may have a zero, around which its delay has any size
	share := 0.0
	for _, r := range taken {
		d := s.energy - r.Energy
		if math.Abs(d) < near*r.Width {
			share = math.Inf(1)
		}
		share += r.Width / 2 / (d*d + r.Width*r.Width/4)
	}
	if 4*share > math.Max(math.Abs(s.GroupDelayReflected), math.Abs(s.GroupDelayTransmitted)) {
		s.GroupDelayReflected, s.GroupDelayTransmitted = 0, 0
	}
}

// lateError is the relative error that the step makes in the mean times where
// late parts may have energies of their own: each energy weighs with its time,
// as far as the run will follow it.
func (p *planner) lateError(pade propagate.Pade, dt float64) float64 {
	var wrong errorSet
	m := p.means(p.geometry)
	for _, s := range p.samples {
		e := s.weight * math.Abs(pade.SlopeError((s.energy-p.Origin)*dt))
		transmitted, reflected := s.arrivals(p.geometry)
		wrong.dwell += e * math.Min(s.Dwell, p.Expected)
		wrong.arrivalTransmitted += e * s.Transmission * math.Min(transmitted, p.Expected)
		wrong.arrivalReflected += e * s.Reflection * math.Min(reflected, p.Expected)
	}
	_, relative := wrong.magnitudes(m).relative(p.averages, m)
	return phaseSafety * relative
}

// poleTail charges what the states of a tail are not known to, and what they
// and the rest have by interference: some of it may go to any part.
func (t *Trial) poleTail() errorSet {
	tail := t.Run.Tail()
	if tail == nil {
		return errorSet{}
	}
	near, far := tail.Error.FirstLeft, tail.Error.FirstRight
	if t.Plan.side == FromRight {
		near, far = far, near
	}
	m := t.means()
	p := tail.Error.Probability
	e := errorSet{transmitted: p, reflected: p, lost: p, dwell: tail.Error.Dwell}
	if m.transmitted > leastPart {
		e.arrivalTransmitted = far / m.transmitted
	}
	if m.reflected > leastPart {
		e.arrivalReflected = near / m.reflected
	}
	return e
}

// Tail says how much of the packet road's numbers came from resonance states
// after the last step, in display units.
type Tail struct {
	Poles       int     `json:"poles"`
	Time        float64 `json:"time"` // of the last step
	Reflected   float64 `json:"reflected"`
	Transmitted float64 `json:"transmitted"`
	Lost        float64 `json:"lost"`
	Dwell       float64 `json:"dwell"`
	// What the tail adds to the mean arrivals, absent where nothing arrives.
	ArrivalReflected   *float64 `json:"arrival_reflected,omitempty"`
	ArrivalTransmitted *float64 `json:"arrival_transmitted,omitempty"`
	Error              float64  `json:"error"` // of each number: absolute for probabilities, relative for times
	States             []Level  `json:"states"`
}

// Level is a resonance state and what it held at the last step.
type Level struct {
	Energy      float64 `json:"energy"`
	Width       float64 `json:"width"`
	Lifetime    float64 `json:"lifetime"`
	Probability float64 `json:"probability"`
}

// tailReport describes the tail; nil where there is none.
func (t *Trial) tailReport() *Tail {
	tail := t.Run.Tail()
	if tail == nil {
		return nil
	}
	unit := t.Scenario.Scale
	near, far := tail.Left, tail.Right
	stepped := t.Run.Ledger()
	steppedNear, steppedFar := stepped.Left, stepped.Right
	if t.Plan.side == FromRight {
		near, far, steppedNear, steppedFar = far, near, steppedFar, steppedNear
	}
	own := t.tail(stepped, t.Run.Remaining, t.Run.Lifetime).plus(t.poleTail())
	probability, time := own.relative(t.Averages, t.means())
	out := &Tail{
		Poles: len(tail.Held), Time: tail.Time * unit.Time,
		Reflected: near.Probability, Transmitted: far.Probability, Lost: tail.TotalLost(),
		Dwell: tail.TotalDwell() * unit.Time, Error: math.Max(probability, time),
		ArrivalReflected:   added(steppedNear, near, unit.Time),
		ArrivalTransmitted: added(steppedFar, far, unit.Time),
	}
	for _, h := range tail.Held {
		width := h.State.Width()
		out.States = append(out.States, Level{
			Energy: real(h.State.Energy) * unit.Energy, Width: width * unit.Energy,
			Lifetime: 1 / width * unit.Time, Probability: h.Probability,
		})
	}
	return out
}

// added is by how much a tail moves a mean arrival.
func added(stepped, tail propagate.Passage, unit float64) *float64 {
	return scaled(stepped.Plus(tail).MeanTime()-stepped.MeanTime(), unit)
}
