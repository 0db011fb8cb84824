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
// complex-scaled elements. States that are wide for their energy are left
// out: rotated by EdgeAngle, the edges no longer absorb what grows outwards.
func (s *Scenario) holdAgainstElements(ctx context.Context, v *stationary.Survey, out *Resonances) error {
	c := s.checker(v)
	if c == nil {
		return nil
	}
	for i, r := range v.Resonances {
		if err := ctx.Err(); err != nil {
			return err
		}
		if moderate := 0.2 * (r.Energy - math.Min(s.Structure.Entry.Height, s.Structure.Exit.Height)); r.Width > moderate {
			continue
		}
		out.Resonances[i].Elements = c.find(r, r.Width)
	}
	for i, b := range v.Bound {
		if err := ctx.Err(); err != nil {
			return err
		}
		out.Bound[i].Elements = c.find(b, math.Max(b.Width, b.Energy-c.low))
	}
	for _, r := range out.Resonances {
		out.Agrees = out.Agrees && (r.Elements == nil || r.Elements.Agrees)
	}
	for _, b := range out.Bound {
		out.Agrees = out.Agrees && (b.Elements == nil || b.Elements.Agrees)
	}
	return nil
}

// checker is a mesh for all the states of a survey.
type checker struct {
	mesh        *propagate.Mesh
	scale       Scale
	low, extent float64 // bottom of the structure; size of the energies met
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
	return &checker{mesh: propagate.NewMesh(layout), scale: s.Scale, low: low, extent: extent}
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
// nil where it leads to none. off is measured in units of size.
func (c *checker) find(r stationary.State, size float64) *Element {
	u, err := c.mesh.Eigenstate(complex(r.Energy+r.Width/100, -r.Width/2))
	if err != nil {
		return nil
	}
	width := u.Width()
	energyOff, widthOff := math.Abs(real(u.Energy)-r.Energy), math.Abs(width-r.Width)
	rounding := checkRounding * c.extent
	return &Element{
		Energy: real(u.Energy) * c.scale.Energy, Width: width * c.scale.Energy,
		Off: math.Max(energyOff, widthOff) / size,
		Agrees: energyOff <= checkAllowed*size+rounding+r.EnergyError &&
			widthOff <= checkAllowed*size+r.WidthError,
	}
}
