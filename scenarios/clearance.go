package scenarios

import (
	"math"
	"math/cmplx"
)

// startError is what the start of the packet does to the averages. The packet
// is a Gaussian cut off where the grid ends, and its front reaches a little
// into the structure; both cuts change its spectrum by the factor
//
//	|1 - erfc(z)/2|^2 = 1 - Re erfc(z) + |erfc(z)|^2/4,
//	z = d/(2 length) + i (k-k0) length,
//
// d the distance from the centre to the cut. The averages of the change are
// computed with their sign, since for smooth amplitudes its oscillation in k
// cancels, and for a narrow resonance it does not. The front's cut is charged
// six times, and with its largest effect on any probability: what lies beyond
// it is not missing, but it is no incoming wave either, and may end anywhere.
func (p *planner) startError(g geometry) errorSet {
	front := p.cutError(g, g.start).times(6)
	most := math.Max(front.transmitted, math.Max(front.reflected, front.lost))
	front.transmitted, front.reflected, front.lost = most, most, most
	back := p.cutError(g, g.behind-g.start)
	beyond := func(d float64) float64 { return math.Erfc(d/p.scenario.Packet.Length/math.Sqrt2) / 2 }
	total := front.plus(back).plus(p.mismatch(g)).plus(p.caught(g)).plus(p.slowest(g))
	return total.plus(p.misplaced(g, wrongWay(p.scenario.Packet)+beyond(g.start)+beyond(g.near-g.start)))
}

// slowest is what components at k = 0 do to the mean arrivals, which diverge
// logarithmically there: the density |phi(0)|^2 = sqrt(2/pi) length
// exp(-2 length^2 k0^2), times the flight, times the mass, for each power of e
// in k. The averages cut it after many of them, a run when it ends.
func (p *planner) slowest(g geometry) errorSet {
	const powers = 30
	s := p.scenario.Packet.Length
	density := math.Sqrt(2/math.Pi) * s * math.Exp(-2*s*s*p.k0*p.k0)
	m := p.means(g)
	late := powers * density * p.near.Mass
	var e errorSet
	if m.transmitted > leastPart {
		e.arrivalTransmitted = late * (g.start + g.far) / m.transmitted
	}
	if m.reflected > leastPart {
		e.arrivalReflected = late * (g.start + g.near) / m.reflected
	}
	return e.plus(p.hardlyMoving(g).magnitudes(m))
}

// hardlyMoving is what components below a thousandth of the mean wave number
// add to the averages of times. A shape that holds a state at its threshold
// delays them without bound; no run waits for them.
func (p *planner) hardlyMoving(g geometry) errorSet {
	const share = 1e-3
	var e errorSet
	for _, n := range p.averages.Nodes {
		if n.K > share*p.k0 {
			break
		}
		s := sample{Amplitudes: n.Amplitudes}
		t, r := s.arrivals(g)
		e.dwell += n.Weight * s.Dwell
		e.arrivalTransmitted += n.Weight * s.Transmission * math.Abs(t)
		e.arrivalReflected += n.Weight * s.Reflection * math.Abs(r)
	}
	return e
}

// mismatch is the effect of the packet's front on times that are sampled once a
// step. Where the front lies in the structure it is no free wave, and sends
// out waves above the band that the step does not follow. Their amplitude is
// that of the front, exp(-d^2/(4 length^2)); the factors bound what was
// measured on wells, barriers and point potentials at the longest step.
func (p *planner) mismatch(g geometry) errorSet {
	const inLayers, atPlanes = 2, 2e-3
	d := g.start / p.scenario.Packet.Length
	front, m := math.Exp(-d*d/4), p.means(g)
	e := errorSet{dwell: inLayers * front * p.averages.Dwell.Value}
	if m.transmitted > leastPart {
		e.arrivalTransmitted = atPlanes * front * m.timeTransmitted
	}
	if m.reflected > leastPart {
		e.arrivalReflected = atPlanes * front * m.timeReflected
	}
	return e
}

// misplaced charges a probability to every part, at a time off by twice the
// flight; what a bound state catches of it stays in the layers for as long.
func (p *planner) misplaced(g geometry, probability float64) errorSet {
	e := errorSet{
		transmitted: probability, reflected: probability, lost: probability,
	}
	m := p.means(g)
	flight := 2 * probability * math.Max(m.timeTransmitted, m.timeReflected)
	if g.width > 0 {
		e.dwell = flight
	}
	if m.transmitted > leastPart {
		e.arrivalTransmitted = flight / m.transmitted
	}
	if m.reflected > leastPart {
		e.arrivalReflected = flight / m.reflected
	}
	return e
}

// means are the mean arrivals for a geometry.
func (p *planner) means(g geometry) partMeans {
	return timedMeans(p.averages, g)
}

// cutError is the error that one cut at distance d makes. The change of the
// spectrum is averaged with its phase and the modulus taken at the end: what a
// cut leaves over may meet the packet again with any phase.
func (p *planner) cutError(g geometry, d float64) errorSet {
	const lightest = 1e-280 // beyond it erfc overflows, and misplaced charges what is left
	length, m := p.scenario.Packet.Length, p.means(g)
	var second, in, quadrature errorSet
	for _, n := range p.averages.Nodes {
		if n.Weight < lightest {
			continue
		}
		z := complex(d/(2*length), (n.K-p.scenario.Packet.K0)*length)
		c := erfc(z)
		// A cut also moves the centre of the packet as a wave number sees it.
		shift := cmplx.Exp(-z*z) * complex(length/math.SqrtPi/n.Amplitudes.SpeedIn, 0)
		s := sample{Amplitudes: n.Amplitudes, weight: n.Weight}
		second = second.plus(s.changed(g, m, square(c)/4, 0))
		in = in.plus(s.changed(g, m, real(c), real(shift)))
		quadrature = quadrature.plus(s.changed(g, m, imag(c), imag(shift)))
	}
	return second.magnitudes(m).plus(in.magnitudes(m)).plus(quadrature.magnitudes(m))
}

// changed is what a relative change of this energy's weight, and a shift of
// its time, do to the sums.
func (s sample) changed(g geometry, m partMeans, change, shift float64) errorSet {
	t, r := s.arrivals(g)
	w := s.weight
	return errorSet{
		transmitted: w * change * s.Transmission, reflected: w * change * s.Reflection,
		lost: w * change * s.Absorption, dwell: w * change * s.Dwell,
		arrivalTransmitted: w * s.Transmission * (change*(t-m.timeTransmitted) + shift),
		arrivalReflected:   w * s.Reflection * (change*(r-m.timeReflected) + shift),
	}
}

// magnitudes makes every error positive and turns sums over a part into means.
func (e errorSet) magnitudes(m partMeans) errorSet {
	per := func(v, part float64) float64 {
		if part <= leastPart {
			return 0
		}
		return math.Abs(v) / part
	}
	return errorSet{
		math.Abs(e.transmitted), math.Abs(e.reflected), math.Abs(e.lost),
		per(e.arrivalTransmitted, m.transmitted), per(e.arrivalReflected, m.reflected), math.Abs(e.dwell),
	}
}

func square(c complex128) float64 { return real(c)*real(c) + imag(c)*imag(c) }

// erfc is the complementary error function for Re z >= 2, to 1e-6 of itself:
// plenty for an error. It is the continued fraction of M. Abramowitz and
// I. A. Stegun, Handbook of Mathematical Functions, 7.1.14, from its tail.
func erfc(z complex128) complex128 {
	const terms = 12
	f := z
	for n := terms; n > 0; n-- {
		scale := float64(n) / 2 / square(f)
		f = z + complex(scale*real(f), -scale*imag(f)) // z + (n/2)/f
	}
	return cmplx.Exp(-z*z) / (f * complex(math.SqrtPi, 0))
}

// wrongWay bounds the effect of the components that move away from the
// structure: their probability erfc(sqrt2 k0 s)/2 and their interference
// with the mirror components, 2 exp(-2 s^2 k0^2).
func wrongWay(p Packet) float64 {
	return math.Erfc(math.Sqrt2*p.K0*p.Length)/2 + 2*math.Exp(-2*p.K0*p.K0*p.Length*p.Length)
}

// clearance is the number of packet lengths at which a Gaussian's tail holds
// less than a fraction: erfc(n/sqrt2)/2 = fraction.
func clearance(fraction float64) float64 {
	return math.Sqrt2 * math.Erfcinv(math.Max(2*fraction, 1e-300))
}

// positions places start and planes: as close as the packet's tails allow, or
// as far as the scenario's own positions let them be.
func (p *planner) positions() {
	const step, most = 0.25, 40
	farthest := p.scenario.place(most, p.beyond)
	n := clearance(sharePacket * p.scenario.Tolerance)
	for {
		p.geometry = p.scenario.place(n, p.beyond)
		p.start0 = p.startError(p.geometry)
		if n >= most || p.excess() <= sharePacket || p.geometry == farthest {
			return
		}
		n += step
	}
}

// excess is the start's error, less what no distance removes, as a multiple
// of the tolerance.
func (p *planner) excess() float64 {
	fixed := p.misplaced(p.geometry, wrongWay(p.scenario.Packet)).plus(p.slowest(p.geometry))
	return p.weight(p.start0) - p.weight(fixed)
}
