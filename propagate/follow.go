package propagate

// Follow puts the stepper on the present moment of another one on the same
// mesh, which need not have the same step or origin: with a shorter step it
// shows what lies between two steps of the other, which it leaves alone. Its
// wave function is the other's but for a phase that is the same everywhere.
func (s *Stepper) Follow(o *Stepper) {
	if s.Mesh != o.Mesh {
		panic("propagate: a stepper cannot follow one on another mesh")
	}
	copy(s.psi.all, o.psi.all)
	s.ledger = o.ledger.Clone()
	s.ledger.mark()
}
