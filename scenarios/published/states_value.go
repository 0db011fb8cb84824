package published

import (
	"strconv"
	"strings"

	"fluxtoll/scenarios"
)

// isOfState tells the energies and widths of resonances and bound states from
// other quantities: resonance[0].energy, resonance[0].width, bound[0].energy,
// counted from below in the packet's band.
func (c Check) isOfState() bool {
	return strings.HasPrefix(c.Quantity, "resonance[") || strings.HasPrefix(c.Quantity, "bound[")
}

// state is an energy or a width on the stationary road or on the elements.
// Of a search that is not complete nothing counts.
func (a *answers) state(quantity string, road Road) (float64, bool) {
	if a.states == nil || !a.states.Complete {
		return 0, false
	}
	path, field, _ := strings.Cut(quantity, "].")
	kind, number, _ := strings.Cut(path, "[")
	i, err := strconv.Atoi(number)
	if err != nil || i < 0 {
		return 0, false
	}
	e, ok := a.found(kind, i, road)
	switch {
	case !ok:
		return 0, false
	case field == "energy":
		return e.Energy, true
	case field == "width":
		return e.Width, true
	}
	return 0, false
}

// found is the state with a number of a kind.
func (a *answers) found(kind string, i int, road Road) (scenarios.Element, bool) {
	var own scenarios.Element
	var other *scenarios.Element
	switch {
	case kind == "resonance" && i < len(a.states.Resonances):
		r := a.states.Resonances[i]
		own, other = scenarios.Element{Energy: r.Energy, Width: r.Width}, r.Elements
	case kind == "bound" && i < len(a.states.Bound):
		b := a.states.Bound[i]
		own, other = scenarios.Element{Energy: b.Energy, Width: b.Width}, b.Elements
	default:
		return own, false
	}
	if road == States {
		return own, true
	}
	if other == nil {
		return own, false
	}
	return *other, true
}
