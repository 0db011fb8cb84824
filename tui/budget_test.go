package tui

import (
	"sync/atomic"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"fluxtoll/scenarios"
	"fluxtoll/tui/canvas"
	"fluxtoll/tui/player"
)

// movie is a model and the frames of a whole run at a size, as the player
// would send them.
func movie(t testing.TB, w, h int) (*Model, []*player.Frame) {
	t.Helper()
	live := testLive(t, "thin-barrier")
	m := &Model{canvas: &canvas.Canvas{}, view: newView(), w: w, h: h,
		options: Options{Output: canvas.Output{Depth: canvas.TrueColor, UTF8: true}}}
	window := scenarios.Window{From: live.Outlook.From, To: live.Outlook.To, Columns: 2 * w}
	var frames []*player.Frame
	for n := 0; live.Tick(); n++ {
		if n%16 == 0 {
			frames = append(frames, &player.Frame{
				Scenario: 1, Moment: live.Moment(window), Outlook: live.Outlook, Tick: live.TickTime(), Pace: 1,
			})
		}
	}
	if len(frames) < 60 {
		t.Fatalf("only %d frames", len(frames))
	}
	return m, frames
}

func testLive(t testing.TB, name string) *scenarios.Live {
	t.Helper()
	f, err := openDemo(name)
	if err != nil {
		t.Fatal(err)
	}
	live, err := scenarios.NewLive(testTrial(t, f))
	if err != nil {
		t.Fatal(err)
	}
	return live
}

func testTrial(t testing.TB, f *scenarios.File) *scenarios.Trial {
	t.Helper()
	s, err := f.Compile()
	if err != nil {
		t.Fatal(err)
	}
	trial, err := scenarios.Prepare(t.Context(), s, scenarios.Forced{})
	if err != nil {
		t.Fatal(err)
	}
	return trial
}

// showing returns what is done for one frame: looking at the moment and
// drawing it.
func showing(t testing.TB, w, h int) func() {
	m, frames := movie(t, w, h)
	live := testLive(t, "thin-barrier")
	window := frames[0].Moment.Window
	i := 0
	return func() {
		live.Moment(window)
		m.frame = frames[i%len(frames)]
		m.view.update(m.frame.Outlook, m.frame.Moment, 2*w)
		m.View()
		i++
	}
}

func benchmarkFrame(b *testing.B, w, h int) {
	show := showing(b, w, h)
	for b.Loop() {
		show()
	}
}

func BenchmarkFrame80x24(b *testing.B)  { benchmarkFrame(b, 80, 24) }
func BenchmarkFrame200x60(b *testing.B) { benchmarkFrame(b, 200, 60) }

// At 30 frames a second a frame at 80x24 may cost a quarter of 1/30 s, and one
// at 200x60 the whole of it. The machine may be busy: the quickest of some
// stretches counts.
func TestFramesAreCheapEnough(t *testing.T) {
	for _, c := range []struct {
		w, h  int
		limit time.Duration
	}{
		{80, 24, time.Second / player.FramesPerSecond / 4},
		{200, 60, time.Second / player.FramesPerSecond},
	} {
		show, best := showing(t, c.w, c.h), time.Hour
		for range 5 {
			const frames = 20
			began := time.Now()
			for range frames {
				show()
			}
			best = min(best, time.Since(began)/frames)
		}
		t.Logf("%dx%d: %v a frame", c.w, c.h, best)
		if best > c.limit {
			t.Errorf("%dx%d: %v a frame, at most %v is allowed", c.w, c.h, best, c.limit)
		}
	}
}

// counter counts what a program writes.
type counter struct{ bytes atomic.Int64 }

func (c *counter) Write(p []byte) (int, error) {
	c.bytes.Add(int64(len(p)))
	return len(p), nil
}

// reel shows prepared frames one after the other through the real program.
type reel struct {
	*Model
	frames []*player.Frame
	next   int
}

type turn struct{}

func (r *reel) Init() tea.Cmd { return r.tick() }

func (r *reel) tick() tea.Cmd {
	return tea.Tick(time.Second/60, func(time.Time) tea.Msg { return turn{} })
}

func (r *reel) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	if size, ok := msg.(tea.WindowSizeMsg); ok {
		r.w, r.h = size.Width, size.Height
	}
	if _, ok := msg.(turn); !ok {
		return r, nil
	}
	if r.next == len(r.frames) {
		return r, tea.Quit
	}
	r.frame = r.frames[r.next]
	r.view.update(r.frame.Outlook, r.frame.Moment, 2*r.w)
	r.next++
	return r, r.tick()
}

// What goes to the terminal for a frame, through the library's own writing of
// changed lines. A screen of 200x60 braille cells with a colour each would be
// 3 bytes and a code of about 15 for 12000 cells, 200 kB; what changes in a
// frame is a few lines of it.
func TestBytesOfAFrame(t *testing.T) {
	for _, c := range []struct{ w, h, limit int }{{80, 24, 4 << 10}, {200, 60, 24 << 10}} {
		m, frames := movie(t, c.w, c.h)
		frames = frames[:40] // the packet comes and meets the barrier
		var out counter
		p := tea.NewProgram(&reel{Model: m, frames: frames}, tea.WithInput(nil), tea.WithOutput(&out), tea.WithFPS(120), tea.WithoutSignalHandler())
		if _, err := p.Run(); err != nil {
			t.Fatal(err)
		}
		each := int(out.bytes.Load()) / len(frames)
		t.Logf("%dx%d: %d bytes a frame", c.w, c.h, each)
		if each > c.limit || each < 200 {
			t.Errorf("%dx%d: %d bytes a frame, 200 to %d are expected", c.w, c.h, each, c.limit)
		}
	}
}
