package propagate

import (
	"context"
	"math"
)

// Ending decides when a run is over.
type Ending struct {
	Steps int     // at most this many steps, but always one
	Time  float64 // and no step after this time
	// Settled is asked now and then: is what remains between the planes
	// negligible? remaining is that probability, lifetime the time in which
	// it now falls by a factor e (+Inf where it does not fall). A nil
	// Settled is never content.
	Settled func(l *Ledger, remaining, lifetime float64) bool
	// Slow, if not nil, is asked after Settled: is what remains so little
	// that the run may go on in longer steps (Stepper.Lengthen)?
	Slow func(l *Ledger, remaining, lifetime float64) bool
	// States, if any, are eigenstates that the run need not wait for: what
	// remains, and what Settled is asked about, is then what they do not
	// span; and a run that is settled is finished by their Tail.
	States []*Eigenstate
	// Watch, if not nil, is called after every step.
	Watch func(l *Ledger)
}

// checkEvery is how many steps lie between two looks at what remains.
const checkEvery = 4

// fadeOfLook is the part of a peak that is remembered from one look to the next:
// what a look finds may by chance be between two crests.
const fadeOfLook = 0.25

// look is what the last look at the probability between the planes found.
type look struct {
	Remaining float64 // that probability
	Lifetime  float64 // time in which it fell by a factor e; +Inf where it did not fall
	Flow      float64 // Ledger.FlowPeak, but for what the states send
	Cross     float64 // interference of what remains with the states, see Tail.Cross; its peak of late
	time      float64
	tail      *Tail // of a settled run
	owed      *Tail // what changes of the step leave to be added to the times of a tail
}

// firstLook is the look before any was taken.
func firstLook() look { return look{Remaining: 1, Lifetime: math.Inf(1)} }

// next is the look that finds remaining at a time after the last one. At the
// same time nothing can be said about the fall, and the last look stands.
func (l look) next(remaining, time float64) look {
	if time == l.time {
		return l
	}
	n := look{Remaining: remaining, Lifetime: math.Inf(1), Flow: l.Flow, Cross: l.Cross, time: time, owed: l.owed}
	if remaining < l.Remaining {
		n.Lifetime = (time - l.time) / math.Log(l.Remaining/remaining)
	}
	return n
}

// Run is a stepper on its way to the end. Remaining and Lifetime are what the
// last look found.
type Run struct {
	*Stepper
	look
	ending   Ending
	splitter *splitter // nil without States
}

// NewRun sets a stepper on its way.
func NewRun(s *Stepper, e Ending) *Run {
	r := &Run{Stepper: s, ending: e, look: firstLook()}
	if len(e.States) > 0 {
		r.splitter = newSplitter(s.Mesh, e.States)
	}
	return r
}

// Next takes one step and says whether the run is over. A run that is settled
// when it meets a limit counts as settled.
func (r *Run) Next() Status {
	r.Advance()
	l := r.Ledger()
	if r.ending.Watch != nil {
		r.ending.Watch(l)
	}
	limit := r.limit()
	if l.Steps%checkEvery == 0 || limit != Running {
		r.inspect()
		if r.ending.Settled != nil && r.ending.Settled(l, r.Remaining, r.Lifetime) {
			r.finish()
			return Settled
		}
		if r.ending.Slow != nil && r.ending.Slow(l, r.Remaining, r.Lifetime) {
			r.lengthen()
		}
	}
	return limit
}

// limit is the limit that the run has reached, or Running.
func (r *Run) limit() Status {
	switch l := r.Ledger(); {
	case l.Steps >= r.ending.Steps:
		return StepLimit
	case l.Time >= r.ending.Time:
		return TimeLimit
	}
	return Running
}

// inspect looks at what remains and how fast it falls.
func (r *Run) inspect() {
	l := r.Ledger()
	if r.splitter == nil {
		r.look = r.next(r.Inside(), l.Time)
		r.Flow = l.FlowPeak
		return
	}
	r.splitter.split(r.psi)
	rest, cross := r.splitter.remaining()
	flow := math.Max(
		math.Abs(l.FlowLeft-r.splitter.flow(r.stepping(), false)),
		math.Abs(l.FlowRight-r.splitter.flow(r.stepping(), true)),
	)
	r.look = r.next(rest, l.Time)
	r.Flow = math.Max(flow, fadeOfLook*r.Flow)
	r.Cross = math.Max(cross, fadeOfLook*r.Cross)
}

// lengthen is Lengthen, after the look just taken; with states, for what they do
// not span. Their part of the sums of times goes on as in the steps before,
// whatever the step is from now on: the difference is kept until the tail is
// made.
func (r *Run) lengthen() {
	if r.splitter == nil {
		r.Lengthen()
		return
	}
	before := r.continued()
	if !r.lengthenFor(r.splitter.rest) {
		return
	}
	time := r.Ledger().Time
	r.owed = r.splitter.tail(time, before).less(r.splitter.tail(time, r.stepping())).plus(r.owed)
}

// continued is how the steps so far are to be continued: exactly, or, after a
// change of the step, as was reckoned with then.
func (r *Run) continued() stepping {
	s := r.stepping()
	s.exact = r.owed == nil
	return s
}

// finish makes the tail of the look just taken.
func (r *Run) finish() {
	if r.splitter != nil {
		r.tail = r.splitter.tail(r.Ledger().Time, r.continued()).plus(r.owed)
	}
}

// Tail is what the states of a settled run still do after its last step; nil
// for a run without states, or one that has not settled.
func (r *Run) Tail() *Tail { return r.tail }

// Booked is the ledger with the tail, if there is one.
func (r *Run) Booked() *Ledger {
	l := r.Ledger()
	if r.tail == nil {
		return l
	}
	c := l.Clone()
	c.Left, c.Right = c.Left.Plus(r.tail.Left), c.Right.Plus(r.tail.Right)
	for i := range c.Lost {
		c.Lost[i] += r.tail.Lost[i]
		c.Dwell[i] += r.tail.Dwell[i]
	}
	return &c
}

// Trapped is the probability that is left between the planes, after the tail
// if there is one.
func (r *Run) Trapped() float64 {
	if r.tail == nil {
		return r.Inside()
	}
	return r.tail.Trapped()
}

// Finish steps until the run is over or the context is done.
func (r *Run) Finish(ctx context.Context) Status {
	for {
		if ctx.Err() != nil {
			r.inspect()
			return Interrupted
		}
		if status := r.Next(); status != Running {
			return status
		}
	}
}

// Save copies the present moment of the run.
func (r *Run) Save() State {
	s := r.Stepper.Save()
	s.look = r.look
	return s
}

// Restore goes back (or on) to a moment saved by Save of this run. What
// follows, the step at which the run ends included, is bit for bit what
// followed then.
func (r *Run) Restore(at State) {
	r.Stepper.Restore(at)
	r.look = at.look
}
