package scenarios

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"
	"time"
)

// TrustRequest asks how far plane-wave numbers can be trusted.
type TrustRequest struct {
	Within float64  // per cent, > 0
	Of     []string // quantities to confirm with packet runs; none: what is transmitted, if anything is, or else reflected
}

// AllNumbers, alone in Of, asks for every quantity.
const AllNumbers = "all"

// Trust is the answer, in display units. Its JSON is the document that
// `trust --json` prints.
type Trust struct {
	Format     string       `json:"format"`
	Title      string       `json:"title"`
	Units      Units        `json:"units"`
	Tolerance  float64      `json:"tolerance"`
	Within     float64      `json:"within"` // per cent
	Of         []string     `json:"of"`     // what the runs confirm
	Length     float64      `json:"length"` // of the packet, as given
	Spread     float64      `json:"spread"`
	Searched   Searched     `json:"searched"`
	Quantities []Trusted    `json:"quantities"`
	Runs       []TrustRun   `json:"runs"`
	Notes      []string     `json:"notes,omitempty"`
	Verdict    TrustVerdict `json:"verdict"`
	Seconds    float64      `json:"seconds"`
}

// Searched is the range of packet lengths that was searched.
type Searched struct {
	From     float64 `json:"from"`
	To       float64 `json:"to"`
	Averages int     `json:"averages"` // computed
}

// TrustVerdict is the outcome.
type TrustVerdict string

// The outcomes.
const (
	Confirmed    TrustVerdict = "confirmed"
	Contradicted TrustVerdict = "contradicted"  // by a packet run
	Unconfirmed  TrustVerdict = "not confirmed" // a run was refused, or its budget is too large to tell
	Unreached    TrustVerdict = "not reached"   // the percentage, at no length searched
	Unfinished   TrustVerdict = "interrupted"
	trustLabel                = "fluxtoll.trust/1"
)

// TrustProgress is how far the work is.
type TrustProgress struct {
	Fraction float64 // of the packet runs; 0 while averages are searched
	Left     time.Duration
	Averages int // computed so far
}

// Trustworthy finds, for every plane-wave number of s, how far it is off for
// this packet, and from which packet length on it stays within a percentage.
// The length is searched on stationary averages and confirmed with packet
// runs. A context that ends leaves what was found, with the verdict
// Unfinished.
func Trustworthy(ctx context.Context, s *Scenario, ask TrustRequest, progress func(TrustProgress)) (*Trust, error) {
	began := time.Now()
	if !(ask.Within > 0) || math.IsInf(ask.Within, 0) {
		return nil, fmt.Errorf("%g per cent is no range to stay within; a number greater than 0 is accepted", ask.Within)
	}
	search, err := newTrustSearch(ctx, s, ask.Within/100, progress)
	if err != nil {
		return nil, err
	}
	of, err := search.asked(ask.Of)
	if err != nil {
		return nil, err
	}
	answers, err := search.answers()
	if err != nil && ctx.Err() == nil {
		return nil, err
	}
	out := search.report(answers)
	for _, i := range of {
		out.Of = append(out.Of, search.numbers[i].name)
	}
	if err == nil {
		c := &confirmation{search: search, progress: progress}
		out.Runs, err = c.rows(ctx, of, answers)
	}
	if err != nil && ctx.Err() == nil {
		return nil, err
	}
	out.Notes = search.remarks()
	out.Verdict = trustVerdict(err, pick(out.Quantities, of), out.Runs)
	out.Seconds = time.Since(began).Seconds()
	return out, nil
}

// pick returns the members at some indices.
func pick[T any](list []T, at []int) []T {
	var out []T
	for _, i := range at {
		out = append(out, list[i])
	}
	return out
}

// NoSuchNumber says that a scenario has no plane-wave number of that name.
type NoSuchNumber struct {
	Name     string
	Accepted []string
}

func (e *NoSuchNumber) Error() string {
	return fmt.Sprintf("%s is no plane-wave number of this scenario; %saccepted are %s, or all of them as %s",
		excerpt(e.Name), suggestion(e.Name, e.Accepted), strings.Join(e.Accepted, ", "), AllNumbers)
}

// asked finds the numbers to confirm.
func (t *trustSearch) asked(names []string) ([]int, error) {
	if len(names) == 1 && names[0] == AllNumbers {
		return upTo(len(t.numbers)), nil
	}
	if len(names) == 0 {
		return []int{t.mainNumber()}, nil
	}
	var all []string
	for _, n := range t.numbers {
		all = append(all, n.name)
	}
	var out []int
	for _, name := range names {
		i := slices.Index(all, name)
		if i < 0 {
			return nil, &NoSuchNumber{name, all}
		}
		if !slices.Contains(out, i) {
			out = append(out, i)
		}
	}
	return out, nil
}

// upTo lists the whole numbers below n.
func upTo(n int) []int {
	out := make([]int, n)
	for i := range out {
		out[i] = i
	}
	return out
}

// mainNumber is what is transmitted, if anything to speak of is, or else what
// is reflected.
func (t *trustSearch) mainNumber() int {
	name := "transmitted"
	if t.plane.Transmission <= leastPart {
		name = "reflected"
	}
	return slices.IndexFunc(t.numbers, func(n planeWave) bool { return n.name == name })
}

// trustVerdict reads the outcome off what was asked for and its runs.
func trustVerdict(interrupted error, asked []Trusted, runs []TrustRun) TrustVerdict {
	if interrupted != nil {
		return Unfinished
	}
	verdict := Confirmed
	for _, r := range runs {
		switch {
		case r.Verdict == Disagrees || r.contradicts():
			return Contradicted
		case r.Verdict == Incomplete:
			verdict = Unfinished
		case r.undecided() && verdict == Confirmed:
			verdict = Unconfirmed
		}
	}
	for _, q := range asked {
		if q.Reached == ReachedNowhere && verdict == Confirmed {
			return Unreached
		}
	}
	return verdict
}
