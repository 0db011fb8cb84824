package scenarios

import (
	"context"
	"errors"
	"math"

	"fluxtoll/potential"
	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// The elements on which states are found a second time.
const (
	checkOrder = 16
	checkPhase = 4       // |k| h of an element at most
	checkNodes = 100_000 // more are not worth the second opinion
	checkWaves = 3       // distance of the planes from the structure, over the longest 1/k
)

// checkAllowed is by how much of the width the two roads may differ, and
// checkRounding what rounding in the elements' matrices, whose entries are
// some hundred times the energies, may add, relative to the energies met.
const (
	checkAllowed  = 1e-8
	checkRounding = 2e-12
)

// holdAgainstElements finds the states again as eigenstates of the
// complex-scaled elements. Left out are states that are wide for their energy,
// since the edges, rotated by EdgeAngle, no longer absorb what grows outwards;
// and those that rounding in the elements mixes with a neighbour.
func (s *Scenario) holdAgainstElements(ctx context.Context, v *stationary.Survey, out *Resonances) error {
	c := s.checker(v)
	if c == nil {
		return nil
	}
	lead := math.Min(s.Structure.Entry.Height, s.Structure.Exit.Height)
	const moderate = 0.2 // width over energy
	for i, r := range v.Resonances {
		if err := ctx.Err(); err != nil {
			return err
		}
		if r.Width <= moderate*(r.Energy-lead) {
			out.Resonances[i].Elements = c.find(r, neighbour(v.Resonances, i))
		}
	}
	for i, b := range v.Bound {
		if err := ctx.Err(); err != nil {
			return err
		}
		out.Bound[i].Elements = c.find(b, neighbour(v.Bound, i))
	}
	for _, r := range out.Resonances {
		out.Agrees = out.Agrees && (r.Elements == nil || r.Elements.Agrees)
	}
	for _, b := range out.Bound {
		out.Agrees = out.Agrees && (b.Elements == nil || b.Elements.Agrees)
	}
	return nil
}

// neighbour is the distance of the nearest other state in energy.
func neighbour(list []stationary.State, i int) float64 {
	d := math.Inf(1)
	if i > 0 {
		d = list[i].Energy - list[i-1].Energy
	}
	if i+1 < len(list) {
		d = math.Min(d, list[i+1].Energy-list[i].Energy)
	}
	return d
}

// checker is a mesh for all the states of a survey.
type checker struct {
	mesh   *propagate.Mesh
	scale  Scale
	extent float64 // size of the energies met
}

// checker makes the mesh, or nil where it would be too large or there is
// nothing to check.
func (s *Scenario) checker(v *stationary.Survey) *checker {
	if len(v.Resonances)+len(v.Bound) == 0 {
		return nil
	}
	low, high := s.heights()
	bottom := v.Window.From
	if len(v.Bound) > 0 {
		bottom = math.Min(bottom, v.Bound[0].Energy)
	}
	extent := math.Abs(low) + math.Abs(high) + math.Abs(v.Window.To) + math.Abs(bottom)
	entry, exit := s.Structure.Entry, s.Structure.Exit
	left, right := checkEdge(entry, v.Window), checkEdge(exit, v.Window)
	gapLeft, gapRight := checkGap(entry, v.Window), checkGap(exit, v.Window)
	width := s.Structure.Width()
	layout, err := propagate.NewLayout(s.Structure, propagate.Resolution{
		Order: checkOrder, Phase: checkPhase, Low: bottom, High: v.Window.To,
		Height: 5e-14 * extent, MaxNodes: checkNodes,
	}, propagate.Extent{Left: -gapLeft, PlaneLeft: -gapLeft, PlaneRight: width + gapRight, Right: width + gapRight}, left, right)
	var size *propagate.SizeError
	if err != nil && errors.As(err, &size) {
		return nil
	}
	if err != nil {
		panic("scenarios: " + err.Error())
	}
	return &checker{mesh: propagate.NewMesh(layout), scale: s.Scale, extent: extent}
}

// heights are bounds of the height, leads included.
func (s *Scenario) heights() (low, high float64) {
	low = math.Min(s.Structure.Entry.Height, s.Structure.Exit.Height)
	high = math.Max(s.Structure.Entry.Height, s.Structure.Exit.Height)
	for _, g := range s.Structure.Segments {
		l, h := g.Height.Range(g.From, g.To)
		low, high = math.Min(low, l), math.Max(high, h)
	}
	return low, high
}

// checkEdge is an edge that absorbs all energies of a window.
func checkEdge(lead potential.Lead, w stationary.Window) propagate.Edge {
	const goals = 40
	var list []propagate.EdgeGoal
	for i := range goals {
		e := w.From + (w.To-w.From)*float64(i)/(goals-1)
		list = append(list, propagate.EdgeGoal{Energy: e, Weight: 1.0 / goals})
	}
	return propagate.ChooseEdge(lead, checkOrder, list, 1e-12)
}

// checkGap is the distance of a plane from the structure.
func checkGap(lead potential.Lead, w stationary.Window) float64 {
	return checkWaves / math.Sqrt(2*lead.Mass*math.Abs(w.To-lead.Height))
}

// find starts Newton's method beside the state that the stationary road knows;
// gap is the distance to the next. It returns nil where that leads to none.
func (c *checker) find(r stationary.State, gap float64) *Element {
	rounding := checkRounding * c.extent
	mixed := rounding / gap
	if mixed > 1e-3 {
		return nil
	}
	u, err := c.mesh.Eigenstate(complex(r.Energy+r.Width/100, -r.Width/2))
	if err != nil {
		return nil
	}
	width := u.Width()
	energyOff, widthOff := math.Abs(real(u.Energy)-r.Energy), math.Abs(width-r.Width)
	e := &Element{
		Energy: real(u.Energy) * c.scale.Energy, Width: width * c.scale.Energy,
		EnergyOff: energyOff * c.scale.Energy,
	}
	// A bound state flows out by what rounding leaves, in units of its energy.
	allowed := (checkAllowed + mixed) * r.Width
	if r.Width > 0 {
		e.WidthOff = widthOff / r.Width
	} else {
		allowed = rounding
	}
	e.Agrees = energyOff <= checkAllowed*r.Width+rounding+r.EnergyError && widthOff <= allowed+r.WidthError
	return e
}
