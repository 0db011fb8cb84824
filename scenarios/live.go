package scenarios

import (
	"math"

	"fluxtoll/propagate"
)

// Live is a trial that is looked at while it runs, forwards and backwards.
// Its clock ticks more often than the run steps: between two steps a second
// stepper of shorter step shows what lies between, started anew from each
// step, so that the numbers of the run do not depend on being looked at.
//
// A Live belongs to one goroutine.
type Live struct {
	Trial   *Trial
	Outlook *Outlook
	between *Trial // the trial with the stepper of shorter step; Trial itself where a tick is a step
	ticks   int    // to a step
	tick    int    // now, from 0
	reached int    // the latest tick so far
	status  propagate.Status
	ended   int // tick at which the run ended, or -1
	past    snapshots
	history history
	sampler *propagate.Sampler
	profile profile
}

// The clock is made so that what there is to see lasts about this many ticks,
// or as many as there are steps, if these are more, or if the grid is so large
// that a tick would cost too much.
const (
	ticksPerRun  = 1440
	ticksPerStep = 48
	finestNodes  = 20000
)

// NewLive prepares a trial to be looked at. A trial whose packet road was
// refused has an Outlook and nothing else: Ended is true from the start.
func NewLive(t *Trial) (*Live, error) {
	l := &Live{Trial: t, between: t, ticks: 1, ended: -1, Outlook: newOutlook(t)}
	if t.Run == nil {
		l.ended = 0
		return l, nil
	}
	l.sampler = propagate.NewSampler(t.Plan.Mesh)
	l.past = newSnapshots(t.Run.Save().Bytes())
	if err := l.refine(); err != nil {
		return nil, err
	}
	l.past.keep(0, t.Run)
	return l, nil
}

// refine makes the stepper of shorter step, where there is to be one.
func (l *Live) refine() error {
	p := l.Trial.Plan
	steps := math.Max(1, l.Outlook.Event/l.Trial.Scenario.Scale.Time/p.TimeStep)
	if p.Mesh.Nodes() <= finestNodes {
		l.ticks = int(math.Min(ticksPerStep, math.Max(1, math.Round(ticksPerRun/steps))))
	}
	if l.ticks == 1 {
		return nil
	}
	fine := *l.Trial
	stepper, err := propagate.NewStepper(p.Mesh, p.Pade, p.TimeStep/float64(l.ticks), p.Origin, l.Trial.packet())
	if err != nil {
		return err
	}
	fine.Run = propagate.NewRun(stepper, propagate.Ending{Steps: math.MaxInt, Time: math.Inf(1)})
	l.between = &fine
	l.align()
	return nil
}

// align puts the finer stepper on the present step of the run.
func (l *Live) align() {
	if l.between == l.Trial {
		return
	}
	l.between.Run.Restore(l.Trial.Run.Save())
	l.between.Run.Ledger().Steps *= l.ticks
}

// packet is the packet at t = 0, as the packet road takes it.
func (t *Trial) packet() propagate.Packet {
	k0 := t.Scenario.Packet.K0
	if t.Plan.side == FromRight {
		k0 = -k0
	}
	return propagate.Packet{Centre: t.Plan.at(t.Plan.start), Length: t.Scenario.Packet.Length, K0: k0}
}

// Tick moves on by one tick and reports whether the run goes on. At the end
// of the run it does nothing.
func (l *Live) Tick() bool {
	if l.Ended() {
		return false
	}
	far, near := l.advance()
	l.tick++
	if l.tick > l.reached {
		l.reached = l.tick
		l.history.add(l.tick-1, near, far)
	}
	if l.tick%l.ticks == 0 && l.status != propagate.Running {
		l.ended = l.tick
	}
	return !l.Ended()
}

// advance moves on and returns the flow per time through both planes.
func (l *Live) advance() (far, near float64) {
	if l.between != l.Trial {
		l.between.Run.Advance()
	}
	if (l.tick+1)%l.ticks == 0 {
		l.step()
	}
	ledger := l.between.Run.Ledger()
	near, far = ledger.FlowLeft, ledger.FlowRight
	if l.Trial.Plan.side == FromRight {
		near, far = far, near
	}
	if (l.tick+1)%l.ticks == 0 {
		l.align()
	}
	return far, near
}

// step takes one step of the run itself.
func (l *Live) step() {
	l.status = l.Trial.Run.Next()
	l.past.keep(l.Trial.Run.Ledger().Steps, l.Trial.Run)
}

// Back goes back to a tick that was reached before: to the nearest moment
// kept, and from there by the same steps as before.
func (l *Live) Back(tick int) {
	if l.Trial.Run == nil {
		return
	}
	tick = max(0, min(tick, l.reached))
	step := tick / l.ticks
	if here := l.Trial.Run.Ledger().Steps; step < here || l.past.nearest(step) > here {
		l.past.restore(step, l.Trial.Run)
		l.status = propagate.Running
	}
	for l.Trial.Run.Ledger().Steps < step {
		l.status = l.Trial.Run.Next()
	}
	l.align()
	for range tick - step*l.ticks {
		l.between.Run.Advance()
	}
	l.tick, l.ended = tick, -1
	if l.status != propagate.Running {
		l.ended = tick
	}
}

// Now is the present tick, Reached the latest that Back can go to.
func (l *Live) Now() int { return l.tick }

// Reached is the latest tick so far.
func (l *Live) Reached() int { return l.reached }

// PerStep is the number of ticks in a step of the run.
func (l *Live) PerStep() int { return l.ticks }

// Ended reports whether the run is over at the present tick.
func (l *Live) Ended() bool { return l.ended >= 0 && l.tick >= l.ended }

// TickTime is the length of a tick in display units.
func (l *Live) TickTime() float64 {
	if l.Trial.Plan == nil {
		return 0
	}
	return l.Trial.Plan.TimeStep / float64(l.ticks) * l.Trial.Scenario.Scale.Time
}

// Expected is the tick at which the run is expected to end.
func (l *Live) Expected() int { return l.tickAt(l.Outlook.Duration) }

// Event is the tick at which what can be seen is over.
func (l *Live) Event() int { return l.tickAt(l.Outlook.Event) }

// tickAt is the last tick up to a time in display units.
func (l *Live) tickAt(time float64) int {
	if tick := l.TickTime(); tick > 0 {
		return int(math.Min(time/tick, math.MaxInt32))
	}
	return 0
}

// Contact is the tick of the first contact: when the front of the free
// packet, two standard deviations before its centre, reaches the structure.
func (l *Live) Contact() int { return l.tickAt(l.Outlook.Contact) }

// Kept is the number of moments kept for going back, and the memory they
// take. It is at most MostKept and MostKeptBytes (or four moments).
func (l *Live) Kept() (moments, bytes int) { return l.past.size() }

// Result is that of the run, as it stands; once Ended it is what Trial.Finish
// returns for the same scenario. Before, a mean arrival is given as soon as a
// thousandth of what is to arrive has, and a group delay when next to all has:
// earlier they are means over nothing, or over the front alone.
func (l *Live) Result() *Result {
	if l.Ended() {
		return l.Trial.Result(l.status)
	}
	r := l.between.Result(propagate.Running)
	passed := l.between.ledger()
	for i := range r.Quantities {
		q := &r.Quantities[i]
		switch q.Name {
		case "arrival_transmitted":
			q.veil(passed.Transmitted < 1e-3*l.Outlook.Predicted.Transmitted)
		case "arrival_reflected":
			q.veil(passed.Reflected < 1e-3*l.Outlook.Predicted.Reflected)
		case "group_delay_transmitted":
			q.veil(passed.Transmitted < 0.99*l.Outlook.Predicted.Transmitted)
		case "group_delay_reflected":
			q.veil(passed.Reflected < 0.99*l.Outlook.Predicted.Reflected)
		}
	}
	return r
}

// veil takes back what was measured, where that means nothing yet.
func (q *Measure) veil(empty bool) {
	if empty {
		q.Packet, q.Difference = nil, nil
	}
}
