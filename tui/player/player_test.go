package player

import (
	"context"
	"encoding/json"
	"strings"
	"testing"
	"testing/synctest"
	"time"

	"fluxtoll/scenarios"
)

func demo(t testing.TB, name string) *scenarios.File {
	t.Helper()
	f, err := scenarios.OpenDemo(name)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// started is a player with a demo at its start, within a bubble.
func started(t *testing.T, name string) *Player {
	t.Helper()
	p := Start(t.Context())
	p.View(scenarios.Window{From: -1, To: 1, Columns: 4})
	p.Load(1, demo(t, name))
	synctest.Wait()
	return p
}

// newest is the newest frame once everything has come to rest.
func newest(t *testing.T, p *Player) *Frame {
	t.Helper()
	synctest.Wait()
	f := p.mail.take()
	if f == nil || f.Err != nil {
		t.Fatalf("no frame, or a bad one: %+v", f)
	}
	return f
}

// At the normal pace what can be seen lasts secondsPerRun; half as fast it
// takes twice as long. No test here sleeps: time is the bubble's.
func TestPace(t *testing.T) {
	for _, c := range []struct {
		faster  int
		seconds int
	}{{0, 6}, {1, 3}, {-1, 12}, {2, 3}} {
		synctest.Test(t, func(t *testing.T) {
			p := started(t, "thin-barrier")
			defer p.Stop()
			p.Faster(c.faster)
			time.Sleep(time.Duration(c.seconds) * time.Second)
			f := newest(t, p)
			want := f.Outlook.Event * float64(c.seconds) / secondsPerRun * f.Pace
			// One frame, and what fell between its ticks.
			tolerance := f.Outlook.Event/secondsPerRun*f.Pace/FramesPerSecond*2 + 2*f.Tick
			if d := f.Moment.Time - want; d > tolerance || d < -tolerance {
				t.Errorf("pace %g: %g after %d s, want %g", f.Pace, f.Moment.Time, c.seconds, want)
			}
		})
	}
}

func TestPauseStopsTimeAndFrames(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		p := started(t, "thin-barrier")
		defer p.Stop()
		time.Sleep(2 * time.Second)
		p.Pause()
		f := newest(t, p)
		if !f.Paused || f.Moment.Tick == 0 {
			t.Fatalf("paused %t at tick %d", f.Paused, f.Moment.Tick)
		}
		time.Sleep(10 * time.Second)
		synctest.Wait()
		if more := p.mail.take(); more != nil {
			t.Errorf("a frame of tick %d while paused", more.Moment.Tick)
		}
		p.Pause()
		time.Sleep(time.Second)
		if g := newest(t, p); g.Paused || g.Moment.Tick <= f.Moment.Tick {
			t.Errorf("going on: paused %t at tick %d", g.Paused, g.Moment.Tick)
		}
	})
}

func TestStepsAndPlaces(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		p := started(t, "thin-barrier")
		defer p.Stop()
		at := func() int { return newest(t, p).Moment.Tick }
		settle := func() { time.Sleep(10 * time.Second) }
		p.Go(AtContact)
		settle()
		f := newest(t, p)
		if d := f.Moment.Time - f.Outlook.Contact; d > f.Tick || d < -f.Tick {
			t.Errorf("contact at %g, want %g", f.Moment.Time, f.Outlook.Contact)
		}
		contact := f.Moment.Tick
		p.Step(1)
		if got := at(); got != contact+1 {
			t.Errorf("a step forward: tick %d, want %d", got, contact+1)
		}
		p.Step(-3)
		if got := at(); got != contact-2 {
			t.Errorf("three back: tick %d, want %d", got, contact-2)
		}
		p.Stride(1)
		if got := newest(t, p); got.Moment.Tick <= contact+2 {
			t.Errorf("a stride: tick %d, want more than %d", got.Moment.Tick, contact+2)
		}
		p.Go(AtContact)
		settle()
		p.Nudge(-1)
		if got := at(); got >= contact-1 || got < contact-20 {
			t.Errorf("a nudge back from %d: tick %d", contact, got)
		}
		p.Go(AtStart)
		if got := at(); got != 0 {
			t.Errorf("start: tick %d", got)
		}
		p.Step(-1)
		if got := at(); got != 0 {
			t.Errorf("before the start: tick %d", got)
		}
		p.Go(AtEnd)
		settle()
		if f := newest(t, p); !f.Moment.Ended || f.Seeking {
			t.Errorf("end: ended %t, seeking %t", f.Moment.Ended, f.Seeking)
		}
		p.Pause()
		if f := newest(t, p); f.Moment.Ended || f.Paused {
			t.Error("space at the end does not start again")
		}
	})
}

// The numbers at the end, after pausing, stepping and going back, are those of
// the unwatched run, bit for bit.
func TestNumbersDoNotDependOnBeingWatched(t *testing.T) {
	scenario, err := demo(t, "doped-sheet").Compile()
	if err != nil {
		t.Fatal(err)
	}
	trial, err := scenarios.Prepare(context.Background(), scenario, scenarios.Forced{})
	if err != nil {
		t.Fatal(err)
	}
	want := document(t, trial.Finish(context.Background(), nil))
	synctest.Test(t, func(t *testing.T) {
		p := started(t, "doped-sheet")
		defer p.Stop()
		for _, n := range []int{40, -17, 300, -200, 5} {
			p.Step(n)
			time.Sleep(time.Second)
			p.Pause()
			time.Sleep(time.Second)
		}
		p.Go(AtEnd)
		time.Sleep(time.Minute)
		if got := document(t, newest(t, p).Moment.Result); got != want {
			t.Errorf("watched\n%s\nunwatched\n%s", got, want)
		}
	})
}

func document(t *testing.T, r *scenarios.Result) string {
	t.Helper()
	c := *r
	c.Seconds = 0
	text, err := json.Marshal(&c)
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

// A reader that takes nothing holds nothing up and finds only the newest
// frame.
func TestASlowReaderMissesFrames(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		p := started(t, "thin-barrier")
		defer p.Stop()
		time.Sleep(5 * time.Second)
		f := newest(t, p)
		want := f.Outlook.Event * 5 / secondsPerRun
		if f.Moment.Time < want*0.98 {
			t.Errorf("time %g, want %g: the reader held the run up", f.Moment.Time, want)
		}
		if p.mail.take() != nil {
			t.Error("a second frame was queued")
		}
	})
}

// Another scenario starts from its own beginning, and one overtaken while it
// was being prepared is never shown.
func TestANewScenarioReplacesTheOld(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		p := started(t, "thin-barrier")
		defer p.Stop()
		time.Sleep(3 * time.Second)
		p.Load(2, demo(t, "doped-sheet"))
		p.Load(3, demo(t, "quantum-well"))
		f := newest(t, p)
		if f.Scenario != 3 || !strings.Contains(f.Outlook.Title, "quantum well") || f.Moment.Tick != 0 {
			t.Errorf("scenario %d, %q, tick %d", f.Scenario, f.Outlook.Title, f.Moment.Tick)
		}
	})
}

// A panic in the goroutine becomes the last frame.
func TestAPanicBecomesAFrame(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		p := started(t, "thin-barrier")
		defer p.Stop()
		p.send(func(*state) { panic("thrown in a test") })
		synctest.Wait()
		f := p.Next()
		if f == nil || !f.Broken || !strings.Contains(f.Err.Error(), "thrown in a test") {
			t.Fatalf("frame %+v", f)
		}
		if p.Next() != nil {
			t.Error("a frame after the end")
		}
	})
}

// A scenario that cannot be computed is told as an error, and the present one
// stays.
func TestABadScenarioIsAnError(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		p := started(t, "thin-barrier")
		defer p.Stop()
		bad := demo(t, "thin-barrier")
		if err := bad.Set("packet.energy", "-3 eV"); err != nil {
			t.Fatal(err)
		}
		p.Pause()
		p.Load(2, bad)
		synctest.Wait()
		f := p.mail.take()
		if f == nil || f.Err == nil || f.Scenario != 2 || f.Moment == nil {
			t.Fatalf("frame %+v", f)
		}
	})
}

func TestStopEndsEverything(t *testing.T) {
	synctest.Test(t, func(t *testing.T) {
		p := Start(t.Context())
		p.Load(1, demo(t, "thin-barrier"))
		p.Stop()
		p.Pause()
		if f := p.Next(); f != nil && f.Moment != nil && f.Scenario != 1 {
			t.Errorf("frame %+v", f)
		}
	})
}
