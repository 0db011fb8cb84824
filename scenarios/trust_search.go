package scenarios

import (
	"context"
	"fmt"
	"math"

	"fluxtoll/potential/stationary"
)

// The range of lengths that is searched, in multiples of the given one.
const (
	shortestTrust = 1.0 / 50
	longestTrust  = 1000.0
)

// trustStep is the step of the search in ln(length). An average over a Gaussian
// spectrum, as a function of the logarithm of its width, holds frequencies w
// only with the factor |Gamma((1+iw)/2)|/sqrt(pi) = cosh(pi w/2)^(-1/2) (the
// Mellin transform of the Gaussian; NIST Digital Library of Mathematical
// Functions, 5.4.4): at this step's Nyquist frequency that is 6e-6 of the
// structure's own variation.
const trustStep = 0.2

// trustSearch looks for lengths on stationary averages. Its coordinate is
// x = ln(length), length in internal units.
type trustSearch struct {
	ctx      context.Context
	scenario *Scenario
	solver   *stationary.Solver
	plane    stationary.Amplitudes
	numbers  []planeWave
	within   float64 // fraction
	lo, hi   float64
	known    map[float64][]stationary.Mean // deviations
	given    *stationary.Averages          // of the packet as given
	unsure   bool                          // an average did not reach its accuracy
	progress func(TrustProgress)
}

// newTrustSearch solves for the plane wave and averages over the packet as
// given.
func newTrustSearch(ctx context.Context, s *Scenario, within float64, progress func(TrustProgress)) (*trustSearch, error) {
	t := &trustSearch{
		ctx: ctx, scenario: s, within: within, progress: progress,
		solver: stationary.New(s.Structure, s.Packet.Side == FromRight),
		known:  map[float64][]stationary.Mean{},
	}
	if err := t.solver.At(s.Packet.Energy, &t.plane); err != nil {
		return nil, fmt.Errorf("plane wave: %w", err)
	}
	t.numbers = planeWaves(s, t.plane)
	l := s.Packet.Length
	t.lo, t.hi = math.Log(math.Max(shortestTrust*l, math.Min(l, clearOfZero(s)))), math.Log(longestTrust*l)
	var err error
	t.given, err = t.average(l)
	return t, err
}

// clearOfZero is the length from which on the spectrum keeps so clear of
// k = 0 that the packet road's budget allows for it, see wrongWay; with a
// margin, since what is next to k = 0 takes very long.
func clearOfZero(s *Scenario) float64 {
	const margin = 1e-4
	return math.Sqrt(math.Log(2/(margin*sharePacket*s.Tolerance))/2) / s.Packet.K0
}

// average averages over the spectrum of a packet of some length.
func (t *trustSearch) average(length float64) (*stationary.Averages, error) {
	const part = 1e-6 // of the percentage, and so about of the length found
	a, err := t.solver.Average(t.ctx,
		stationary.Spectrum{K0: t.scenario.Packet.K0, Width: 1 / (2 * length)},
		stationary.Options{Relative: math.Max(1e-13, math.Min(1e-8, part*t.within))})
	if t.ctx.Err() != nil {
		return nil, t.ctx.Err()
	}
	if a == nil {
		return nil, fmt.Errorf("average: %w", err)
	}
	t.unsure = t.unsure || err != nil
	return a, nil
}

// off returns the deviations at x.
func (t *trustSearch) off(x float64) ([]stationary.Mean, error) {
	if off, ok := t.known[x]; ok {
		return off, nil
	}
	a, err := t.average(math.Exp(x))
	if err != nil {
		return nil, err
	}
	var off []stationary.Mean
	for _, n := range t.numbers {
		off = append(off, n.off(a))
	}
	t.known[x] = off
	if t.progress != nil {
		t.progress(TrustProgress{Averages: len(t.known)})
	}
	return off, nil
}

// excess is by how much the deviation of a number may exceed what is allowed:
// negative where it is certainly within.
func (t *trustSearch) excess(number int, x float64) (float64, error) {
	off, err := t.off(x)
	if err != nil {
		return 0, err
	}
	return math.Abs(off[number].Value) + off[number].Error - t.within, nil
}

// Reach says where a number is within the percentage.
type Reach string

// The kinds of reach.
const (
	ReachedFrom       Reach = "from"       // from a length on
	ReachedEverywhere Reach = "everywhere" // at every length searched
	ReachedNowhere    Reach = "nowhere"    // not even at the longest
	ReachedUnknown    Reach = "unknown"    // interrupted before it was found
)

// answer is where a number is within the percentage; the rest where reach is
// ReachedFrom.
type answer struct {
	reach    Reach
	x, error float64
	residual float64 // how far the deviation at x may be from the percentage
}

// answers searches for every number; those not found in time are ReachedUnknown.
func (t *trustSearch) answers() ([]answer, error) {
	out := make([]answer, len(t.numbers))
	for i := range out {
		out[i].reach = ReachedUnknown
	}
	for i := range out {
		a, err := t.outermost(i)
		if err != nil {
			return out, err
		}
		out[i] = a
	}
	return out, nil
}

// outermost finds the length from which on a number stays within: the first
// crossing met on the way down from the longest.
func (t *trustSearch) outermost(number int) (answer, error) {
	below, above, reach, err := t.bracket(number)
	if err != nil || reach != ReachedFrom {
		return answer{reach: reach}, err
	}
	x, err := illinois(func(x float64) (float64, error) { return t.excess(number, x) }, below, above)
	if err != nil {
		return answer{}, err
	}
	return t.crossing(number, x)
}

// bracket walks down the grid until a number exceeds what is allowed, at a
// point of the grid or on a hump between.
func (t *trustSearch) bracket(number int) (below, above float64, reach Reach, err error) {
	var last [3]point // the newest last
	for j, x := range t.grid() {
		e, err := t.excess(number, x)
		if err != nil {
			return 0, 0, ReachedUnknown, err
		}
		last = [3]point{last[1], last[2], {x, e}}
		switch {
		case j == 0 && e > 0:
			return 0, 0, ReachedNowhere, nil
		case e > 0:
			return x, last[1].x, ReachedFrom, nil
		case j < 2 || !isHump(last):
			continue
		}
		top, err := t.summit(number, last)
		if err != nil {
			return 0, 0, ReachedUnknown, err
		}
		if top.y > 0 {
			return top.x, last[0].x, ReachedFrom, nil
		}
	}
	return 0, 0, ReachedEverywhere, nil
}

// grid lists the points of the search from the longest length down.
func (t *trustSearch) grid() []float64 {
	n := int(math.Ceil((t.hi - t.lo) / trustStep))
	xs := make([]float64, n+1)
	for j := range xs {
		xs[j] = t.hi - (t.hi-t.lo)*float64(j)/float64(n)
	}
	return xs
}

// crossing is the answer at a zero of the excess. Its error is the residual
// over the slope of the deviation.
func (t *trustSearch) crossing(number int, x float64) (answer, error) {
	const d = 0.01
	var y [3]float64
	for i := range y {
		var err error
		if y[i], err = t.excess(number, x+d*float64(i-1)); err != nil {
			return answer{reach: ReachedUnknown}, err
		}
	}
	residual := 2*t.known[x][number].Error + math.Abs(y[1])
	return answer{ReachedFrom, x, residual * 2 * d / math.Abs(y[2]-y[0]), residual}, nil
}
