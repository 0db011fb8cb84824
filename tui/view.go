package tui

import (
	"fluxtoll/scenarios"
)

// fit is what the view of the x axis keeps to.
type fit int

const (
	fitWhole fit = iota
	fitStructure
	fitPacket // as wide as it is, centred on the packet
	fitFree   // where the user put it
)

// view is how the packet is looked at.
type view struct {
	fit    fit
	window scenarios.Window
	log    bool
	ghost  bool
	want   chosen
	top    float64 // of the linear density scale
}

func newView() view {
	v := view{}
	for p := range panels {
		v.want[p] = true
	}
	return v
}

// update chooses the window for a moment and a width in columns.
func (v *view) update(o *scenarios.Outlook, m *scenarios.Moment, columns int) {
	v.window.Columns = max(1, columns)
	switch v.fit {
	case fitWhole:
		v.window.From, v.window.To = o.From, o.To
	case fitStructure:
		margin := max(o.Width*0.75, 2.5*o.Fringe)
		v.window.From, v.window.To = -margin, o.Width+margin
	case fitPacket:
		half := (v.window.To - v.window.From) / 2
		v.window.From, v.window.To = m.Centre-half, m.Centre+half
	case fitFree:
	}
	v.top = rescale(v.top, o, m)
}

// Bounds of the zoom: fringes across the view at least, and lengths of the
// grid at most.
const (
	leastFringes = 1.0 / 4
	mostWholes   = 2
)

// zoom makes the window a factor as wide, about its middle.
func (v *view) zoom(o *scenarios.Outlook, factor float64) {
	half := (v.window.To - v.window.From) / 2 * factor
	half = max(leastFringes*o.Fringe/2, min(mostWholes*(o.To-o.From)/2, half))
	middle := (v.window.From + v.window.To) / 2
	v.window.From, v.window.To = middle-half, middle+half
	if v.fit != fitPacket {
		v.fit = fitFree
	}
}

// pan moves the window by a part of its width.
func (v *view) pan(o *scenarios.Outlook, part float64) {
	d := part * (v.window.To - v.window.From)
	if middle := (v.window.From+v.window.To)/2 + d; middle < o.From || middle > o.To {
		return
	}
	v.window.From, v.window.To = v.window.From+d, v.window.To+d
	v.fit = fitFree
}

// follow keeps the packet in the middle, in a third of the whole at most.
func (v *view) follow(o *scenarios.Outlook) {
	v.fit = fitPacket
	if whole := o.To - o.From; v.window.To-v.window.From > whole/3 {
		v.zoom(o, whole/3/(v.window.To-v.window.From))
	}
}

// scale is the density scale.
func (v *view) scale() scale { return scale{v.top, v.log} }
