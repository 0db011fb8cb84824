package scenarios

import (
	"cmp"
	"context"
	"errors"
	"fmt"
	"math"
	"runtime"
	"slices"
	"sync"
	"time"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// TrustRun is a packet run that confirms one number at one length.
type TrustRun struct {
	Name         string   `json:"name"` // of the quantity
	Unit         string   `json:"unit"`
	At           string   `json:"at"` // which of the lengths it is
	Length       float64  `json:"length"`
	Spread       float64  `json:"spread"`
	Average      *float64 `json:"average"`
	AverageError *float64 `json:"average_error"`
	Packet       *float64 `json:"packet"`
	Budget       *float64 `json:"budget"`
	OffAverage   *float64 `json:"off_average"` // from the plane wave, per cent
	OffPacket    *float64 `json:"off_packet"`
	OffBudget    *float64 `json:"off_budget"`
	Expected     Standing `json:"expected"`
	Found        Standing `json:"found"`             // by the packet, within the run's budget; empty where there is none
	Tolerance    float64  `json:"tolerance"`         // of the run
	Verdict      Verdict  `json:"verdict"`           // of the run on this quantity; Disagrees where any of its quantities does
	Refused      string   `json:"refused,omitempty"` // why there is no packet
	Seconds      float64  `json:"seconds"`
}

// contradicts reports whether the packet found what was not expected, by more
// than its budget.
func (r TrustRun) contradicts() bool {
	return r.Found != "" && r.Verdict != Incomplete && r.Found != r.Expected && r.Found != StandsAtLimit
}

// undecided reports whether the packet could not tell.
func (r TrustRun) undecided() bool {
	return r.Found == "" || r.Found != r.Expected && r.Found == StandsAtLimit
}

// The lengths of the runs.
const (
	atGiven    = "as given"
	atBelow    = "below"
	atAnswer   = "from there"
	atAbove    = "above"
	atShortest = "shortest"
)

// visit is one number to confirm at one length.
type visit struct {
	number   int
	at       string
	length   float64 // internal
	expected Standing
	slack    float64 // of the deviation there, a fraction
}

// visits lists what is to be run for a number: the packet as given, and the
// answer with both sides of it, or the shortest length.
func (t *trustSearch) visits(number int, a answer) ([]visit, error) {
	list := []visit{{number, atGiven, t.scenario.Packet.Length, t.standing(t.numbers[number].off(t.given)), 0}}
	switch a.reach {
	case ReachedEverywhere:
		list = append(list, visit{number, atShortest, math.Exp(t.lo), StandsWithin, 0})
	case ReachedFrom:
		const above = 1.25
		below, err := t.below(number, a.x)
		if err != nil {
			return nil, err
		}
		length := math.Exp(a.x)
		list = append(list,
			visit{number, atBelow, below * length, StandsBeyond, 0},
			visit{number, atAnswer, length, StandsAtLimit, a.residual},
			visit{number, atAbove, above * length, StandsWithin, 0})
	}
	return list, nil
}

// below is a factor at which a number is beyond: as a rule 0.8, closer to the
// crossing where the deviation dips below the percentage again or the range of
// the search ends.
func (t *trustSearch) below(number int, x float64) (float64, error) {
	const usual, least = 0.2, 1e-3
	for d := math.Min(usual, 1-math.Exp(t.lo-x)); ; d /= 2 {
		e, err := t.excess(number, x+math.Log(1-d))
		if err != nil || e > 0 || d < least {
			return 1 - d, err
		}
	}
}

// confirmation runs packets, several at a time.
type confirmation struct {
	search   *trustSearch
	progress func(TrustProgress)
	mu       sync.Mutex
	began    time.Time
	done     map[float64]float64 // fraction of the run at each length
}

// rows confirms the answers for some numbers: each length is run once.
func (c *confirmation) rows(ctx context.Context, of []int, answers []answer) ([]TrustRun, error) {
	var visits []visit
	for _, i := range of {
		list, err := c.search.visits(i, answers[i])
		if err != nil {
			return nil, err
		}
		visits = append(visits, list...)
	}
	results := c.run(ctx, c.search.errands(visits))
	var rows []TrustRun
	for _, v := range visits {
		rows = append(rows, c.search.row(v, results[v.length]))
	}
	return rows, nil
}

// errand is all that is to be confirmed at one length.
type errand struct {
	length, tolerance float64
	names             []string
}

// errands gathers visits by their length, the longest first.
func (t *trustSearch) errands(visits []visit) []errand {
	var out []errand
	for _, v := range visits {
		i := slices.IndexFunc(out, func(e errand) bool { return e.length == v.length })
		if i < 0 {
			i, out = len(out), append(out, errand{length: v.length, tolerance: t.scenario.Tolerance})
		}
		out[i].tolerance = math.Min(out[i].tolerance, t.sharp(v))
		out[i].names = append(out[i].names, t.numbers[v.number].name)
	}
	slices.SortFunc(out, func(a, b errand) int { return cmp.Compare(b.length, a.length) })
	return out
}

// outcome is a run with its tolerance, or why there is none.
type outcome struct {
	*Result
	tolerance float64
	err       error
}

// run takes the packet road at every length, several at a time.
func (c *confirmation) run(ctx context.Context, errands []errand) map[float64]outcome {
	c.began, c.done = time.Now(), map[float64]float64{}
	for _, e := range errands {
		c.done[e.length] = 0
	}
	out, gate := map[float64]outcome{}, make(chan struct{}, runtime.GOMAXPROCS(0))
	var all sync.WaitGroup
	for _, e := range errands {
		gate <- struct{}{}
		all.Go(func() {
			defer func() { <-gate }()
			r := c.patiently(ctx, e)
			c.mu.Lock()
			defer c.mu.Unlock()
			out[e.length] = r
		})
	}
	all.Wait()
	return out
}

// patiently runs one length with ever more steps until the quantities that are
// asked for are known: others may take very much longer to settle.
func (c *confirmation) patiently(ctx context.Context, e errand) outcome {
	const first, more = 10_000, 10
	for steps := first; ; steps *= more {
		o := c.one(ctx, e, min(steps, DefaultSteps))
		if steps >= DefaultSteps || ctx.Err() != nil || !o.short(e.names) {
			return o
		}
	}
}

// short reports whether more steps may help some quantities.
func (o outcome) short(names []string) bool {
	var limit *LimitError
	if errors.As(o.err, &limit) {
		return true
	}
	if o.Result == nil || o.Ended != propagate.StepLimit.String() {
		return false
	}
	return slices.ContainsFunc(o.Quantities, func(m Measure) bool { return !m.Agrees && slices.Contains(names, m.Name) })
}

// sharp is the tolerance that lets a run tell within from beyond a few per
// cent off the limit.
func (t *trustSearch) sharp(v visit) float64 {
	const (
		part   = 0.02
		flight = 20 // lengths of the packet, about, from start to plane
		least  = 1e-11
	)
	n := t.numbers[v.number]
	allowed := part * t.within * n.unit
	if n.time {
		allowed /= flight*v.length + math.Abs(n.value)
	}
	return math.Max(least, allowed)
}

// one runs one length.
func (c *confirmation) one(ctx context.Context, e errand, steps int) outcome {
	s := *c.search.scenario
	s.Packet.Length, s.Packet.Start, s.Planes, s.Tolerance = e.length, nil, Planes{}, e.tolerance
	trial, err := Prepare(ctx, &s, Forced{Limits: Limits{Steps: steps}})
	if err != nil {
		return outcome{tolerance: e.tolerance, err: err}
	}
	r := trial.Finish(ctx, func(p Progress) { c.tell(e.length, p.Fraction) })
	c.tell(e.length, 1)
	return outcome{r, e.tolerance, trial.Refused}
}

// tell passes on how far all runs are; their work grows as the square of the
// length.
func (c *confirmation) tell(length, fraction float64) {
	if c.progress == nil {
		return
	}
	c.mu.Lock()
	defer c.mu.Unlock()
	c.done[length] = fraction
	done, work := 0.0, 0.0
	for l, f := range c.done {
		done, work = done+l*l*f, work+l*l
	}
	f := done / work
	left := float64(time.Since(c.began)) * (1 - f) / math.Max(f, 1e-3)
	c.progress(TrustProgress{Fraction: f, Left: time.Duration(left)})
}

// row reads one number off a run.
func (t *trustSearch) row(v visit, o outcome) TrustRun {
	n, s := t.numbers[v.number], t.scenario
	unit, scale := t.scaleOf(n)
	r := TrustRun{
		Name: n.name, Unit: unit, At: v.at, Length: v.length * s.Scale.Length, Spread: s.spread(v.length),
		Expected: v.expected, Tolerance: o.tolerance, Verdict: NotReached,
	}
	var limit *LimitError
	switch {
	case errors.As(o.err, &limit):
		r.Refused = fmt.Sprintf("it would need about %.2g %s; the limit is %.2g", limit.Estimate, limit.What, limit.Limit)
	case errors.Is(o.err, context.Canceled) || errors.Is(o.err, context.DeadlineExceeded):
		r.Verdict = Incomplete
	case o.err != nil:
		r.Refused = o.err.Error()
	}
	if o.Result == nil {
		return r
	}
	if r.Seconds = o.Seconds; o.Verdict == Disagrees || o.Verdict == Incomplete {
		r.Verdict = o.Verdict
	}
	for _, m := range o.Quantities {
		if m.Name == n.name {
			r.read(m, n, scale)
			r.Found = t.found(r, v.slack)
		}
	}
	return r
}

// read fills in the numbers.
func (r *TrustRun) read(m Measure, n planeWave, scale float64) {
	percent := func(v float64) *float64 { return scaled((v/scale-n.value)/n.unit, 100) }
	r.Average, r.AverageError = m.Average, m.AverageError
	r.OffAverage = percent(*m.Average)
	if m.Packet != nil && m.Budget != nil && r.Verdict != Incomplete {
		r.Packet, r.Budget, r.OffPacket = m.Packet, m.Budget, percent(*m.Packet)
		r.OffBudget = scaled(*m.Budget/scale/n.unit, 100)
		if m.Agrees && r.Verdict != Disagrees {
			r.Verdict = Agrees
		}
	}
}

// found is how the packet's deviation stands, slack being what the limit
// itself is uncertain by.
func (t *trustSearch) found(r TrustRun, slack float64) Standing {
	if r.OffPacket == nil || r.OffBudget == nil {
		return ""
	}
	return t.standing(stationary.Mean{Value: *r.OffPacket / 100, Error: *r.OffBudget/100 + slack})
}
