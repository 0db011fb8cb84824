package scenarios

import (
	"context"
	"errors"
	"fmt"
	"math"
	"time"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// Trial is one scenario on both roads. Prepare takes the stationary road and
// plans the packet road; Finish (or stepping Run) takes the packet road;
// Result compares them.
type Trial struct {
	Scenario  *Scenario
	Averages  *stationary.Averages
	PlaneWave stationary.Amplitudes // at the packet's mean energy
	Plan      *Plan                 // nil where the packet road was refused
	Run       *propagate.Run        // likewise
	Refused   error                 // why it was refused: a *LimitError
	started   time.Time
	forced    Forced
	beyond    stationary.Mean   // time that a closed far lead takes back, see stationary.Solver.Beyond
	unsettled error             // the averages' own complaint, if any
	slow      errorSet          // the tail when the step was first allowed to grow
	record    *propagate.Record // what passed the planes, step by step
}

// Prepare computes the plane-wave and average columns and plans the packet
// road. A packet road that would exceed a limit is refused: Refused says so,
// and the other two columns stand.
func Prepare(ctx context.Context, s *Scenario, forced Forced) (*Trial, error) {
	t := &Trial{Scenario: s, forced: forced, started: time.Now()}
	solver := stationary.New(s.Structure, s.Packet.Side == FromRight)
	if err := solver.At(s.Packet.Energy, &t.PlaneWave); err != nil {
		return nil, fmt.Errorf("plane wave: %w", err)
	}
	spectrum := stationary.Spectrum{K0: s.Packet.K0, Width: 1 / (2 * s.Packet.Length)}
	relative := math.Max(1e-13, math.Min(1e-10, 1e-3*s.Tolerance))
	averages, err := solver.Average(ctx, spectrum, stationary.Options{
		Relative: relative, MaxEvaluations: evaluations(solver.Work(s.Packet.Energy)),
	})
	if averages == nil {
		return nil, fmt.Errorf("average: %w", err)
	}
	if ctx.Err() != nil {
		return nil, ctx.Err()
	}
	t.Averages, t.unsettled = averages, err
	if t.beyond, err = solver.Beyond(spectrum, s.farDistance()); err != nil {
		return nil, fmt.Errorf("average: %w", err)
	}
	if err := t.plan(); err != nil {
		var limit *LimitError
		if !errors.As(err, &limit) {
			return nil, err
		}
		t.Plan, t.Refused = nil, err
	}
	return t, nil
}

// evaluations bounds the energies of the averages by the work that each makes:
// to about a minute, but to 200,000 at most and to 500 at least.
func evaluations(work float64) int {
	const most, least, minute = 200_000, 500, 3e8 // flat layers crossed
	return int(math.Max(least, math.Min(most, minute/work)))
}

// plan makes the plan and the run.
func (t *Trial) plan() error {
	var err error
	if t.Plan, err = newPlan(t.Scenario, t.Averages, t.beyond, t.forced); err != nil {
		return err
	}
	p := t.Plan
	stepper, err := propagate.NewStepper(p.Mesh, p.Pade, p.TimeStep, p.Origin, p.packet())
	if err != nil {
		return err
	}
	t.Run = propagate.NewRun(stepper, t.ending())
	t.record = t.Run.Record()
	return nil
}

// ending ends the run when what remains is below its share of the budget.
func (t *Trial) ending() propagate.Ending {
	e := propagate.Ending{
		Steps: t.Plan.MostSteps, Time: math.Inf(1),
		Settled: func(l *propagate.Ledger, remaining, lifetime float64) bool {
			tail := t.tail(l, remaining, lifetime)
			return tail.of(t.Scenario, t.Averages, t.means()) <= shareTail
		},
	}
	if t.forced.StopTime == 0 {
		e.States = t.Plan.States
	}
	if t.forced.TimeStep == 0 {
		e.Slow = t.mayLengthen
	}
	if t.forced.StopTime > 0 {
		e.Time = t.forced.StopTime
		settled := e.Settled
		e.Settled = func(l *propagate.Ledger, remaining, lifetime float64) bool {
			return l.Time >= t.forced.StopTime && settled(l, remaining, lifetime)
		}
	}
	return e
}

// Once the tail is within slowFrom times its tolerance the step may grow. Of
// what remains then, a part of at most lengthened has energies so far off that
// longer steps misplace it in time.
const (
	slowFrom   = 10
	lengthened = 0.01
)

// mayLengthen reports whether what remains is little enough for longer steps.
func (t *Trial) mayLengthen(l *propagate.Ledger, remaining, lifetime float64) bool {
	tail := t.tail(l, remaining, lifetime)
	if tail.of(t.Scenario, t.Averages, t.means()) > slowFrom {
		return false
	}
	if t.slow == (errorSet{}) {
		t.slow = tail
	}
	return true
}

// Finish runs the packet road to its end, telling progress now and then, and
// returns the result. A done context ends the run where it is.
func (t *Trial) Finish(ctx context.Context, progress func(Progress)) *Result {
	if t.Run == nil {
		return t.Result(propagate.Running)
	}
	status := propagate.Running
	began, told := time.Now(), time.Now()
	for status == propagate.Running {
		if ctx.Err() != nil {
			return t.Result(propagate.Interrupted)
		}
		status = t.Run.Next()
		if progress != nil && time.Since(told) > 100*time.Millisecond {
			told = time.Now()
			progress(t.progress(time.Since(began)))
		}
	}
	return t.Result(status)
}

// Progress is how far a run is.
type Progress struct {
	Fraction float64 // of the expected duration, at most 1
	Left     time.Duration
	Ledger   Ledger
}

func (t *Trial) progress(spent time.Duration) Progress {
	f := math.Min(1, t.Run.Ledger().Time/t.Plan.Expected)
	return Progress{
		Fraction: f,
		Left:     time.Duration(float64(spent) * (1 - f) / math.Max(f, 1e-3)),
		Ledger:   t.ledger(),
	}
}
