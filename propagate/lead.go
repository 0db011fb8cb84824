package propagate

import (
	"math/cmplx"

	"fluxtoll/potential"
)

// admittance is what stands in for everything behind a plane: the term it
// adds to the plane's equation, and that term's derivative with respect to
// energy.
type admittance struct{ value, slope complex128 }

// leadWave is a wave in a lead: its wave number (i kappa where closed), the
// derivative of that with respect to energy, and the lead's mass.
type leadWave struct {
	k, slope complex128
	mass     float64
}

func waveIn(l potential.Lead, energy float64) leadWave {
	k := cmplx.Sqrt(complex(2*l.Mass*(energy-l.Height), 0))
	return leadWave{k: k, slope: complex(l.Mass, 0) / k, mass: l.Mass}
}

// speed is the group velocity, 0 where the lead is closed.
func (w leadWave) speed() float64 { return real(w.k) / w.mass }

// open is the admittance of an endless lead, -ik/(2m).
func (w leadWave) open() admittance {
	f := complex(0, -1/(2*w.mass))
	return admittance{f * w.k, f * w.slope}
}

// reflect is the amplitude with which an admittance sends back a wave, the
// phase referred to its plane.
func (w leadWave) reflect(value complex128) complex128 {
	open := w.open().value
	return -(value - open) / (value + open)
}
