package propagate

import (
	"context"
	"math"
)

// Status says why a run ended.
type Status int

// The ends of a run.
const (
	Running Status = iota
	Settled
	StepLimit
	TimeLimit
	Interrupted
)

func (s Status) String() string {
	switch s {
	case Running:
		return "running"
	case Settled:
		return "settled"
	case StepLimit:
		return "step limit"
	case TimeLimit:
		return "time limit"
	case Interrupted:
		return "interrupted"
	}
	return "unknown"
}

// Ending decides when a run is over.
type Ending struct {
	Steps int     // at most this many steps
	Time  float64 // and at most this long
	// Settled is asked now and then: is what remains between the planes
	// negligible? remaining is that probability, lifetime the time in which
	// it now falls by a factor e (+Inf where it does not fall).
	Settled func(l *Ledger, remaining, lifetime float64) bool
	// Watch, if not nil, is called after every step.
	Watch func(l *Ledger)
}

// checkEvery is how many steps lie between two looks at what remains.
const checkEvery = 4

// Run is a stepper on its way to the end.
type Run struct {
	*Stepper
	ending    Ending
	before    float64 // what remained at the last look
	Remaining float64
	Lifetime  float64
}

// NewRun sets a stepper on its way.
func NewRun(s *Stepper, e Ending) *Run {
	return &Run{Stepper: s, ending: e, before: 1, Remaining: 1, Lifetime: math.Inf(1)}
}

// Next takes one step and says whether the run is over.
func (r *Run) Next() Status {
	r.Advance()
	l := r.Ledger()
	if r.ending.Watch != nil {
		r.ending.Watch(l)
	}
	over := l.Steps >= r.ending.Steps || l.Time >= r.ending.Time
	if l.Steps%checkEvery == 0 || over {
		r.look()
		if r.ending.Settled(l, r.Remaining, r.Lifetime) {
			return Settled
		}
	}
	switch {
	case l.Steps >= r.ending.Steps:
		return StepLimit
	case l.Time >= r.ending.Time:
		return TimeLimit
	}
	return Running
}

// look measures what remains and how fast it falls.
func (r *Run) look() {
	r.Remaining = r.Inside()
	r.Lifetime = math.Inf(1)
	if r.Remaining < r.before {
		r.Lifetime = checkEvery * r.Step / math.Log(r.before/r.Remaining)
	}
	r.before = r.Remaining
}

// Finish steps until the run is over or the context is done.
func (r *Run) Finish(ctx context.Context) Status {
	for {
		if ctx.Err() != nil {
			r.look()
			return Interrupted
		}
		if status := r.Next(); status != Running {
			return status
		}
	}
}
