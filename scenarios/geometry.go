package scenarios

import (
	"math"

	"fluxtoll/potential"
	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// geometry is where the packet starts and where it is measured, as distances
// from the faces of the structure, seen from the packet's side.
type geometry struct {
	side   Side
	width  float64 // of the structure
	start  float64 // centre at t = 0, before the near face
	near   float64 // near plane, before the near face; beyond the start
	far    float64 // far plane, behind the far face
	behind float64 // end of the real grid before the near face, >= near

	beyond stationary.Mean // what a closed far lead takes off the sum of times at the far plane
}

// at turns a distance before the near face into a position.
func (g geometry) at(before float64) float64 {
	if g.side == FromRight {
		return g.width + before
	}
	return -before
}

// before turns a position into a distance before the near face.
func (g geometry) before(x float64) float64 {
	if g.side == FromRight {
		return x - g.width
	}
	return -x
}

// farAt is the position of the far plane.
func (g geometry) farAt() float64 {
	if g.side == FromRight {
		return -g.far
	}
	return g.width + g.far
}

// extent is the geometry as the packet road takes it.
func (g geometry) extent() propagate.Extent {
	if g.side == FromRight {
		return propagate.Extent{Left: -g.far, PlaneLeft: -g.far, PlaneRight: g.width + g.near, Right: g.width + g.behind}
	}
	return propagate.Extent{Left: -g.behind, PlaneLeft: -g.near, PlaneRight: g.width + g.far, Right: g.width + g.far}
}

// leads returns the packet's lead and the far lead.
func (s *Scenario) leads() (near, far potential.Lead) {
	if s.Packet.Side == FromRight {
		return s.Structure.Exit, s.Structure.Entry
	}
	return s.Structure.Entry, s.Structure.Exit
}

// farLengths is how many packet lengths behind the structure the far plane
// stands when nobody says otherwise: outside the near field, close enough to
// be reached soon.
const farLengths = 3

// jump is the size, relative to its peak, at which the packet is cut off
// where the grid ends. A jump sends out waves of every energy, and what is
// sampled once a step sees them as its own.
func (s *Scenario) jump() float64 { return math.Min(1e-9, 1e-3*s.Tolerance) }

// place chooses what the scenario leaves open. clear is the number of packet
// lengths at which the packet's tail is negligible.
func (s *Scenario) place(clear float64, beyond stationary.Mean) geometry {
	g := geometry{side: s.Packet.Side, width: s.Structure.Width(), beyond: beyond}
	reach := clear * s.Packet.Length
	g.start = s.roundUp(reach)
	if s.Planes.Near != nil {
		// Halfway at most: as far from the plane as from the structure.
		g.near = g.before(*s.Planes.Near)
		g.start = math.Min(g.start, g.near/2)
	}
	if s.Packet.Start != nil {
		g.start = g.before(*s.Packet.Start)
	}
	if s.Planes.Near == nil {
		g.near = s.roundUp(g.start + reach)
	}
	g.far = s.farDistance()
	g.behind = math.Max(g.near, g.start+2*math.Sqrt(-math.Log(s.jump()))*s.Packet.Length)
	return g
}

// farDistance is the distance of the far plane behind the structure.
func (s *Scenario) farDistance() float64 {
	switch {
	case s.Planes.Far == nil:
		return s.roundUp(farLengths * s.Packet.Length)
	case s.Packet.Side == FromRight:
		return -*s.Planes.Far
	}
	return *s.Planes.Far - s.Structure.Width()
}

// roundUp rounds a length up to two digits in display units, so that chosen
// positions read well.
func (s *Scenario) roundUp(x float64) float64 {
	shown := x * s.Scale.Length
	unit := math.Pow(10, math.Floor(math.Log10(shown))-1)
	return math.Ceil(shown/unit) * unit / s.Scale.Length
}
