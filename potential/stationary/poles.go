package stationary

import (
	"context"
	"fmt"
	"math"
	"slices"

	"fluxtoll/potential"
)

// State is a resonance or a bound state: a solution without incident wave, at
// the energy Energy - i Width/2.
//
// The widths to the two sides and to the losses are fluxes over the norm: a
// state that decays as exp(-Width t) loses per unit of time what flows out at
// both faces and what its layers absorb, so that
//
//	Width = Left + Right + Lost
//
// exactly. They are found from the shape of the state and keep their relative
// accuracy however narrow it is. The norm is the integral of |psi|^2 over the
// structure and over those leads in which the state decays.
type State struct {
	Energy, Width     float64
	Left, Right, Lost float64 // partial widths
	// Shares is the part of the norm in each layer; they sum to 1 less what
	// is in leads that are closed.
	Shares []float64
	// EnergyError and WidthError are bounds from solving from both sides.
	EnergyError, WidthError float64
}

// Window bounds the search for resonances: energies From to To, above the
// lower lead's height, and widths up to Widest.
type Window struct{ From, To, Widest float64 }

// Survey is the outcome of a search.
//
// Counted is the number of poles in the window by the argument principle, and
// Complete says that as many were located and confirmed from the other side.
// Bound states are counted by nodes of the solution at the top of the well
// (Sturm), or, where a layer loses, by the argument principle.
//
// Window is the one searched: Widest is less than asked for where rounding
// hides what lies deeper. A wave that decays by more than some 1e15 while it
// crosses the structure leaves no trace of where it came from.
type Survey struct {
	Window                  Window
	Resonances, Bound       []State
	Counted, CountedBound   int
	Complete, CompleteBound bool
}

// finder looks for the states of one structure; its near lead is the lower
// one.
type finder struct {
	structure *potential.Structure
	near, far *Solver // incidence from the lower lead, and from the other
	mirrored  bool    // the lower lead is the exit
	budget    int     // evaluations left
}

func newFinder(s *potential.Structure) *finder {
	mirrored := s.Exit.Height < s.Entry.Height
	return &finder{structure: s, mirrored: mirrored, near: New(s, mirrored), far: New(s, !mirrored)}
}

// allot sets the evaluations that one search may take: some seconds.
func (f *finder) allot() {
	const least, most, work = 20_000, 300_000, 20_000_000
	f.budget = min(max(work/(1+len(f.near.elements)+20*len(f.near.smooths)), least), most)
}

// States finds the resonances in a window and all bound states. The error is
// that of the context or of a window that makes no sense; a search that could
// not be brought to an end is not Complete.
func States(ctx context.Context, s *potential.Structure, w Window) (*Survey, error) {
	f := newFinder(s)
	lead := f.near.near.Height
	if !(w.From > lead && w.To > w.From && w.Widest > 0) || math.IsInf(w.To, 0) || math.IsInf(w.Widest, 0) {
		return nil, fmt.Errorf("stationary: the window from %g to %g with widths to %g must lie above the lower lead's height %g", w.From, w.To, w.Widest, lead)
	}
	out := &Survey{}
	seeds := f.seeds(ctx, w)
	const tries, patience = 12, 2
	spent := 0.0 // in budgets
	for i := 0; i < tries && spent < patience; i++ {
		f.allot()
		budget := f.budget
		f.resonances(ctx, w, seeds, out)
		if out.Complete || ctx.Err() != nil {
			break
		}
		spent += 1 - float64(f.budget)/float64(budget)
		w.Widest /= 2
	}
	f.allot()
	f.bound(ctx, out)
	return out, ctx.Err()
}

// seeds are what real energies feel, which is found fastest on the real axis;
// as far as the search comes.
func (f *finder) seeds(ctx context.Context, w Window) []Pole {
	const budget = 30_000
	poles, _, _ := f.near.Resonances(ctx, w.From, w.To, budget)
	return poles
}

// resonances fills the survey with those in the window.
func (f *finder) resonances(ctx context.Context, w Window, seeds []Pole, out *Survey) {
	out.Window, out.Resonances, out.Counted, out.Complete = w, nil, 0, true
	for _, p := range f.pieces(w) {
		l := f.locator(p.sheet)
		for _, seed := range seeds {
			if z := complex(seed.Energy, -seed.Width/2); p.holds(z) {
				l.offer(z, p.rectangle)
			}
		}
		counted, err := l.all(ctx, p)
		out.Complete = out.Complete && err == nil && counted == len(l.zeros)
		for _, z := range l.zeros {
			if real(z.at) < w.From || real(z.at) > w.To || -2*imag(z.at) > w.Widest {
				counted--
				continue
			}
			state, ok := f.state(z, p.sheet)
			out.Complete = out.Complete && ok
			out.Resonances = append(out.Resonances, state)
		}
		out.Counted += counted
	}
	sortStates(out.Resonances)
}

func sortStates(list []State) {
	slices.SortFunc(list, func(a, b State) int {
		switch {
		case a.Energy < b.Energy:
			return -1
		case a.Energy > b.Energy:
			return 1
		}
		return 0
	})
}

// piece is a part of the window in which the same leads are open. Its edges
// may be moved outwards where they are not a lead's height.
type piece struct {
	rectangle
	sheet              sheet
	fixedFrom, fixedTo bool
}

// pieces divides a window at the height of the higher lead. The rectangles
// reach over the real axis, where there are no zeros, so that no contour runs
// along one that is narrow.
func (f *finder) pieces(w Window) []piece {
	high := f.near.far.Height
	r := rectangle{w.From, w.To, -w.Widest / 2, min(w.Widest, w.To-w.From) / 2}
	open, closed := sheet{true, true}, sheet{true, false}
	switch {
	case high <= w.From:
		return []piece{{rectangle: r, sheet: open}}
	case high >= w.To:
		return []piece{{rectangle: r, sheet: closed}}
	}
	below, above := r, r
	below.to, above.from = high, high
	return []piece{
		{rectangle: below, sheet: closed, fixedTo: true},
		{rectangle: above, sheet: open, fixedFrom: true},
	}
}

// widened moves the edges outwards by a share of the piece, so that none runs
// through a pole.
func (p piece) widened(share, lead, high float64) rectangle {
	r := p.rectangle
	d := share * (r.to - r.from)
	floor := lead
	if p.sheet.farOpen {
		floor = max(lead, high)
	}
	if !p.fixedFrom {
		r.from -= min(d, (r.from-floor)/2)
	}
	if !p.fixedTo {
		r.to += d
		if !p.sheet.farOpen {
			r.to = min(r.to, high)
		}
	}
	r.bottom *= 1 + share
	return r
}
