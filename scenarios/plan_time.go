package scenarios

import (
	"math"
	"slices"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// time chooses the member of the time-stepping family and the step, and
// estimates how long the run will be.
func (p *planner) time() error {
	p.Expected = p.expectedEnd(p.handled)
	lowest, highest := 1, propagate.MaxPade
	switch {
	case p.forced.Pade > 0:
		lowest, highest = p.forced.Pade, p.forced.Pade
	case p.forced.TimeStep > 0:
		lowest = highest // the step is given: the most exact member
	}
	cheapest := math.Inf(1)
	// Even members leave waves far above the band at rest (their factor tends
	// to 1, that of odd members to -1), where they are taken for part of it.
	for m := lowest; m <= highest; m += 2 {
		pade, err := propagate.NewPade(m)
		if err != nil {
			return err
		}
		dt := p.step(pade)
		if cost := float64(m) / dt; cost < cheapest {
			cheapest, p.Pade, p.TimeStep = cost, pade, dt
		}
	}
	return p.affordable()
}

// step is the longest step with which a member keeps its share of the
// tolerance. Two bounds hold: the flow through a plane, whose spectrum is as
// wide as the band, must be sampled without aliasing; and the mean times must
// be right, whose error grows as dt^(2m).
func (p *planner) step(pade propagate.Pade) float64 {
	if p.forced.TimeStep > 0 {
		return p.forced.TimeStep
	}
	dt := aliasFree / (p.High - p.Low)
	goal := shareTime * p.scenario.timeTolerance()
	for range 60 {
		if timeError(p.samples, pade, dt, p.Origin) <= goal {
			break
		}
		dt *= 0.85
	}
	for timeError(p.samples, pade, dt, p.Origin) > goal {
		dt *= 0.5
	}
	for len(p.States) > 0 && p.lateError(pade, dt) > goal {
		dt *= 0.85
	}
	return dt
}

// aliasFree is the largest product of step and band width: half of 2 pi, with
// room for what lies outside the band.
const aliasFree = 3.0

// timeError is the largest, over what is sent, transmitted and reflected, of
// the mean relative error that the step makes in a time.
func timeError(samples []sample, pade propagate.Pade, dt, origin float64) float64 {
	var sent, through, back, wSent, wThrough, wBack float64
	for _, s := range samples {
		e := math.Abs(pade.SlopeError((s.energy - origin) * dt))
		if e >= 0.5 {
			e = math.Inf(1)
		}
		for _, t := range []struct {
			sum, weight *float64
			w           float64
		}{
			{&sent, &wSent, s.weight},
			{&through, &wThrough, s.weight * s.Transmission},
			{&back, &wBack, s.weight * s.Reflection},
		} {
			if t.w > 0 {
				*t.sum += t.w * e
				*t.weight += t.w
			}
		}
	}
	worst := sent / wSent
	if wThrough > leastPart {
		worst = math.Max(worst, through/wThrough)
	}
	if wBack > leastPart {
		worst = math.Max(worst, back/wBack)
	}
	return worst
}

// expectedEnd estimates when no more than the tail's share will be left: the
// slowest samples that carry that much, or the longest-lived resonance. What
// the taken resonances hold is not waited for.
func (p *planner) expectedEnd(taken []stationary.Pole) float64 {
	fraction := shareTail * p.scenario.Tolerance
	end, held := 0.0, 0.0
	for _, s := range p.samples {
		held += s.weight
		if held < fraction || s.SpeedIn == 0 {
			continue
		}
		s.forgetDelays(taken)
		pass := 2 * clearance(fraction) * p.scenario.Packet.Length / s.SpeedIn
		back := (p.start+p.geometry.near)/s.SpeedIn + s.GroupDelayReflected
		end = math.Max(end, pass+back)
		if s.SpeedOut > 0 && s.weight*s.Transmission > fraction {
			end = math.Max(end, pass+p.start/s.SpeedIn+p.geometry.far/s.SpeedOut+s.GroupDelayTransmitted)
		}
	}
	for _, r := range p.averages.Resonances {
		if slices.Contains(taken, r) {
			continue
		}
		if held := p.heldBy(r.Energy, r.Width); held > fraction {
			end = math.Max(end, p.start+math.Log(held/fraction)/r.Width)
		}
	}
	return end
}

// heldBy estimates the part of the packet that a resonance catches: the
// spectrum's density at its energy times its width.
func (p *planner) heldBy(energy, width float64) float64 {
	if energy <= p.near.Height {
		return 0
	}
	k := math.Sqrt(2 * p.near.Mass * (energy - p.near.Height))
	packet := p.scenario.Packet
	d := (k - packet.K0) * packet.Length
	density := math.Sqrt(2/math.Pi) * packet.Length * math.Exp(-2*d*d) * p.near.Mass / k
	return math.Min(1, density*width*math.Pi/2)
}

// affordable refuses a run that would exceed the limits.
func (p *planner) affordable() error {
	end := p.Expected
	if p.forced.StopTime > 0 {
		end = p.forced.StopTime
	}
	steps := end / p.TimeStep
	p.MostSteps = p.forced.Steps
	if steps > float64(p.MostSteps) {
		return &LimitError{"time steps", steps, float64(p.MostSteps), "--max-steps"}
	}
	if p.forced.Limits.Steps != DefaultSteps {
		return nil
	}
	each := float64(p.Pade.Member * p.Mesh.Nodes())
	if work := steps * each; work > defaultWork {
		return &LimitError{"node solves", work, defaultWork, "--max-steps"}
	}
	p.MostSteps = min(p.MostSteps, int(math.Max(defaultWork/each, 1)))
	return nil
}
