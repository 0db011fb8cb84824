package propagate

import (
	"fmt"
	"slices"
)

// Stepper carries one packet through time on a mesh. It owns its wave
// function; the mesh is shared.
type Stepper struct {
	Mesh   *Mesh
	Pade   Pade
	Step   float64 // dt
	Origin float64 // the energy from which phases are counted

	psi     []complex128
	factors []*factor
	work    *workspace
	ledger  Ledger
	lost    []float64 // scratch: absorbed in this step, by layer
}

// NewStepper prepares the factors of the step and puts the packet at t = 0.
// Phases are counted from the energy origin, which changes psi by the phase
// exp(i origin t) and nothing that is measured, but lets a step be longer: its
// error grows with |E-origin| dt.
func NewStepper(m *Mesh, pade Pade, dt, origin float64, packet Packet) (*Stepper, error) {
	if !(dt > 0) {
		return nil, fmt.Errorf("propagate: time step %g is not greater than zero", dt)
	}
	s := &Stepper{
		Mesh: m, Pade: pade, Step: dt, Origin: origin,
		psi: make([]complex128, m.Nodes()), work: newWorkspace(m),
		lost: make([]float64, len(m.structure.Layers)),
	}
	for _, p := range pade.Poles {
		s.factors = append(s.factors, newFactor(m, dt, origin, p))
	}
	if err := packet.Fill(m, s.psi); err != nil {
		return nil, err
	}
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
		f.solve(s.psi, s.work)
		left += f.outflow(s.psi, s.work, false)
		right += f.outflow(s.psi, s.work, true)
		f.update(s.psi, s.work, s.lost)
	}
	s.ledger.enter(s.Step, left, right, s.lost)
	s.dwell(s.Step)
}

// dwell measures the probability in every layer and adds the trapezoid over
// the last step to the dwell times: of spectral accuracy, since the integrand
// vanishes smoothly at both ends of a run.
func (s *Stepper) dwell(dt float64) {
	for i, r := range s.Mesh.layerOf {
		now := s.Mesh.norm(r[0], r[1], s.psi)
		s.ledger.Dwell[i] += dt * (s.ledger.InLayer[i] + now) / 2
		s.ledger.InLayer[i] = now
	}
}

// State is a moment of a run, from which it can be taken up again.
type State struct {
	psi    []complex128
	ledger Ledger
}

// Save copies the present moment.
func (s *Stepper) Save() State { return State{slices.Clone(s.psi), s.ledger.Clone()} }

// Restore goes back (or on) to a moment of this run. What follows is bit for
// bit what followed then.
func (s *Stepper) Restore(at State) {
	copy(s.psi, at.psi)
	s.ledger = at.ledger.Clone()
}

// Bytes is the memory that a saved state takes.
func (s State) Bytes() int { return 16*len(s.psi) + 24*len(s.ledger.Lost) }

// Ledger returns where the probability is now. Its slices are the stepper's
// own: copy them (Ledger.Clone) to keep them.
func (s *Stepper) Ledger() *Ledger { return &s.ledger }

// Psi is the wave function on the nodes; it is the stepper's own.
func (s *Stepper) Psi() []complex128 { return s.psi }

// Inside is the probability between the planes, summed anew from psi.
func (s *Stepper) Inside() float64 { return s.Mesh.norm(s.Mesh.left, s.Mesh.right, s.psi) }
