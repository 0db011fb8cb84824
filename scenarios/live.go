package scenarios

import (
	"math"

	"fluxtoll/propagate"
)

// Live is a trial that is looked at while it runs, forwards and backwards.
// Its clock ticks more often than the run steps: between two steps a second
// stepper of shorter step shows what lies between, started anew from each
// step, so that the numbers of the run do not depend on being looked at. Once
// there is nothing more to see, or the run lengthens its steps because next to
// nothing is left, a tick is a step.
//
// A Live belongs to one goroutine.
type Live struct {
	Trial   *Trial
	Outlook *Outlook
	between *Trial // the trial with the stepper of shorter step; Trial itself where a tick is a step
	ticks   int    // to a step of the first length
	tick    int    // now, from 0
	reached int    // the latest tick so far
	latest  float64
	long    int // step after which a tick is a step; MaxInt until that is known
	status  propagate.Status
	end     end
	past    snapshots
	history history
	sampler *propagate.Sampler
	profile profile
}

// end is the step at which the run ended, and why.
type end struct {
	step   int
	status propagate.Status // Running: not yet known
}

// at is the status at a step.
func (e end) at(step int) propagate.Status {
	if step == e.step {
		return e.status
	}
	return propagate.Running
}

// The clock is made so that what there is to see lasts about this many ticks,
// or as many as there are steps, if these are more, or if the grid is so large
// that a tick would cost too much.
const (
	ticksPerRun  = 1440
	ticksPerStep = 48
	finestNodes  = 20000
	finest       = 1.25 // times the duration of what can be seen
)

// NewLive prepares a trial to be looked at. A trial whose packet road was
// refused has an Outlook and nothing else: Ended is true from the start.
func NewLive(t *Trial) (*Live, error) {
	l := &Live{Trial: t, between: t, ticks: 1, long: math.MaxInt, Outlook: newOutlook(t)}
	if t.Run == nil {
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
	stepper, err := propagate.NewStepper(p.Mesh, p.Pade, p.TimeStep/float64(l.ticks), p.Origin, p.packet())
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
	if l.between != l.Trial {
		l.between.Run.Follow(l.Trial.Run.Stepper)
	}
}

// stepOf is the step at or before a tick, and how many ticks lie between.
func (l *Live) stepOf(tick int) (step, rest int) {
	if step = tick / l.ticks; step < l.long {
		return step, tick % l.ticks
	}
	return l.long + tick - l.long*l.ticks, 0
}

// tickOf is the tick of a step.
func (l *Live) tickOf(step int) int {
	if step <= l.long {
		return step * l.ticks
	}
	return l.long*l.ticks + step - l.long
}

// whole reports whether the next tick completes a step of the run.
func (l *Live) whole() bool {
	step, rest := l.stepOf(l.tick)
	return step >= l.long || rest == l.ticks-1
}

// Tick moves on by one tick and reports whether the run goes on. At the end
// of the run it does nothing.
func (l *Live) Tick() bool {
	if l.Ended() {
		return false
	}
	before := l.time()
	near, far := l.advance()
	l.tick++
	if l.tick > l.reached {
		l.reached, l.latest = l.tick, l.time()
		l.history.add(l.time(), near*(l.time()-before), far*(l.time()-before), l.Trial.Run.Ledger().Steps <= l.long)
	}
	return !l.Ended()
}

// advance moves on and returns the flow per time through both planes.
func (l *Live) advance() (near, far float64) {
	shown := l.between.Run
	whole := l.whole()
	if step, _ := l.stepOf(l.tick); step >= l.long {
		shown = l.Trial.Run
	} else if l.between != l.Trial {
		shown.Advance()
	}
	if whole {
		l.step()
	}
	near, far = shown.Ledger().FlowLeft, shown.Ledger().FlowRight
	if whole {
		l.align()
	}
	if l.Trial.Plan.side == FromRight {
		near, far = far, near
	}
	return near, far
}

// step takes one step of the run itself.
func (l *Live) step() {
	run := l.Trial.Run
	l.status = run.Next()
	l.past.keep(run.Ledger().Steps, run)
	if l.status != propagate.Running {
		l.end = end{run.Ledger().Steps, l.status}
	}
	if run.Step != l.Trial.Plan.TimeStep || run.Ledger().Time*l.Trial.Scenario.Scale.Time > finest*l.Outlook.Event {
		l.long = min(l.long, run.Ledger().Steps)
	}
}

// Back goes back to a tick that was reached before: to the nearest moment
// kept, and from there by the same steps as before.
func (l *Live) Back(tick int) {
	if l.Trial.Run == nil {
		return
	}
	tick = max(0, min(tick, l.reached))
	step, rest := l.stepOf(tick)
	if here := l.Trial.Run.Ledger().Steps; step < here || l.past.nearest(step) > here {
		l.past.restore(step, l.Trial.Run)
	}
	for l.Trial.Run.Ledger().Steps < step {
		l.Trial.Run.Next()
	}
	l.status = l.end.at(step)
	l.align()
	for range rest {
		l.between.Run.Advance()
	}
	l.tick = tick
}

// BackTo goes back to the last tick not after a time, in display units.
func (l *Live) BackTo(time float64) {
	if l.Trial.Run == nil {
		return
	}
	time = time/l.Trial.Scenario.Scale.Time*(1+1e-12) + 1e-12*l.Trial.Plan.TimeStep
	l.Back(l.tickOf(l.past.before(time)))
	for l.tick < l.reached {
		l.advance()
		if l.tick++; l.time() > time {
			l.Back(l.tick - 1)
			return
		}
	}
}

// Now is the present tick, Reached the latest that Back can go to.
func (l *Live) Now() int { return l.tick }

// Reached is the latest tick so far.
func (l *Live) Reached() int { return l.reached }

// PerStep is the number of ticks in a step of the run.
func (l *Live) PerStep() int { return l.ticks }

// Latest is the time of that tick, in display units.
func (l *Live) Latest() float64 { return l.latest * l.Trial.Scenario.Scale.Time }

// Time is the present time, in display units.
func (l *Live) Time() float64 { return l.time() * l.Trial.Scenario.Scale.Time }

// time is the present time in internal units.
func (l *Live) time() float64 {
	if l.Trial.Run == nil {
		return 0
	}
	return l.between.Run.Ledger().Time
}

// Ended reports whether the run is over at the present tick.
func (l *Live) Ended() bool { return l.Trial.Run == nil || l.status != propagate.Running }

// TickTime is the length of a tick in display units, for as long as there is
// something to see.
func (l *Live) TickTime() float64 {
	if l.Trial.Plan == nil {
		return 0
	}
	return l.Trial.Plan.TimeStep / float64(l.ticks) * l.Trial.Scenario.Scale.Time
}

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
