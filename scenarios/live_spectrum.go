package scenarios

import (
	"math"
	"sort"

	"fluxtoll/potential/stationary"
)

// Spectrum is the packet's energy distribution with what the structure makes
// of it, at equally spaced energies, in display units.
type Spectrum struct {
	From, To     float64   // middles of the first and the last bin
	Sent         []float64 // |phi|^2 dk/dE, probability per energy
	Transmission []float64 // mean of T over the bin
	Reflection   []float64
	Peak         []float64 // largest T in the bin: resonances narrower than it
}

const (
	spectrumBins  = 512
	spectrumReach = 4 // standard deviations shown on either side
)

// spectrum reads the averages' own quadrature points: no energy is solved for
// anew.
func (t *Trial) spectrum() Spectrum {
	s := t.Scenario
	near, _ := s.leads()
	width := 1 / (2 * s.Packet.Length)
	energy := func(k float64) float64 { return near.Height + k*k/(2*near.Mass) }
	low := energy(math.Max(s.Packet.K0-spectrumReach*width, 0.02*s.Packet.K0))
	high := energy(s.Packet.K0 + spectrumReach*width)
	step := (high - low) / (spectrumBins - 1)
	out := Spectrum{From: low * s.Scale.Energy, To: high * s.Scale.Energy}
	course := newCourse(t.Averages.Nodes, energy)
	for i := range spectrumBins {
		e := low + step*float64(i)
		k := math.Sqrt(2 * near.Mass * (e - near.Height))
		d := (k - s.Packet.K0) / width
		sent := math.Exp(-d*d/2) / (math.Sqrt(2*math.Pi) * width) * near.Mass / k
		mean, peak := course.over(e-step/2, e+step/2)
		out.Sent = append(out.Sent, sent/s.Scale.Energy)
		out.Transmission = append(out.Transmission, mean.Transmission)
		out.Reflection = append(out.Reflection, mean.Reflection)
		out.Peak = append(out.Peak, peak)
	}
	return out
}

// course is scattering against energy, joined by straight lines.
type course struct {
	energies []float64
	nodes    []stationary.Node
}

func newCourse(nodes []stationary.Node, energy leadEnergy) course {
	c := course{make([]float64, len(nodes)), nodes}
	for i, n := range nodes {
		c.energies[i] = energy(n.K)
	}
	return c
}

// pair is T and R at one energy.
type pair struct{ Transmission, Reflection float64 }

func (c course) node(i int) pair {
	a := &c.nodes[i].Amplitudes
	return pair{a.Transmission, a.Reflection}
}

// at interpolates; beyond the ends it keeps the last value.
func (c course) at(e float64) pair {
	i := sort.SearchFloat64s(c.energies, e)
	switch {
	case len(c.nodes) == 0:
		return pair{}
	case i == 0:
		return c.node(0)
	case i == len(c.nodes):
		return c.node(i - 1)
	}
	a, b := c.node(i-1), c.node(i)
	f := (e - c.energies[i-1]) / (c.energies[i] - c.energies[i-1])
	return pair{a.Transmission + f*(b.Transmission-a.Transmission), a.Reflection + f*(b.Reflection-a.Reflection)}
}

// over is the mean over [from, to] and the largest T there.
func (c course) over(from, to float64) (mean pair, peak float64) {
	last, at := c.at(from), from
	peak = last.Transmission
	add := func(e float64, p pair) {
		h := (e - at) / (to - from) / 2
		mean.Transmission += h * (p.Transmission + last.Transmission)
		mean.Reflection += h * (p.Reflection + last.Reflection)
		peak, last, at = math.Max(peak, p.Transmission), p, e
	}
	for i := sort.SearchFloat64s(c.energies, from); i < len(c.energies) && c.energies[i] < to; i++ {
		add(c.energies[i], c.node(i))
	}
	add(to, c.at(to))
	return mean, peak
}
