package scenarios

import (
	"math"
	"sort"

	"fluxtoll/potential"
)

// Window is the part of the x axis that is looked at, in display units, and
// into how many columns it is divided.
type Window struct {
	From, To float64
	Columns  int
}

// edge is the position of the left edge of a column.
func (w Window) edge(column int) float64 {
	return w.From + (w.To-w.From)*float64(column)/float64(w.Columns)
}

// Moment is what there is to see at one tick, in display units. Its slices
// are its own.
type Moment struct {
	Tick    int
	Time    float64
	Steps   int // steps of the run so far
	Ended   bool
	Reached float64 // latest time so far
	Centre  float64 // mean position of what is between the planes
	Window  Window
	// One value for each column of the window: mean and largest density, the
	// flow as a part of what the density would carry at the packet's speed,
	// to the right where positive, the free packet's density, and the range
	// of heights.
	Density, Peak, Flow, Free []float64
	Low, High                 []float64
	Ledger                    Ledger
	Result                    *Result
	// Flow through the planes up to Reached: tick by tick, for as long as that
	// is kept, and in bins over the whole run.
	First, Whole Flows
}

// Flows are mean outward flows through both planes, probability per time, in
// bins that end at Ends; the first begins at 0.
type Flows struct {
	Ends, Near, Far       []float64
	NearEchoes, FarEchoes []Echo // parts of each, where it is split
}

// Moment looks at the present tick through a window.
func (l *Live) Moment(w Window) *Moment {
	m := &Moment{Tick: l.tick, Ended: l.Ended(), Window: w, Result: l.Result()}
	l.heights(m)
	if l.Trial.Run == nil {
		return m
	}
	m.Time = l.Time()
	m.Steps = l.Trial.Run.Ledger().Steps
	m.Reached = l.Latest()
	m.Ledger = l.between.ledger()
	if l.Ended() { // with the tail, if there is one
		m.Ledger = l.Trial.ledger()
	}
	psi := l.between.Run.Psi()
	m.Centre = l.sampler.Centre(psi) * l.Trial.Scenario.Scale.Length
	l.columns(m, psi)
	l.free(m)
	l.flows(m)
	return m
}

// flows copies the history and marks the parts of split pulses.
func (l *Live) flows(m *Moment) {
	unit := l.Trial.Scenario.Scale.Time
	m.First, m.Whole = l.history.first.shown(unit), l.history.whole.shown(unit)
	m.First.mark(l.Outlook.Arrivals)
	m.Whole.mark(l.Outlook.Arrivals)
}

// shown is a history in display units.
func (p passages) shown(unit float64) Flows {
	n := len(p.ends)
	f := Flows{Ends: make([]float64, n), Near: make([]float64, n), Far: make([]float64, n)}
	begin := 0.0
	for i, end := range p.ends {
		f.Ends[i] = end * unit
		f.Near[i], f.Far[i] = p.near[i]/(f.Ends[i]-begin), p.far[i]/(f.Ends[i]-begin)
		begin = f.Ends[i]
	}
	return f
}

// samplesPerFringe points are taken in a fringe of the interference, so that
// a column's mean and peak are right however many fringes it holds.
const (
	samplesPerFringe = 6
	mostPerColumn    = 16
)

// perColumn is the number of points sampled in each column.
func (l *Live) perColumn(w Window) int {
	width := (w.To - w.From) / float64(w.Columns)
	return max(2, min(mostPerColumn, int(math.Ceil(samplesPerFringe*width/l.Outlook.Fringe))))
}

// columns samples density and flow.
func (l *Live) columns(m *Moment, psi []complex128) {
	w, unit := m.Window, l.Trial.Scenario.Scale.Length
	m.Density, m.Peak, m.Flow = make([]float64, w.Columns), make([]float64, w.Columns), make([]float64, w.Columns)
	n := l.perColumn(w)
	for c := range w.Columns {
		from, to := w.edge(c)/unit, w.edge(c+1)/unit
		var sum, current, peak float64
		for i := range n {
			d, j := l.sampler.Flow(psi, from+(to-from)*(float64(i)+0.5)/float64(n))
			sum, current, peak = sum+d, current+j, math.Max(peak, d)
		}
		m.Density[c], m.Flow[c], m.Peak[c] = sum/float64(n)/unit, current/float64(n)/unit, peak/unit
	}
	l.relate(m)
}

// relate turns the current into a part of what the density could carry at the
// speed that the mean energy has there, the density taken over a fringe:
// between the crests of a standing wave there is nothing that could flow.
func (l *Live) relate(m *Moment) {
	w := m.Window
	reach := int(l.Outlook.Fringe / 2 / ((w.To - w.From) / float64(w.Columns)))
	reach = min(reach, w.Columns)
	sum, count, lead := 0.0, 0, 0
	tail := 0
	for c := range m.Flow {
		for ; lead <= min(c+reach, w.Columns-1); lead++ {
			sum, count = sum+m.Density[lead], count+1
		}
		for ; tail < c-reach; tail++ {
			sum, count = sum-m.Density[tail], count-1
		}
		mean := math.Max(sum/float64(count), m.Density[c]/4)
		if mean <= 0 {
			m.Flow[c] = 0
			continue
		}
		m.Flow[c] = math.Max(-1, math.Min(1, m.Flow[c]/(l.profile.speed[c]*mean)))
	}
}

// free is the density of the packet as if the structure were not there.
func (l *Live) free(m *Moment) {
	unit := l.Trial.Scenario.Scale.Length
	before, width := l.Trial.freeAt(l.time())
	centre := l.Trial.Plan.at(before)
	m.Free = make([]float64, m.Window.Columns)
	for c := range m.Free {
		x := (m.Window.edge(c) + m.Window.edge(c+1)) / 2 / unit
		d := (x - centre) / width
		m.Free[c] = math.Exp(-d*d/2) / (math.Sqrt(2*math.Pi) * width) / unit
	}
}

// heights are the lowest and the highest V in each column; a layer thinner
// than a column is not missed. They stay the same while the window does.
func (l *Live) heights(m *Moment) {
	w := m.Window
	if l.profile.window != w {
		l.profile = profile{w, make([]float64, w.Columns), make([]float64, w.Columns), l.speeds(w)}
		unit := l.Trial.Scenario.Scale
		for c := range w.Columns {
			low, high := heightsIn(l.Trial.Scenario.Structure, w.edge(c)/unit.Length, w.edge(c+1)/unit.Length)
			l.profile.low[c], l.profile.high[c] = low*unit.Energy, high*unit.Energy
		}
	}
	m.Low, m.High = l.profile.low, l.profile.high
}

// profile is the course of the height through a window.
type profile struct {
	window    Window
	low, high []float64
	speed     []float64 // internal units
}

// speeds are those of the packet's mean energy in the middle of each column,
// and the packet's own where that energy is not allowed.
func (l *Live) speeds(w Window) []float64 {
	s, unit := l.Trial.Scenario, l.Trial.Scenario.Scale.Length
	near, _ := s.leads()
	out := make([]float64, w.Columns)
	for c := range out {
		x := (w.edge(c) + w.edge(c+1)) / 2 / unit
		out[c] = s.Packet.K0 / near.Mass
		if kinetic := s.Packet.Energy - s.Structure.HeightAt(x); kinetic > 0 {
			out[c] = math.Sqrt(2 * kinetic / s.Structure.MassAt(x))
		}
	}
	return out
}

// heightSamples points are looked at in each segment within a column, both
// its ends included.
const heightSamples = 8

// heightsIn is the range of V within [from, to].
func heightsIn(s *potential.Structure, from, to float64) (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	see := func(v float64) { low, high = math.Min(low, v), math.Max(high, v) }
	if from < 0 {
		see(s.Entry.Height)
	}
	if to > s.Width() {
		see(s.Exit.Height)
	}
	first := sort.Search(len(s.Segments), func(i int) bool { return s.Segments[i].To > from })
	for _, g := range s.Segments[first:] {
		if g.From >= to {
			break
		}
		a, b := math.Max(g.From, from), math.Min(g.To, to)
		for i := range heightSamples {
			see(g.Height.At(a + (b-a)*float64(i)/(heightSamples-1)))
		}
	}
	if low > high {
		see(s.HeightAt(from))
	}
	return low, high
}
