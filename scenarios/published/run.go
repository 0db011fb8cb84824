package published

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"

	"fluxtoll/potential/stationary"
	"fluxtoll/scenarios"
)

// Outcome is one number that was found.
type Outcome struct {
	Case       string   `json:"case"`
	Source     string   `json:"source"`
	FromMemory bool     `json:"from_memory"`
	Quantity   string   `json:"quantity"`
	Road       Road     `json:"road"`
	Unit       string   `json:"unit"`
	Expected   float64  `json:"expected"`
	Found      *float64 `json:"found"` // nil: there is none
	Error      *float64 `json:"error"` // found - expected
	Allowed    float64  `json:"allowed"`
	Pass       bool     `json:"pass"`
}

// Run computes a case and returns an outcome for each check and road. The
// error says that the case could not be computed at all.
func (c Case) Run(ctx context.Context) ([]Outcome, error) {
	a, err := c.answers(ctx)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", c.Name, err)
	}
	var out []Outcome
	for _, check := range c.Checks {
		for _, road := range check.Roads {
			out = append(out, c.compare(check, road, a))
		}
	}
	return out, nil
}

// compare makes the outcome of one check on one road.
func (c Case) compare(check Check, road Road, a *answers) Outcome {
	o := Outcome{
		Case: c.Name, Source: c.Source, FromMemory: c.FromMemory, Quantity: check.Quantity, Road: road,
		Expected: check.Expected, Allowed: check.allowed(road, a.measure(check.Quantity)),
	}
	switch {
	case check.isOfState():
		o.Unit = a.scenario.Scale.EnergyUnit
	case !check.isProbability():
		o.Unit = a.scenario.Scale.TimeUnit
	}
	found, ok := a.value(check.Quantity, road)
	if !ok || math.IsNaN(found) || math.IsInf(found, 0) {
		return o
	}
	off := found - check.Expected
	o.Found, o.Error, o.Pass = &found, &off, math.Abs(off) <= o.Allowed
	return o
}

// answers is what the roads say about a case.
type answers struct {
	scenario *scenarios.Scenario
	plane    stationary.Amplitudes
	trial    *scenarios.Trial      // nil where only the plane wave is asked for
	result   *scenarios.Result     // likewise
	states   *scenarios.Resonances // nil unless asked for
}

// answers takes the roads that the checks ask for.
func (c Case) answers(ctx context.Context) (*answers, error) {
	file, err := scenarios.Read(c.Name, strings.NewReader(c.Scenario), nil)
	if err != nil {
		return nil, err
	}
	a := &answers{}
	if a.scenario, err = file.Compile(); err != nil {
		return nil, err
	}
	s := a.scenario
	if c.asks(States, Elements) {
		if a.states, err = s.Resonances(ctx, scenarios.Band{}); err != nil {
			return nil, err
		}
	}
	solver := stationary.New(s.Structure, s.Packet.Side == scenarios.FromRight)
	if err := solver.At(s.Packet.Energy, &a.plane); err != nil || !c.asks(Average, Packet) {
		return a, err
	}
	if a.trial, err = scenarios.Prepare(ctx, s, scenarios.Forced{}); err != nil {
		return nil, err
	}
	if !c.asks(Packet) {
		return a, nil
	}
	a.result = a.trial.Finish(ctx, nil)
	return a, ctx.Err()
}

// asks reports whether any check needs one of the roads.
func (c Case) asks(roads ...Road) bool {
	return slices.ContainsFunc(c.Checks, func(check Check) bool {
		return slices.ContainsFunc(roads, func(r Road) bool { return slices.Contains(check.Roads, r) })
	})
}
