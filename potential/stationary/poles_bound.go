package stationary

import (
	"context"
	"math"
)

// bound fills the survey with the states below both leads. Of one that is
// bound by less than rounding of the heights amounts to nobody can say whether
// it is there; it does not count.
func (f *finder) bound(ctx context.Context, out *Survey) {
	if f.near.lossy {
		f.boundLossy(ctx, out)
		return
	}
	const rounding = 64 * eps // of a decay constant, relative
	deepest := f.deepest()
	weakest := deepest*rounding*rounding + least
	out.CountedBound = f.nodes(weakest)
	out.CompleteBound = true
	for n := range out.CountedBound {
		if ctx.Err() != nil {
			return
		}
		state, ok := f.level(n, weakest, deepest)
		out.CompleteBound = out.CompleteBound && ok
		out.Bound = append(out.Bound, state)
	}
}

// deepest bounds how far below the lower lead a state can be. By
// |psi(x)|^2 <= |psi| |psi'| the points of negative strengths that sum up to s
// lower the energy by no more than m s^2/2, m the largest mass.
func (f *finder) deepest() float64 {
	s := f.structure
	mass, strength := max(s.Entry.Mass, s.Exit.Mass), 0.0
	for _, g := range s.Segments {
		_, m := g.Mass.Range(g.From, g.To)
		mass = max(mass, m)
	}
	for _, d := range s.Deltas {
		strength -= min(0, d.Strength)
	}
	return f.near.near.Height - f.near.low + mass*strength*strength/2
}

// least stands for no binding at all.
const least = 1e-200

// nodes counts the nodes of the solution that decays in the far lead, at an
// energy below the near one's height by binding: as many as there are states
// below that energy (Sturm's oscillation theorem, which holds for (psi'/m)'
// with any positive mass; R. Courant and D. Hilbert, Methods of Mathematical
// Physics, vol. 1, ch. 6.6).
func (f *finder) nodes(binding float64) int {
	s := f.near
	l := level{s.near.Height - binding, -binding, -binding - (s.far.Height - s.near.Height)}
	s.cross(l, true)
	n := int(math.Round(-s.wave.turn / math.Pi))
	u, w := s.wave.pu*s.wave.er, s.wave.pw*s.wave.er
	growing := u - w/math.Sqrt(2*binding/s.near.Mass) // over 2, of exp(kappa |x|) in the near lead
	if u*growing < 0 {
		n++
	}
	return n
}

// level is the bound state with n nodes, by bisection in the binding energy,
// first of its logarithm: where nodes(b) > n, it is bound by more than b.
func (f *finder) level(n int, weak, strong float64) (State, bool) {
	strong *= 1 + 1e-12
	for {
		mid := (weak + strong) / 2
		if strong > 4*weak {
			mid = math.Sqrt(weak) * math.Sqrt(strong)
		}
		if mid <= weak || mid >= strong {
			break
		}
		if f.nodes(mid) > n {
			weak = mid
		} else {
			strong = mid
		}
	}
	z := complex(f.near.near.Height-weak, 0)
	s, ok := f.state(zero{z, strong - weak}, sheet{})
	s.Energy, s.Width, s.WidthError = real(z), 0, 0
	return s, ok
}

// boundLossy locates the states below both leads of a structure that loses:
// they are zeros with a width that is at most twice the largest loss.
func (f *finder) boundLossy(ctx context.Context, out *Survey) {
	deepest, lead := f.deepest(), f.near.near.Height
	// From the lead's height itself, where in branches, the contour keeps clear.
	clear := max(1e-9*deepest, 1e-12*(math.Abs(lead)+f.near.high-f.near.low))
	if deepest <= clear {
		out.CompleteBound = true
		return
	}
	loss := 0.0
	for i := range f.near.elements {
		loss = max(loss, f.near.elements[i].loss)
	}
	r := rectangle{lead - deepest*(1+1e-6), lead - clear, -1.001 * loss, 0.1 * loss}
	l := f.locator(sheet{})
	counted, err := l.contour.zeros(ctx, r)
	if err == nil {
		err = l.search(ctx, r, counted)
	}
	out.CountedBound = counted
	out.CompleteBound = err == nil && counted == len(l.zeros)
	for _, z := range l.zeros {
		state, ok := f.state(z, sheet{})
		out.CompleteBound = out.CompleteBound && ok
		out.Bound = append(out.Bound, state)
	}
	sortStates(out.Bound)
}
