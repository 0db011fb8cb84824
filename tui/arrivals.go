package tui

import (
	"math"
	"unicode/utf8"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
)

// arrivals draws the flux through both planes against time, the far plane
// above, with the predicted mean arrival and free flight marked.
type arrivals struct {
	canvas.Box
	moment  *scenarios.Moment
	outlook *scenarios.Outlook
	log     bool
}

// flows are the flows to draw: tick by tick if these are kept up to the end of
// the axis.
func (a arrivals) flows() scenarios.Flows {
	first := a.moment.First
	if n := len(first.Ends); n > 0 && first.Ends[n-1] >= math.Min(a.end(), a.moment.Reached)*(1-1e-9) {
		return first
	}
	return a.moment.Whole
}

// lane is one plane's part of the panel.
type lane struct {
	canvas.Box
	name            string
	flux            []float64
	style           canvas.Style
	predicted, free *float64
	mean            *float64
	top             float64
	flight          string // what free stands for
	echoes          []scenarios.Echo
}

func (a arrivals) draw() {
	far, near := a.lanes()
	if a.High < 4 {
		far.Box = a.Inside(0, 0, a.Wide, a.High)
		a.lane(far)
		return
	}
	rows := a.High - 1
	far.Box = a.Inside(0, 0, a.Wide, rows-rows/2)
	near.Box = a.Inside(0, rows-rows/2, a.Wide, rows/2)
	a.lane(far)
	a.lane(near)
	a.axis(a.Inside(0, rows, a.Wide, 1))
}

func (a arrivals) lanes() (far, near lane) {
	p, flows := a.outlook.Arrivals, a.flows()
	far = lane{name: "far", flux: flows.Far, style: canvas.Right, predicted: p.Transmitted, free: p.FreeTransmitted,
		mean: a.measured("arrival_transmitted"), top: p.PeakTransmitted, flight: "free flight", echoes: flows.FarEchoes}
	near = lane{name: "near", flux: flows.Near, style: canvas.Left, predicted: p.Reflected, free: p.FreeReflected,
		mean: a.measured("arrival_reflected"), top: p.PeakReflected, flight: "from a hard wall", echoes: flows.NearEchoes}
	if a.outlook.Side == scenarios.FromRight {
		far.style, near.style = near.style, far.style
	}
	return far, near
}

// measured is a quantity of the packet column.
func (a arrivals) measured(name string) *float64 {
	for _, q := range a.moment.Result.Quantities {
		if q.Name == name {
			return q.Packet
		}
	}
	return nil
}

// end is the end of the time axis: when what can be seen is over, or, on a
// logarithmic scale, the present.
func (a arrivals) end() float64 {
	if a.log {
		return math.Max(a.outlook.Event, a.moment.Time)
	}
	return a.outlook.Event
}

func (a arrivals) lane(l lane) {
	head := l.Inside(0, 0, l.Wide, 1)
	if l.High > 1 {
		l.Box = l.Inside(0, 1, l.Wide, l.High-1)
	}
	l.Plot()
	a.mark(l, l.free, 4)
	a.fill(l)
	a.mark(l, l.predicted, 1)
	a.echoes(l)
	l.Box = head
	a.caption(l)
}

// scale holds the highest flow so far and the one expected.
func (a arrivals) scale(l lane) scale {
	s := scale{top: l.top, log: a.log}
	for _, v := range l.flux {
		s.top = math.Max(s.top, v)
	}
	return s
}

// fill draws the flow up to the present, the largest in each column of dots.
func (a arrivals) fill(l lane) {
	wide, high := l.Dots()
	s := a.scale(l)
	if s.top <= 0 || l.predicted == nil {
		return // rounding, if anything
	}
	ends, bin := a.flows().Ends, 0
	for x := range wide {
		from, to := a.end()*float64(x)/float64(wide), a.end()*float64(x+1)/float64(wide)
		for bin > 0 && ends[bin-1] > from {
			bin--
		}
		level := 0
		for ; bin < len(ends) && (bin == 0 || ends[bin-1] < to); bin++ {
			if ends[bin] > from && ends[bin] <= a.moment.Time*(1+1e-9) {
				level = max(level, int(math.Round(s.part(l.flux[bin])*float64(high))))
			}
		}
		l.Fill(x, level, l.style)
	}
}

// mark draws a vertical line of every n-th dot at a time.
func (a arrivals) mark(l lane, t *float64, n int) {
	if t == nil || a.end() <= 0 {
		return
	}
	wide, high := l.Dots()
	x := int(*t / a.end() * float64(wide))
	for y := 0; y < high; y += n {
		l.Invert(x, y, canvas.Strong)
	}
}

// caption names the plane, the mean arrival so far and the predicted one.
func (a arrivals) caption(l lane) {
	if l.predicted == nil {
		l.Text(0, 0, canvas.Faint, cut(l.name+": nothing expected", l.Wide))
		return
	}
	f := timeFormat(a.end(), 8)
	f.decimals = max(0, f.decimals-2)
	x := l.Text(0, 0, l.style, l.name)
	mean := missing
	if l.mean != nil {
		mean = f.text(*l.mean)
	}
	predicted := f.text(*l.predicted)
	mean = pad(mean, len(predicted))
	free := ""
	if l.free != nil {
		free = "  ┊ " + l.flight + " " + f.text(*l.free)
	}
	unit := a.outlook.Units.Time
	for _, text := range []string{
		" mean so far " + mean + "  ┃ predicted " + withUnit(predicted+free, unit),
		" mean so far " + mean + "  ┃ predicted " + withUnit(predicted, unit),
		" mean " + mean + "  ┃ " + withUnit(predicted, unit),
		" " + mean + " ┃ " + withUnit(predicted, unit),
	} {
		if utf8.RuneCountInString(text) <= l.Wide-x {
			l.Text(x, 0, canvas.Faint, text)
			return
		}
	}
}

// axis numbers the times.
func (a arrivals) axis(b canvas.Box) {
	marks, f := ticks(0, a.end(), b.Wide/8)
	unit := a.outlook.Units.Time
	b.TextRight(b.Wide, 0, canvas.Faint, unit)
	for _, t := range marks {
		text := f.text(t)
		c := int(t/a.end()*float64(b.Wide)) - len(text)/2
		if t == 0 {
			c = 0
		}
		if c+len(text) < b.Wide-len(unit) {
			b.Text(c, 0, canvas.Faint, text)
		}
	}
}
