package tui

import (
	"math"

	"fluxtoll/scenarios"
	"fluxtoll/tui/player"
)

// The fixture is a made-up moment, given by formulas, so that the golden
// screens depend on the drawing alone: a packet that has just met a barrier
// from 0 to 5, one part returning, one going on.

func ptr(v float64) *float64 { return &v }

func gaussian(x, centre, width float64) float64 {
	d := (x - centre) / width
	return math.Exp(-d*d/2) / (math.Sqrt(2*math.Pi) * width)
}

func fixtureOutlook() *scenarios.Outlook {
	o := &scenarios.Outlook{
		Title: "A made-up pulse on a barrier", Units: scenarios.Units{Length: "nm", Energy: "meV", Time: "fs"},
		Tolerance: 1e-6, Width: 5, Faces: []float64{0, 5}, Energy: 150, Spread: 16,
		Planes: &scenarios.PlanesAt{Near: -190, Far: 60, Start: -100},
		From:   -200, To: 60, Fringe: 4, Duration: 900, Event: 600, Contact: 80, Top: 0.022,
		Predicted: scenarios.Ledger{Reflected: 0.6, Transmitted: 0.4},
		Arrivals: scenarios.Arrivals{
			Transmitted: ptr(210.25), Reflected: ptr(400.5), FreeTransmitted: ptr(198.25), FreeReflected: ptr(396.5),
			PeakTransmitted: 0.004, PeakReflected: 0.006,
		},
		Shifts: []scenarios.Shift{
			{Part: "transmitted", Total: 12, Structure: 14.25, Filter: -2.25, Error: 1e-7, Free: 198.25},
			{Part: "reflected", Total: 4, Structure: 3.5, Filter: 0.5, Error: 1e-7, Free: 396.5},
		},
		Spectrum: scenarios.Spectrum{From: 90, To: 210},
		Resonances: []scenarios.SeenResonance{
			{Energy: 75.5, Width: 0.5, Lifetime: 1316.4},
			{Energy: 152.25, Width: 2.125, Lifetime: 309.75, EnergyError: 1e-9, WidthError: 0.01, LifetimeError: 0.02},
			{Energy: 900, Width: 20, Lifetime: 32.9},
		},
	}
	for i := range 128 {
		e := 90 + 120*float64(i)/127
		t := 1 / (1 + math.Exp(-(e-155)/10))
		o.Spectrum.Sent = append(o.Spectrum.Sent, gaussian(e, 150, 16))
		o.Spectrum.Transmission = append(o.Spectrum.Transmission, t)
		o.Spectrum.Reflection = append(o.Spectrum.Reflection, 1-t)
		o.Spectrum.Peak = append(o.Spectrum.Peak, t)
	}
	return o
}

func fixtureQuantities(ended bool) []scenarios.Measure {
	list := []scenarios.Measure{
		{Name: "reflected", PlaneWave: ptr(0.61), Average: ptr(0.6), Packet: ptr(0.1)},
		{Name: "transmitted", PlaneWave: ptr(0.39), Average: ptr(0.4), Packet: ptr(0.2)},
		{Name: "arrival_transmitted", Unit: "fs", PlaneWave: ptr(211), Average: ptr(210.25), Packet: ptr(201.5)},
		{Name: "arrival_reflected", Unit: "fs", PlaneWave: ptr(399), Average: ptr(400.5)},
		{Name: "group_delay_transmitted", Unit: "fs", PlaneWave: ptr(15), Average: ptr(14.5)},
		{Name: "group_delay_reflected", Unit: "fs", PlaneWave: ptr(3.6), Average: ptr(3.5)},
		{Name: "dwell", Unit: "fs", PlaneWave: ptr(9), Average: ptr(8.75), Packet: ptr(7.5)},
	}
	for i := range list {
		if q := &list[i]; ended {
			q.Packet, q.Difference, q.Budget, q.Agrees = q.Average, ptr(1e-9), ptr(3e-9), true
		}
	}
	return list
}

// fixtureColumn appends one column at x.
func fixtureColumn(m *scenarios.Moment, x float64, ended bool) {
	back, on := 0.6*gaussian(x, -45, 20), 0.4*gaussian(x, 30, 14)
	flow, high := 0.0, 0.0
	switch {
	case x > 2:
		back, flow = 0, 1
	case x > -20:
		on, flow = 0, -0.2
	default:
		on, flow = 0, -1
	}
	if x > 0 && x < 5 {
		high = 300
	}
	if ended {
		back, on = 0, 0
	}
	m.Density, m.Peak = append(m.Density, back+on), append(m.Peak, back+on+0.4*back)
	m.Flow, m.Free = append(m.Flow, flow), append(m.Free, gaussian(x, 40, 20))
	m.Low, m.High = append(m.Low, 0), append(m.High, high)
}

// fixture is the frame; columns is the width of its window.
func fixture(columns int, ended bool) *player.Frame {
	o := fixtureOutlook()
	m := &scenarios.Moment{
		Tick: 300, Time: 205.5, Steps: 31, Ended: ended, Reached: 205.5, Centre: -30,
		Window: scenarios.Window{From: o.From, To: o.To, Columns: columns},
		Ledger: scenarios.Ledger{Reflected: 0.1, Transmitted: 0.2, Trapped: 0.7},
		Result: &scenarios.Result{Quantities: fixtureQuantities(ended), Verdict: scenarios.Agrees, Ledger: &scenarios.Ledger{}},
	}
	if ended {
		m.Time, m.Reached, m.Ledger = 880, 880, scenarios.Ledger{Reflected: 0.6, Transmitted: 0.4}
	}
	for c := range columns {
		fixtureColumn(m, o.From+(o.To-o.From)*(float64(c)+0.5)/float64(columns), ended)
	}
	for i := range 200 {
		t := m.Reached * float64(i+1) / 200
		m.First.Ends = append(m.First.Ends, t)
		m.First.Far = append(m.First.Far, 0.4*gaussian(t, 210, 38)+0.08*gaussian(t, 450, 38))
		m.First.Near = append(m.First.Near, 0.6*gaussian(t, 400, 40))
	}
	m.First.FarEchoes = []scenarios.Echo{
		{Number: 1, Time: 210, Height: 0.4 * gaussian(0, 0, 38)}, {Number: 2, Time: 450, Height: 0.08 * gaussian(0, 0, 38)},
		{Number: 3, Time: 455, Height: 0.001}, {Number: 4, Time: 2000, Height: 0.001},
	}
	m.Whole = m.First
	return &player.Frame{Scenario: 1, Moment: m, Outlook: o, Tick: 0.5, Pace: 1, Paused: ended}
}

// fixtureScreen is the screen that shows the frame.
func fixtureScreen(w int, ended bool) screen {
	v := newView()
	f := fixture(2*w, ended)
	v.update(f.Outlook, f.Moment, 2*w)
	return screen{frame: f, want: v.want, scale: v.scale(), ghost: true, hints: hints(watching)}
}
