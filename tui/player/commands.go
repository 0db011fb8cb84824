package player

import "fluxtoll/scenarios"

// Load prepares another scenario, numbered by the caller, and shows it from
// its start. The present one stays until then; one that is still being
// prepared is given up.
func (p *Player) Load(number int, file *scenarios.File) {
	file = file.Clone()
	p.send(func(s *state) { s.load(number, file) })
}

// View chooses what part of the x axis the frames show.
func (p *Player) View(w scenarios.Window) { p.send(func(s *state) { s.look(w) }) }

// Pause stops or goes on; at the end it starts again.
func (p *Player) Pause() { p.send((*state).toggle) }

// Step pauses and moves by single ticks, back where n is negative.
func (p *Player) Step(n int) { p.send(func(s *state) { s.stepTo(n) }) }

// nudges is how many nudges lead through what can be seen of a run.
const nudges = 240

// Nudge pauses and moves by a step that can be seen.
func (p *Player) Nudge(n int) {
	p.send(func(s *state) {
		if s.live != nil {
			s.stepTo(n * max(1, s.live.Event()/nudges))
		}
	})
}

// Stride pauses and moves by whole steps of the run.
func (p *Player) Stride(n int) {
	p.send(func(s *state) {
		if s.live != nil {
			s.stepTo(n * s.live.PerStep())
		}
	})
}

// Place is a moment to go to.
type Place int

// The places.
const (
	AtStart Place = iota
	AtContact
	AtEnd
)

// Go goes to a place and pauses there.
func (p *Player) Go(where Place) { p.send(func(s *state) { s.goTo(where) }) }

// Faster changes the pace by powers of two.
func (p *Player) Faster(n int) { p.send(func(s *state) { s.faster(n) }) }
