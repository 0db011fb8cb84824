package tui

import (
	"context"
	"fmt"
	"io"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
	"fluxtoll/tui/player"
)

// Size is that of a screen, in cells.
type Size struct{ Wide, High int }

// Frames writes n plain frames, evenly spaced over the run from its start to
// its end (one frame is the end's), each ended by a line that holds a form
// feed.
func Frames(ctx context.Context, w io.Writer, trial *scenarios.Trial, n int, size Size, utf8 bool) error {
	live, err := scenarios.NewLive(trial)
	if err != nil {
		return err
	}
	for live.Tick() {
		if ctx.Err() != nil {
			return ctx.Err()
		}
	}
	end := live.Latest()
	v := newView()
	c := &canvas.Canvas{}
	for i := range n {
		live.Back(live.Reached())
		if i < n-1 {
			live.BackTo(end * float64(i) / float64(n-1))
		}
		v.still(live, size).draw(c, size.Wide, size.High)
		if _, err := fmt.Fprintf(w, "%s\n\f\n", c.String(canvas.Output{UTF8: utf8})); err != nil {
			return err
		}
	}
	return nil
}

// still is the screen of the present moment, to be drawn once.
func (v *view) still(live *scenarios.Live, size Size) screen {
	v.window = scenarios.Window{From: live.Outlook.From, To: live.Outlook.To, Columns: 2 * max(1, size.Wide)}
	m := live.Moment(v.window)
	v.update(live.Outlook, m, v.window.Columns)
	f := &player.Frame{Scenario: 1, Moment: m, Outlook: live.Outlook, Tick: live.TickTime(), Pace: 1}
	return screen{frame: f, want: v.want, scale: v.scale(), ghost: v.ghost}
}
