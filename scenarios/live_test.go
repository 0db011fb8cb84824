package scenarios

import (
	"context"
	"encoding/json"
	"math"
	"runtime"
	"testing"
)

// liveDemo prepares a demo to be looked at.
func liveDemo(t testing.TB, name string, forced Forced) *Live {
	t.Helper()
	trial := demoTrial(t, name, forced)
	l, err := NewLive(trial)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func demoTrial(t testing.TB, name string, forced Forced) *Trial {
	t.Helper()
	f, err := OpenDemo(name)
	if err != nil {
		t.Fatal(err)
	}
	s, err := f.Compile()
	if err != nil {
		t.Fatal(err)
	}
	trial, err := Prepare(context.Background(), s, forced)
	if err != nil {
		t.Fatal(err)
	}
	return trial
}

// document is a result as JSON, without the time it took.
func document(t testing.TB, r *Result) string {
	t.Helper()
	c := *r
	c.Seconds = 0
	text, err := json.Marshal(&c)
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

// A run's numbers do not depend on being watched, stopped or rewound: every
// bit of the document equals that of the unwatched run.
func TestWatchedRunEqualsUnwatched(t *testing.T) {
	for _, name := range []string{"collector-step", "downhill-interface", "twin-barrier", "absorbing-foil"} {
		want := document(t, demoTrial(t, name, Forced{}).Finish(context.Background(), nil))
		l := liveDemo(t, name, Forced{})
		w := Window{l.Outlook.From, l.Outlook.To, 160}
		for i := 0; l.Tick(); i++ {
			switch {
			case i%401 == 400:
				l.Back(l.Now() - 150)
			case i%97 == 0:
				l.Moment(w)
			}
			if i > 100000 {
				t.Fatalf("%s: no end after %d ticks", name, i)
			}
		}
		if got := document(t, l.Result()); got != want {
			t.Errorf("%s: watched\n%s\nunwatched\n%s", name, got, want)
		}
		l.Back(0)
		l.Back(l.Reached())
		if got := document(t, l.Result()); got != want {
			t.Errorf("%s: back at the end\n%s\nunwatched\n%s", name, got, want)
		}
		l.Back(l.Reached() / 2)
		for l.Tick() {
		}
		if got := document(t, l.Moment(w).Result); got != want {
			t.Errorf("%s: after going back from the end\n%s\nunwatched\n%s", name, got, want)
		}
	}
}

// What is seen between two steps is the same whether it is reached forwards
// or backwards.
func TestBackShowsTheSameMoment(t *testing.T) {
	l := liveDemo(t, "thin-barrier", Forced{})
	w := Window{l.Outlook.From, l.Outlook.To, 80}
	seen := map[int]*Moment{}
	for l.Tick() {
		if l.Now()%50 == 7 {
			seen[l.Now()] = l.Moment(w)
		}
	}
	if len(seen) < 10 {
		t.Fatalf("only %d moments seen", len(seen))
	}
	for tick, want := range seen {
		l.Back(tick)
		got := l.Moment(w)
		for c := range got.Density {
			if got.Density[c] != want.Density[c] || got.Flow[c] != want.Flow[c] {
				t.Fatalf("tick %d, column %d: %g, %g; was %g, %g", tick, c, got.Density[c], got.Flow[c], want.Density[c], want.Flow[c])
			}
		}
		if got.Ledger != want.Ledger || got.Time != want.Time {
			t.Fatalf("tick %d: ledger %+v at %g; was %+v at %g", tick, got.Ledger, got.Time, want.Ledger, want.Time)
		}
	}
}

// Going back to a time ends at the last tick not after it.
func TestBackToATime(t *testing.T) {
	l := liveDemo(t, "collector-step", Forced{})
	times := []float64{0}
	for l.Tick() {
		times = append(times, l.Time())
	}
	times = append(times, l.Time())
	for i := 0; i < len(times); i += 1 + len(times)/40 {
		for _, late := range []float64{0, 0.4} {
			at := times[i]
			if i+1 < len(times) {
				at += late * (times[i+1] - times[i])
			}
			l.BackTo(at)
			if l.Now() != i || !(math.Abs(l.Time()-times[i]) < 1e-9*times[len(times)-1]) {
				t.Fatalf("time %g: tick %d at %g, want %d at %g", at, l.Now(), l.Time(), i, times[i])
			}
		}
	}
}

// Before contact the density is the free packet's closed form.
func TestDensityIsTheFreePacketBeforeContact(t *testing.T) {
	l := liveDemo(t, "collector-step", Forced{})
	for l.Now() < l.Contact()/2 {
		l.Tick()
	}
	m := l.Moment(Window{l.Outlook.From, -20, 200})
	top := 0.0
	for _, d := range m.Free {
		top = math.Max(top, d)
	}
	for c := range m.Density {
		// A column's mean against its middle: curvature over a column of a
		// tenth of the packet's length gives 1e-3.
		if !(math.Abs(m.Density[c]-m.Free[c]) < 3e-3*top) {
			t.Errorf("column %d: %g, free %g", c, m.Density[c], m.Free[c])
		}
	}
}

// The parts of a shift add up to it, the shift is the predicted arrival less
// free flight, and the exit's part is the way behind the structure at another
// speed.
func TestShiftsAddUp(t *testing.T) {
	seen := 0
	for _, name := range []string{"collector-step", "thin-barrier", "graded-collector", "downhill-interface"} {
		l := liveDemo(t, name, Forced{})
		o := l.Outlook
		for _, s := range o.Shifts {
			seen++
			a, p := l.Trial.Averages, l.Trial.Plan
			exit := p.far * (a.SlownessOutTransmitted.Value - a.SlownessInTransmitted.Value) * l.Trial.Scenario.Scale.Time
			// Components for which the far lead is closed hold less than a
			// millionth of what is sent in all of these.
			if s.Part == "transmitted" && !(math.Abs(s.Exit-exit) < 1e-6**o.Arrivals.Transmitted) {
				t.Errorf("%s: exit part %g, want %g", name, s.Exit, exit)
			}
			arrival, free := o.Arrivals.Transmitted, o.Arrivals.FreeTransmitted
			if s.Part == "reflected" {
				arrival, free = o.Arrivals.Reflected, o.Arrivals.FreeReflected
			}
			tol := 1e-12 * *arrival // rounding
			if sum := s.Structure + s.Exit + s.Filter; !(math.Abs(sum-s.Total) < tol) {
				t.Errorf("%s %s: %g + %g + %g is not %g", name, s.Part, s.Structure, s.Exit, s.Filter, s.Total)
			}
			if !(math.Abs(*arrival-*free-s.Total) < tol) {
				t.Errorf("%s %s: shift %g, arrivals differ by %g", name, s.Part, s.Total, *arrival-*free)
			}
		}
	}
	if seen != 8 {
		t.Errorf("%d shifts seen, want 8", seen)
	}
}

// Nothing else grows with the run: the memory in use stays the same from the
// fifth thousand of ticks to the end, but for the snapshots and the record of
// the planes, 48 bytes a step (propagate.MostRecorded bounds it) in slices that
// grow by a quarter or more.
func TestHeapDoesNotGrow(t *testing.T) {
	l := liveDemo(t, "thin-barrier", Forced{TimeStep: 0.02})
	w := Window{l.Outlook.From, l.Outlook.To, 400}
	heap := func() uint64 {
		var m runtime.MemStats
		runtime.GC()
		runtime.ReadMemStats(&m)
		return m.HeapAlloc
	}
	var before uint64
	for l.Tick() && l.Now() < 20000 {
		if l.Now()%500 == 0 {
			l.Moment(w)
		}
		if l.Now() == 5000 {
			before = heap()
		}
	}
	_, bytes := l.Kept()
	record := uint64(2 * 48 * (l.Now() - 5000))
	if after := heap(); l.Now() < 15000 || after > before+uint64(bytes)+record+(256<<10) {
		t.Errorf("%d bytes in use at tick %d, %d at tick 5000, %d of them for going back", after, l.Now(), before, bytes)
	}
	runtime.KeepAlive(l)
}

// A long run: the memory for going back and for the flow stays bounded.
func TestMemoryIsBounded(t *testing.T) {
	l := liveDemo(t, "thin-barrier", Forced{TimeStep: 0.02})
	for l.Tick() && l.Now() < 20000 {
		if moments, bytes := l.Kept(); moments > MostKept || bytes > MostKeptBytes {
			t.Fatalf("tick %d: %d moments, %d bytes", l.Now(), moments, bytes)
		}
	}
	if l.Now() < 5*mostBins {
		t.Fatalf("run of only %d ticks tests nothing", l.Now())
	}
	if moments, _ := l.Kept(); moments < MostKept/2 {
		t.Errorf("only %d moments kept", moments)
	}
	m := l.Moment(Window{-1, 1, 2})
	if n := len(m.Whole.Near); n > mostBins || n < mostBins/2 {
		t.Errorf("%d bins of history, want %d to %d", n, mostBins/2, mostBins)
	}
	if n := len(m.First.Near); n != firstTicks {
		t.Errorf("%d first ticks kept, want %d", n, firstTicks)
	}
}

// The flow through the planes, added up over its history, is what the ledger
// holds.
func TestHistoryAddsUpToTheLedger(t *testing.T) {
	l := liveDemo(t, "collector-step", Forced{})
	for l.Tick() {
	}
	m := l.Moment(Window{-1, 1, 2})
	far, begin := 0.0, 0.0
	for i, end := range m.Whole.Ends {
		far += m.Whole.Far[i] * (end - begin)
		begin = end
	}
	// The finer steps carry the packet a little more exactly than the run's,
	// and are set back on it at each step: the tolerance of the run, 1e-6.
	if !(math.Abs(far-m.Ledger.Transmitted) < 1e-6) {
		t.Errorf("history adds up to %.9f, ledger %.9f", far, m.Ledger.Transmitted)
	}
}

// The sent spectrum adds up to one and its transmitted part to the average.
func TestSpectrumAddsUp(t *testing.T) {
	o := liveDemo(t, "collector-step", Forced{}).Outlook
	s := o.Spectrum
	step := (s.To - s.From) / float64(len(s.Sent)-1)
	sent, through := 0.0, 0.0
	for i := range s.Sent {
		sent += step * s.Sent[i]
		through += step * s.Sent[i] * s.Transmission[i]
	}
	// Four standard deviations hold all but 6e-5.
	if !(math.Abs(sent-1) < 1e-4) || !(math.Abs(through-o.Predicted.Transmitted) < 1e-3) {
		t.Errorf("sent %g, transmitted %g; want 1, %g", sent, through, o.Predicted.Transmitted)
	}
}

func BenchmarkMoment(b *testing.B) {
	l := liveDemo(b, "collector-step", Forced{})
	for l.Now() < l.Contact() {
		l.Tick()
	}
	w := Window{l.Outlook.From, l.Outlook.To, 400}
	for b.Loop() {
		l.Moment(w)
	}
}

func BenchmarkTick(b *testing.B) {
	l := liveDemo(b, "collector-step", Forced{})
	for b.Loop() {
		if !l.Tick() {
			l.Back(0)
		}
	}
}
