package scenarios

import (
	"math"
	"math/cmplx"

	"fluxtoll/propagate"
)

// slips are errors of what is taken out of the record at one energy, as parts
// of the incoming amplitude.
type slips struct {
	front, back, plane float64 // the packet cut off by the structure, by the end of the grid, by the near plane
	wrongWay           float64 // components that move away from the structure
	alias              float64 // energies that share the phase of a step
	noise              float64 // rounding, and waves of the grid
	end                float64 // end of the record
}

// slips computes them for a wave number. A packet cut off at the distance d
// from its centre lacks the part erfc(z)/2 of phi(k), see startError; here no
// average is taken, over which its phase would cancel.
func (s *shooter) slips(k float64) slips {
	p, length, k0 := s.Plan, s.Scenario.Packet.Length, s.Scenario.Packet.K0
	cut := func(d float64) float64 {
		return cmplx.Abs(erfc(complex(math.Max(1, d/(2*length)), (k-k0)*length))) / 2
	}
	d := (k - k0) * length
	return slips{
		front: cut(p.start), back: cut(p.behind - p.start), plane: cut(p.near - p.start),
		wrongWay: math.Exp(-4 * k * k0 * length * length),
		alias:    s.aliases(k),
		noise:    s.noise * math.Exp(d*d),
		end:      s.Run.Ledger().Time,
	}
}

// aliases is what the two energies whose phase differs by a turn have more in
// them than this one.
func (s *shooter) aliases(k float64) float64 {
	p, total := s.Plan, 0.0
	energy := s.near.Height + k*k/(2*s.near.Mass)
	theta, _ := p.Pade.Phase((energy - p.Origin) * p.TimeStep)
	for _, turn := range []float64{-2 * math.Pi, 2 * math.Pi} {
		if math.Abs(theta+turn) >= 0.99*math.Pi*float64(p.Pade.Member) {
			continue
		}
		other := wave(s.near, p.Origin+p.Pade.Energy(theta+turn)/p.TimeStep)
		if other > 0 {
			total += cmplx.Abs(s.incoming(other)) / cmplx.Abs(s.incoming(k))
		}
	}
	return total
}

// transmitted is the error of t and of its delay. What of the packet's front
// lies within or behind the structure is charged four times, as in the budget.
func (e slips) transmitted(c propagate.Component, in, size float64) (slip, shift float64) {
	now := 4*e.front + (e.back+e.alias)*size
	return e.sum(c, now, in, size)
}

// reflected is the error of r and of its delay.
func (e slips) reflected(c propagate.Component, in, size float64) (slip, shift float64) {
	now := 4*e.front + e.plane + e.wrongWay + (e.back+e.alias)*size
	return e.sum(c, now, in, size)
}

// sum adds what the end of the record and rounding do. An error of amplitude
// e that passes at another time moves the delay by e/|t| times the difference.
func (e slips) sum(c propagate.Component, now, in, size float64) (slip, shift float64) {
	open, noise := shotSafety*c.Open/in, shotSafety*e.noise
	now *= shotSafety
	slip = now + open + noise
	late := now*math.Abs(c.Time) + open*(math.Abs(c.Late)+math.Abs(c.Time)) + noise*e.end
	return slip, ratio(late*weakSafety(size), math.Max(0, size-slip))
}

// shotSafety covers what these estimates were found too small by near narrow
// resonances and at the ends of the band.
const shotSafety = 3

// weakSafety goes from 1 to 4 for amplitudes below a tenth. Near a zero of an
// amplitude its delay was found off by twice the sum of the errors above.
func weakSafety(size float64) float64 {
	const weak = 0.1
	return 1 + 3*math.Max(0, 1-size/weak)
}
