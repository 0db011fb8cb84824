package player

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime/debug"
	"time"

	"fluxtoll/scenarios"
)

// state is what the goroutine owns.
type state struct {
	ctx      context.Context
	mail     *mailbox
	number   int // of the scenario shown
	live     *scenarios.Live
	window   scenarios.Window
	paused   bool
	pace     int     // power of two
	due      float64 // ticks that time has earned
	last     time.Time
	goal     int // tick sought, or -1
	dirty    bool
	err      error
	loading  int // number of the scenario being prepared, or 0
	giveUp   context.CancelFunc
	prepared chan preparation
}

// preparation is the outcome of preparing a scenario.
type preparation struct {
	number int
	live   *scenarios.Live
	err    error
}

func newState(ctx context.Context, mail *mailbox) *state {
	return &state{ctx: ctx, mail: mail, goal: -1, giveUp: func() {}, prepared: make(chan preparation)}
}

// abandon gives up a scenario that is being prepared.
func (s *state) abandon() { s.giveUp() }

// load prepares a scenario in a goroutine of its own.
func (s *state) load(number int, file *scenarios.File) {
	s.giveUp()
	ctx, cancel := context.WithCancel(s.ctx)
	s.giveUp, s.loading, s.dirty = cancel, number, true
	go func() {
		live, err := prepare(ctx, file)
		select {
		case s.prepared <- preparation{number, live, err}:
		case <-ctx.Done():
		}
	}()
}

// prepare compiles and plans; a panic becomes an error.
func prepare(ctx context.Context, file *scenarios.File) (live *scenarios.Live, err error) {
	defer func() {
		if r := recover(); r != nil {
			err = fmt.Errorf("%v\n%s", r, debug.Stack())
		}
	}()
	scenario, err := file.Compile()
	if err != nil {
		return nil, err
	}
	trial, err := scenarios.Prepare(ctx, scenario, scenarios.Forced{})
	if err != nil {
		return nil, err
	}
	return scenarios.NewLive(trial)
}

// adopt shows a prepared scenario from its start.
func (s *state) adopt(r preparation) {
	if r.number != s.loading || errors.Is(r.err, context.Canceled) {
		return
	}
	s.loading, s.number, s.err, s.dirty = 0, r.number, r.err, true
	if r.err != nil {
		return
	}
	s.live, s.goal, s.due = r.live, -1, 0
	s.last = time.Time{}
	if s.window.To <= s.window.From {
		s.window = scenarios.Window{From: r.live.Outlook.From, To: r.live.Outlook.To, Columns: max(1, s.window.Columns)}
	}
}

func (s *state) look(w scenarios.Window) {
	s.dirty = s.dirty || w != s.window
	s.window = w
}

func (s *state) toggle() {
	s.dirty = true
	if s.live != nil && s.live.Ended() {
		s.live.Back(0)
		s.paused, s.due = false, 0
		return
	}
	s.paused, s.goal = !s.paused, -1
}

func (s *state) stepTo(n int) {
	if s.live == nil {
		return
	}
	s.paused, s.dirty = true, true
	s.seek(max(0, s.live.Now()+n))
}

// seek goes to a tick: at once where it was reached before, and else little
// by little, so that commands are heard.
func (s *state) seek(tick int) {
	s.goal = -1
	if tick <= s.live.Reached() {
		s.live.Back(tick)
		return
	}
	s.live.Back(s.live.Reached())
	s.goal = tick
	s.hurry()
}

func (s *state) goTo(where Place) {
	if s.live == nil {
		return
	}
	s.paused, s.dirty = true, true
	switch where {
	case AtStart:
		s.seek(0)
	case AtContact:
		s.seek(s.live.Contact())
	case AtEnd:
		s.seek(math.MaxInt)
	}
}

// The pace is a power of two between these.
const (
	slowest = -6
	fastest = 10
)

// secondsPerRun is how long what can be seen of a run lasts at the normal
// pace. What comes after it, until next to nothing is left, passes at least
// tailPace times as fast.
const (
	secondsPerRun = 24
	tailPace      = 8
)

func (s *state) faster(n int) {
	s.pace = max(slowest, min(fastest, s.pace+n))
	s.dirty = true
}

// longestGap is the most time that counts between two ticks of the wall clock:
// after a while in the background the packet has not run away.
const longestGap = 250 * time.Millisecond

// slice is how long the goroutine computes before it listens again.
const slice = 20 * time.Millisecond

// hurry moves towards the goal for one slice.
func (s *state) hurry() {
	s.dirty = true
	for began := time.Now(); time.Since(began) < slice; {
		if s.live.Now() >= s.goal || !s.live.Tick() {
			s.goal = -1
			return
		}
	}
}

// advance moves on by as many ticks as the time since the last call earned;
// if they take longer than a slice, the rest is let go.
func (s *state) advance(now time.Time) {
	elapsed := min(now.Sub(s.last), longestGap).Seconds()
	first := s.last.IsZero()
	s.last = now
	switch {
	case s.live == nil || first:
		return
	case s.goal >= 0:
		s.hurry()
		return
	case s.paused || s.live.Ended():
		s.due = 0
		return
	}
	s.due += elapsed * s.ticksPerSecond()
	for began := time.Now(); s.due >= 1 && s.live.Tick(); s.due-- {
		s.dirty = true
		if time.Since(began) > slice {
			s.due = 0
			return
		}
	}
}

// ticksPerSecond is the present speed of the clock.
func (s *state) ticksPerSecond() float64 {
	normal := math.Max(1, float64(s.live.Event())/secondsPerRun)
	chosen := math.Ldexp(normal, s.pace)
	if s.tail() {
		return math.Max(chosen, tailPace*normal)
	}
	return chosen
}

// tail reports whether there is nothing more to see, although the run is not
// over.
func (s *state) tail() bool { return s.live.Time() > s.live.Outlook.Event && !s.live.Ended() }

// publish posts a frame if anything is new.
func (s *state) publish() {
	if !s.dirty {
		return
	}
	s.dirty = false
	f := &Frame{
		Scenario: s.number, Paused: s.paused, Seeking: s.goal >= 0, Loading: s.loading != 0,
		Pace: math.Ldexp(1, s.pace), Err: s.err,
	}
	if s.live != nil {
		f.Tail = s.tail()
		f.Moment, f.Outlook, f.Tick = s.live.Moment(s.window), s.live.Outlook, s.live.TickTime()
	}
	s.mail.post(f)
}
