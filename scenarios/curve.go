package scenarios

import (
	"context"
	"errors"
	"fmt"
	"math"
	"strconv"

	"fluxtoll/potential/stationary"
)

// Series is a column of numbers; NaN stands for one without meaning, and is
// null in JSON.
type Series []float64

// MarshalJSON writes null for NaN.
func (s Series) MarshalJSON() ([]byte, error) {
	out := make([]byte, 0, 2+20*len(s))
	out = append(out, '[')
	for i, v := range s {
		if i > 0 {
			out = append(out, ',')
		}
		if math.IsNaN(v) || math.IsInf(v, 0) {
			out = append(out, "null"...)
		} else {
			out = strconv.AppendFloat(out, v, 'g', -1, 64)
		}
	}
	return append(out, ']'), nil
}

// Curve is what the stationary road says against energy, in display units. Its
// JSON is the document that `curve --json` prints.
type Curve struct {
	Format                string   `json:"format"`
	Title                 string   `json:"title"`
	Units                 Units    `json:"units"`
	Energy                Series   `json:"energy"`
	Transmission          Series   `json:"transmission"`
	Reflection            Series   `json:"reflection"`
	Loss                  Series   `json:"loss"`
	GroupDelayTransmitted Series   `json:"group_delay_transmitted"`
	GroupDelayReflected   Series   `json:"group_delay_reflected"`
	Dwell                 Series   `json:"dwell"`
	LayerDwell            []Series `json:"layer_dwell,omitempty"` // one column for each layer
	// ProbabilityError and TimeError bound, energy by energy, what rounding
	// does to the probabilities and to the times.
	ProbabilityError Series `json:"probability_error"`
	TimeError        Series `json:"time_error"`
	// Fineness is by how much straight lines between the points may miss;
	// nil where the points were given.
	Fineness   *Fineness `json:"fineness"`
	Unresolved int       `json:"unresolved"` // resonances too narrow for double precision
	Complete   bool      `json:"complete"`   // false: stopped at the limit of points
}

// Fineness is how closely straight lines follow a curve: the probabilities
// absolutely, the times relative to themselves.
type Fineness struct {
	Probability float64 `json:"probability"`
	Time        float64 `json:"time"`
}

// The fineness of an adaptive curve: half a per cent of the height of a plot.
const (
	lineProbability = 0.005
	lineTime        = 0.02
	mostCurvePoints = 50_000
)

// CurveRequest says what a curve shall hold.
type CurveRequest struct {
	Band   Band
	Points int  // evenly spaced, both ends included; 0: as many as it needs
	Layers bool // the dwell time in each layer too
}

// Curve evaluates the structure against energy, for incidence from the
// packet's side. The error is an *InputError where the band makes no sense.
func (s *Scenario) Curve(ctx context.Context, r CurveRequest) (*Curve, error) {
	near, _ := s.leads()
	from, to, err := s.band(r.Band, near.Height, s.Packet.Side.lead())
	if err != nil {
		return nil, err
	}
	solver := stationary.New(s.Structure, s.Packet.Side == FromRight)
	c := &Curve{Format: "fluxtoll.curve/1", Title: s.Title, Units: s.units(), Complete: true}
	var points []stationary.Amplitudes
	if r.Points > 0 {
		points, err = solver.Curve(ctx, evenly(from, to, r.Points))
	} else {
		c.Fineness = &Fineness{lineProbability, lineTime}
		points, c.Unresolved, err = solver.Adaptive(ctx, from, to, stationary.Fineness{
			Probability: lineProbability, Time: lineTime, Points: mostCurvePoints,
		})
		if errors.Is(err, stationary.ErrEvaluations) && len(points) > 0 {
			c.Complete, err = false, nil
		}
	}
	if err != nil {
		return nil, fmt.Errorf("curve: %w", err)
	}
	c.fill(points, s, r.Layers)
	return c, nil
}

// lead names the lead that a packet comes from.
func (s Side) lead() string {
	if s == FromRight {
		return "exit"
	}
	return "entry"
}

// evenly are n energies; one alone is the first.
func evenly(from, to float64, n int) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = from
		if i > 0 {
			out[i] = from + (to-from)*float64(i)/float64(n-1)
		}
	}
	return out
}

// fill converts the amplitudes to columns.
func (c *Curve) fill(points []stationary.Amplitudes, s *Scenario, layers bool) {
	column := func(value func(a *stationary.Amplitudes) float64) Series {
		out := make(Series, len(points))
		for i := range points {
			out[i] = value(&points[i])
		}
		return out
	}
	time := func(meaning func(*stationary.Amplitudes) bool, value func(*stationary.Amplitudes) float64) Series {
		return column(func(a *stationary.Amplitudes) float64 {
			if !meaning(a) {
				return math.NaN()
			}
			return value(a) * s.Scale.Time
		})
	}
	inside := func(*stationary.Amplitudes) bool { return s.Structure.Width() > 0 }
	c.Energy = column(func(a *stationary.Amplitudes) float64 { return a.Energy * s.Scale.Energy })
	c.Transmission = column(func(a *stationary.Amplitudes) float64 { return a.Transmission })
	c.Reflection = column(func(a *stationary.Amplitudes) float64 { return a.Reflection })
	c.Loss = column(func(a *stationary.Amplitudes) float64 { return a.Absorption })
	c.GroupDelayTransmitted = time(func(a *stationary.Amplitudes) bool { return a.SpeedOut > 0 },
		func(a *stationary.Amplitudes) float64 { return a.GroupDelayTransmitted })
	c.GroupDelayReflected = time(func(a *stationary.Amplitudes) bool { return a.Reflection > 0 },
		func(a *stationary.Amplitudes) float64 { return a.GroupDelayReflected })
	c.Dwell = time(inside, func(a *stationary.Amplitudes) float64 { return a.Dwell })
	c.ProbabilityError = column(func(a *stationary.Amplitudes) float64 { return a.ProbabilityError() })
	c.TimeError = column(func(a *stationary.Amplitudes) float64 { return a.TimeError() * s.Scale.Time })
	if layers {
		for i := range s.Structure.Layers {
			c.LayerDwell = append(c.LayerDwell, time(inside, func(a *stationary.Amplitudes) float64 { return a.LayerDwell[i] }))
		}
	}
}
