package scenarios

import (
	"math"

	"fluxtoll/potential"
)

// Scenario is one packet on one structure, ready to be computed: everything
// in internal units, in which hbar = 1 and the packet's lead has mass 1 and
// the packet mean wave number 1. Scale brings numbers back.
type Scenario struct {
	Title     string
	Tolerance float64 // absolute on probabilities, relative on times
	Structure *potential.Structure
	Packet    Packet
	Planes    Planes
	Scale     Scale
	Notes     []string // remarks on what the scenario asks for
}

// Side is the lead a packet comes from.
type Side int

// The two sides.
const (
	FromLeft Side = iota
	FromRight
)

// Packet is a Gaussian packet psi0 ~ exp(-(x-start)^2/(4 length^2) + i k0 x).
type Packet struct {
	Side   Side
	Energy float64  // total energy, on the scale of the heights
	K0     float64  // mean wave number in its lead, > 0 on either side
	Length float64  // standard deviation of |psi|^2 in x
	Start  *float64 // centre at t = 0; nil: to be chosen
}

// Planes are the detector planes; nil: to be chosen.
type Planes struct{ Near, Far *float64 }

// Scale holds, for each kind of quantity, how many of the display unit one
// internal unit is, and the display unit's name ("" in natural units).
type Scale struct {
	Length, Energy, Time             float64
	LengthUnit, EnergyUnit, TimeUnit string
}

// leastTimeTolerance is the smallest relative error asked of a time: a mean
// time is a sum over the whole run, and rounding in psi weighs as long as it.
const leastTimeTolerance = 1e-10

// timeTolerance is the relative error allowed for times.
func (s *Scenario) timeTolerance() float64 { return math.Max(s.Tolerance, leastTimeTolerance) }
