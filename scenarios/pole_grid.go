package scenarios

import (
	"math"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// peak is what the elements and the edges do to a resonance so narrow that
// rounding moves it by a noticeable part of its width. Scattering at one and
// the same energy then differs wildly on the two roads, and means nothing: the
// averages do not feel where in its width a resonance stands. It is compared
// at its own maximum on either road, where a displacement counts only squared.
type peak struct {
	stationary.Pole
	space, edges relativeDeviation
	near, far    float64 // reflection probabilities of the edges
}

// relativeDeviation is the deviation of the peak's heights and times as a part
// of them.
type relativeDeviation struct{ height, time float64 }

// A resonance is narrow below narrowest times the packet's mean kinetic energy.
// Its peak stands for samples up to peakReach widths away; farther off, next
// to nothing of it is left, and a displacement no longer counts.
const (
	narrowest = 1e-5
	peakReach = 1e4
)

// peaks compares every narrow resonance on a mesh.
func (p *planner) peaks(mesh *propagate.Mesh) []peak {
	var out []peak
	kinetic := p.scenario.Packet.Energy - p.near.Height
	for _, r := range p.averages.Resonances {
		if r.Width > narrowest*kinetic {
			continue
		}
		if u := p.state(mesh, r); u != nil {
			if k, ok := p.peak(mesh, r, real(u.Energy)); ok {
				out = append(out, k)
			}
		}
	}
	return out
}

// peak compares a resonance with the same one at another energy on the mesh.
func (p *planner) peak(mesh *propagate.Mesh, r stationary.Pole, energy float64) (peak, bool) {
	fromRight := p.geometry.side == FromRight
	s := sample{energy: r.Energy}
	if err := stationary.New(p.scenario.Structure, fromRight).At(r.Energy, &s.Amplitudes); err != nil {
		return peak{}, false
	}
	exact, edged := propagate.NewScatterer(mesh).At(energy, fromRight)
	ideal := s.ideal(p.geometry)
	k := peak{
		Pole: r, space: relate(exact, ideal), edges: relate(edged, exact),
		near: norm2(edged.EdgeNear), far: norm2(edged.EdgeFar),
	}
	k.space.height += p.displaced(energy-r.Energy, r.Energy)
	return k, true
}

// relate is the deviation of a from b as a part of b: of what is transmitted, or
// where that is next to nothing of the dwell, and of the dwell and the time to
// the far plane, which go as 1/width.
func relate(a, b propagate.Scattered) relativeDeviation {
	part := func(a, b float64) float64 {
		if b == 0 {
			return 0
		}
		return math.Abs(a/b - 1)
	}
	return relativeDeviation{
		height: part(a.Transmission, b.Transmission),
		time:   math.Max(part(a.Dwell, b.Dwell), part(a.PhaseTimeTransmitted, b.PhaseTimeTransmitted)),
	}
}

// displaced is the relative change of the spectrum's density where a resonance
// is displaced in energy, 4 length^2 |k-k0| dk/dE to first order.
func (p *planner) displaced(by, energy float64) float64 {
	packet := p.scenario.Packet
	k := math.Sqrt(2 * p.near.Mass * (energy - p.near.Height))
	return math.Abs(by) * p.near.Mass / k * 4 * packet.Length * packet.Length * math.Abs(k-packet.K0)
}

// peakAt returns the peak that stands for an energy; nil for none.
func peakAt(peaks []peak, energy float64) *peak {
	best, distance := (*peak)(nil), peakReach
	for i := range peaks {
		if d := math.Abs(energy-peaks[i].Energy) / peaks[i].Width; d < distance {
			best, distance = &peaks[i], d
		}
	}
	return best
}

// deviate is what the deviation of a peak means for one of its samples.
func (d relativeDeviation) deviate(s sample, g geometry) deviation {
	t, r := s.arrivals(g)
	area := d.height + d.time // height times width
	return deviation{
		transmitted: s.Transmission * area, reflected: math.Min(s.Transmission+s.Absorption, 1) * area,
		lost: s.Absorption * area, dwell: s.Dwell * area,
		timeTransmitted: t * d.time, timeReflected: r * d.time,
	}
}
