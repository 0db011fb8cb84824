package scenarios

import (
	"math"
	"math/cmplx"
)

// curveMaker says how a curve follows from the shots.
type curveMaker struct {
	name, unit string
	scale      float64
	round      bool // a phase: differences are taken to the nearest turn
	of         func(shot) (packet, stationary, bound float64, ok bool)
}

// leastShot is the smallest amplitude, as a multiple of its error, whose phase
// and delay are given.
const leastShot = 10

// flown is by how much the error of a phase on the grid may exceed that of its
// derivative at one energy times the kinetic energy: the derivative passes
// through zero here and there.
const flown = 4

// curvesOf lists the curves.
func (t *Trial) curvesOf() []curveMaker {
	unit, scale := t.Scenario.Scale.TimeUnit, t.Scenario.Scale.Time
	known := func(amplitude complex128, slip float64) bool { return cmplx.Abs(amplitude) > leastShot*slip }
	return []curveMaker{
		{"transmission", "", 1, false, func(s shot) (float64, float64, float64, bool) {
			return square(s.t), s.exact.Transmission, squareError(s.t, s.slipT) + s.gridT, true
		}},
		{"reflection", "", 1, false, func(s shot) (float64, float64, float64, bool) {
			return square(s.r), s.exact.Reflection, squareError(s.r, s.slipR) + s.gridR, true
		}},
		{"phase_transmitted", "rad", 1, true, func(s shot) (float64, float64, float64, bool) {
			return cmplx.Phase(s.t), cmplx.Phase(s.exact.T), phaseError(s.t, s.slipT, s.gridT, flown*s.gridTT*s.kinetic),
				s.openFar && known(s.t, s.slipT)
		}},
		{"phase_reflected", "rad", 1, true, func(s shot) (float64, float64, float64, bool) {
			return cmplx.Phase(s.r), cmplx.Phase(s.exact.R), phaseError(s.r, s.slipR, s.gridR, flown*s.gridTR*s.kinetic),
				known(s.r, s.slipR)
		}},
		{"group_delay_transmitted", unit, scale, false, func(s shot) (float64, float64, float64, bool) {
			return s.delayT, s.exact.GroupDelayTransmitted, s.shiftT + s.gridTT, s.openFar && known(s.t, s.slipT)
		}},
		{"group_delay_reflected", unit, scale, false, func(s shot) (float64, float64, float64, bool) {
			return s.delayR, s.exact.GroupDelayReflected, s.shiftR + s.gridTR, known(s.r, s.slipR)
		}},
	}
}

// squareError is the error of |a|^2 by that of a.
func squareError(a complex128, slip float64) float64 { return slip * (2*cmplx.Abs(a) + slip) }

// phaseError is the error of arg a by those of a and of |a|^2, and of its
// flight on the grid.
func phaseError(a complex128, slip, probability, flight float64) float64 {
	size := cmplx.Abs(a)
	return ratio(slip, math.Max(0, size-slip)) + ratio(probability, size*size) + flight
}

// build makes the curve and finds its worst points.
func (c curveMaker) build(energies []float64, shots []shot) ShotCurve {
	out := ShotCurve{
		Name: c.name, Unit: c.unit, Agrees: true,
		Packet: []*float64{}, Stationary: []*float64{}, Error: []*float64{},
	}
	for i, s := range shots {
		packet, stationary, bound, ok := c.of(s)
		if !ok {
			out.Packet, out.Stationary, out.Error = append(out.Packet, nil), append(out.Stationary, nil), append(out.Error, nil)
			continue
		}
		off := packet - stationary
		if c.round {
			off = math.Remainder(off, 2*math.Pi)
			packet = stationary + off
		}
		off, bound = math.Abs(off)*c.scale, bound*c.scale
		out.Packet = append(out.Packet, scaled(packet, c.scale))
		out.Stationary = append(out.Stationary, scaled(stationary, c.scale))
		out.Error = append(out.Error, scaled(bound, 1))
		out.Agrees = out.Agrees && off <= bound
		out.Worst.meet(off, bound, energies[i])
		out.WorstWeight.meet(off*s.weight, bound*s.weight, energies[i])
	}
	return out
}

// meet keeps the larger deviation.
func (d *Deviation) meet(size, bound, energy float64) {
	if !(size <= d.Size) || d.Energy == 0 {
		*d = Deviation{size, energy, bound}
	}
}
