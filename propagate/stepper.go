package propagate

import (
	"fmt"
	"slices"
)

// Stepper carries one packet through time on a mesh. It owns its wave
// function; the mesh is shared. One goroutine at a time may use it.
type Stepper struct {
	Mesh *Mesh
	Pade Pade

	*gear          // the present one
	gears  []*gear // all that were used
	psi    wave
	nodal  []complex128 // psi on the nodes, as of the last call of Psi
	chi    []complex128 // scratch: chi on the faces
	ledger Ledger
	lost   []float64 // scratch: absorbed in this step, by layer
	mirror bool
}

// NewStepper prepares the factors of the step and puts the packet at t = 0.
// Phases are counted from the energy origin, which changes psi by the phase
// exp(i origin t) and nothing that is measured, but lets a step be longer: its
// error grows with |E-origin| dt.
func NewStepper(m *Mesh, pade Pade, dt, origin float64, packet Packet) (*Stepper, error) {
	return newStepper(m, pade, dt, origin, packet, true)
}

func newStepper(m *Mesh, pade Pade, dt, origin float64, packet Packet, mirror bool) (*Stepper, error) {
	if !(dt > 0) {
		return nil, fmt.Errorf("propagate: time step %g is not greater than zero", dt)
	}
	s := &Stepper{
		Mesh: m, Pade: pade, mirror: mirror,
		psi: newWave(m), nodal: make([]complex128, m.Nodes()),
		chi:  make([]complex128, len(m.faces)),
		lost: make([]float64, len(m.layerSpan)),
	}
	if err := packet.fill(m, s.psi, s.nodal); err != nil {
		return nil, err
	}
	s.shift(dt, origin)
	s.ledger = newLedger(m, s.psi)
	s.dwell(0)
	return s, nil
}

// Advance takes one step and enters in the ledger what it moved. It does not
// allocate.
func (s *Stepper) Advance() {
	clear(s.lost)
	left, right := 0.0, 0.0
	for _, f := range s.factors {
		f.solve(s.psi, s.chi)
		left += f.outflow(s.psi, s.chi, false)
		right += f.outflow(s.psi, s.chi, true)
		f.update(s.psi, s.chi, s.lost)
	}
	s.ledger.enter(s.Step, left, right, s.lost)
	s.dwell(s.Step)
}

// dwell measures the probability in every layer and adds the trapezoid over
// the last step to the dwell times: of spectral accuracy, since the integrand
// vanishes smoothly at both ends of a run.
func (s *Stepper) dwell(dt float64) {
	for i, span := range s.Mesh.layerSpan {
		now := s.Mesh.norm(span[0], span[1], s.psi)
		s.ledger.Dwell[i] += dt * (s.ledger.InLayer[i] + now) / 2
		s.ledger.InLayer[i] = now
	}
}

// State is a moment of a run, from which it can be taken up again.
type State struct {
	psi    []complex128
	ledger Ledger
	look   look
	gear   *gear
}

// Save copies the present moment.
func (s *Stepper) Save() State {
	return State{psi: slices.Clone(s.psi.all), ledger: s.ledger.Clone(), look: firstLook(), gear: s.gear}
}

// Restore goes back (or on) to a moment of this run. What follows is bit for
// bit what followed then.
func (s *Stepper) Restore(at State) {
	copy(s.psi.all, at.psi)
	s.ledger = at.ledger.Clone()
	s.gear = at.gear
}

// Bytes is the memory that a saved state takes.
func (s State) Bytes() int { return 16*len(s.psi) + 3*8*len(s.ledger.Lost) }

// Ledger returns where the probability is now. Its slices are the stepper's
// own: copy them (Ledger.Clone) to keep them.
func (s *Stepper) Ledger() *Ledger { return &s.ledger }

// Psi is the wave function on the nodes (Mesh.X) at the present moment. The
// slice is the stepper's own and is written anew by each call; changing it
// changes nothing.
func (s *Stepper) Psi() []complex128 {
	s.Mesh.expand(s.psi, s.nodal)
	return s.nodal
}

// Inside is the probability between the planes, summed anew from psi.
func (s *Stepper) Inside() float64 { return s.Mesh.norm(s.Mesh.left, s.Mesh.right, s.psi) }
