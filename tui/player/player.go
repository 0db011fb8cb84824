package player

import (
	"context"
	"fmt"
	"runtime/debug"
	"time"

	"fluxtoll/scenarios"
)

// FramesPerSecond is how often a moving packet is drawn.
const FramesPerSecond = 30

// Frame is what there is to see.
type Frame struct {
	Scenario int // number of the scenario, counted from 1 in the order of Load
	Moment   *scenarios.Moment
	Outlook  *scenarios.Outlook
	Tick     float64 // length of a tick in display units
	Paused   bool
	Seeking  bool
	Tail     bool    // there is nothing more to see before the end
	Loading  bool    // a newer scenario is being prepared
	Pace     float64 // times the normal pace
	Err      error   // why a scenario could not be prepared, or what went wrong
	Broken   bool    // the player has stopped for good: Err is a panic
}

// Player owns the goroutine. Its methods return at once.
type Player struct {
	commands chan func(*state)
	mail     *mailbox
	cancel   context.CancelFunc
	done     chan struct{}
}

// Start starts a player without a scenario, running at the normal pace.
func Start(ctx context.Context) *Player {
	ctx, cancel := context.WithCancel(ctx)
	p := &Player{commands: make(chan func(*state), 256), mail: newMailbox(), cancel: cancel, done: make(chan struct{})}
	go p.run(ctx)
	return p
}

// Stop ends the goroutine and waits for it.
func (p *Player) Stop() {
	p.cancel()
	<-p.done
}

// Next waits for a frame newer than those taken before. It returns nil when
// the player has been stopped.
func (p *Player) Next() *Frame {
	for {
		select {
		case <-p.mail.ready:
			if f := p.mail.take(); f != nil {
				return f
			}
		case <-p.done:
			return p.mail.take()
		}
	}
}

// send hands a command over. If so many wait already that the player must be
// stuck in one step of a huge grid, the command is dropped, as a key would be.
func (p *Player) send(f func(*state)) {
	select {
	case p.commands <- f:
	default:
	}
}

// run is the goroutine: a panic in it becomes the last frame.
func (p *Player) run(ctx context.Context) {
	defer close(p.done)
	s := newState(ctx, p.mail)
	defer s.abandon()
	defer func() {
		if r := recover(); r != nil {
			p.mail.post(&Frame{Scenario: s.number, Err: fmt.Errorf("%v\n%s", r, debug.Stack()), Broken: true})
		}
	}()
	s.loop(p.commands)
}

// loop obeys commands and moves on with time.
func (s *state) loop(commands <-chan func(*state)) {
	ticker := time.NewTicker(time.Second / FramesPerSecond)
	defer ticker.Stop()
	for {
		select {
		case <-s.ctx.Done():
			return
		case f := <-commands:
			f(s)
			s.drain(commands)
			s.publish()
		case r := <-s.prepared:
			s.adopt(r)
			s.publish()
		case now := <-ticker.C:
			s.advance(now)
			s.publish()
		}
	}
}

// drain obeys what else waits, so that held keys cost one frame together.
func (s *state) drain(commands <-chan func(*state)) {
	for {
		select {
		case f := <-commands:
			f(s)
		default:
			return
		}
	}
}
