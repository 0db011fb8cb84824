package scenarios

import (
	"context"
	"fmt"
	"math"
	"time"

	"fluxtoll/potential/stationary"
)

// Resonances is what `resonances` finds, in display units. Its JSON is the
// document that `resonances --json` prints.
type Resonances struct {
	Format     string      `json:"format"`
	Title      string      `json:"title"`
	Units      Units       `json:"units"`
	From       float64     `json:"from"`
	To         float64     `json:"to"`
	Widest     float64     `json:"widest"` // widths up to this one were looked for
	Resonances []Resonance `json:"resonances"`
	Bound      []Bound     `json:"bound"`
	// Counted is the number of poles by the argument principle, CountedBound
	// that of bound states by nodes (by the argument principle where a layer loses).
	Counted      int     `json:"counted"`
	CountedBound int     `json:"counted_bound"`
	Complete     bool    `json:"complete"` // as many were found, of both kinds
	Agrees       bool    `json:"agrees"`   // wherever the elements were asked
	Seconds      float64 `json:"seconds"`
}

// Resonance is a pole of the amplitudes at energy - i width/2.
type Resonance struct {
	Energy      float64  `json:"energy"`
	Width       float64  `json:"width"`
	Lifetime    *float64 `json:"lifetime"`
	WidthLeft   float64  `json:"width_left"`
	WidthRight  float64  `json:"width_right"`
	WidthLost   float64  `json:"width_lost"`
	EnergyError float64  `json:"energy_error"`
	WidthError  float64  `json:"width_error"`
	Shares      Series   `json:"shares"` // of the norm, layer by layer
	Elements    *Element `json:"elements"`
}

// Bound is a state below both leads. It has a width only where layers lose.
type Bound struct {
	Energy      float64  `json:"energy"`
	Width       float64  `json:"width"`
	Lifetime    *float64 `json:"lifetime"`
	EnergyError float64  `json:"energy_error"`
	Shares      Series   `json:"shares"`
	Elements    *Element `json:"elements"`
}

// Element is the same state on the complex-scaled elements of the packet road.
type Element struct {
	Energy    float64 `json:"energy"`
	Width     float64 `json:"width"`
	EnergyOff float64 `json:"energy_off"` // the difference of the energies
	WidthOff  float64 `json:"width_off"`  // the difference of the widths, over the width; 0 for a bound state
	Agrees    bool    `json:"agrees"`
}

// Resonances finds the resonances in a band of energies above the lower lead,
// and all bound states, and holds them against the elements of the packet road. The error is an
// *InputError where the band makes no sense.
func (s *Scenario) Resonances(ctx context.Context, b Band) (*Resonances, error) {
	started := time.Now()
	lead, name := s.Structure.Entry.Height, "entry"
	if s.Structure.Exit.Height < lead {
		lead, name = s.Structure.Exit.Height, "exit"
	}
	from, to, err := s.band(b, lead, name)
	if err != nil {
		return nil, err
	}
	survey, err := s.survey(ctx, from, to, lead)
	if err != nil {
		return nil, fmt.Errorf("resonances: %w", err)
	}
	out := s.listed(survey)
	if err := s.holdAgainstElements(ctx, survey, out); err != nil {
		return nil, fmt.Errorf("resonances: %w", err)
	}
	out.Seconds = time.Since(started).Seconds()
	return out, nil
}

// survey looks for widths up to that of the window, or up to the energy above
// the lead in its middle: what is wider is no resonance.
func (s *Scenario) survey(ctx context.Context, from, to, lead float64) (*stationary.Survey, error) {
	return stationary.States(ctx, s.Structure, stationary.Window{
		From: from, To: to, Widest: math.Max(to-from, (from+to)/2-lead),
	})
}

// listed brings a survey to display units.
func (s *Scenario) listed(v *stationary.Survey) *Resonances {
	u := s.Scale.Energy
	out := &Resonances{
		Format: "fluxtoll.resonances/1", Title: s.Title, Units: s.units(),
		From: v.Window.From * u, To: v.Window.To * u, Widest: v.Window.Widest * u,
		Resonances: []Resonance{}, Bound: []Bound{},
		Counted: v.Counted, CountedBound: v.CountedBound, Complete: v.Complete && v.CompleteBound, Agrees: true,
	}
	for _, r := range v.Resonances {
		out.Resonances = append(out.Resonances, Resonance{
			Energy: r.Energy * u, Width: r.Width * u, Lifetime: s.lifetime(r.Width),
			WidthLeft: r.Left * u, WidthRight: r.Right * u, WidthLost: r.Lost * u,
			EnergyError: r.EnergyError * u, WidthError: r.WidthError * u, Shares: r.Shares,
		})
	}
	for _, b := range v.Bound {
		out.Bound = append(out.Bound, Bound{
			Energy: b.Energy * u, Width: b.Width * u, Lifetime: s.lifetime(b.Width),
			EnergyError: b.EnergyError * u, Shares: b.Shares,
		})
	}
	return out
}

// lifetime is hbar over a width, nil for none.
func (s *Scenario) lifetime(width float64) *float64 {
	t := s.Scale.Time / width
	if math.IsInf(t, 0) || math.IsNaN(t) {
		return nil
	}
	return &t
}
