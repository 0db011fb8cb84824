package scenarios

import "fluxtoll/propagate"

// The memory for going back in time is bounded: at most MostKept moments,
// and no more than MostKeptBytes, but never less than four moments.
const (
	MostKept      = 64
	MostKeptBytes = 64 << 20
	leastKept     = 4
)

// snapshots keeps moments of a run at every so many steps, and half as often
// whenever there are too many.
type snapshots struct {
	most, every int
	steps       []int
	times       []float64
	states      []propagate.State
}

func newSnapshots(bytes int) snapshots {
	return snapshots{most: max(leastKept, min(MostKept, MostKeptBytes/max(bytes, 1))), every: 1}
}

// keep takes a snapshot of the run at a step, if one is due.
func (s *snapshots) keep(step int, run *propagate.Run) {
	if step%s.every != 0 || len(s.steps) > 0 && step <= s.steps[len(s.steps)-1] {
		return
	}
	if len(s.steps) == s.most {
		s.thin()
		if step%s.every != 0 {
			return
		}
	}
	s.steps, s.times, s.states = append(s.steps, step), append(s.times, run.Ledger().Time), append(s.states, run.Save())
}

// thin drops every second moment; the first stays.
func (s *snapshots) thin() {
	s.every *= 2
	n := 0
	for i, step := range s.steps {
		if step%s.every == 0 {
			s.steps[n], s.times[n], s.states[n] = step, s.times[i], s.states[i]
			n++
		}
	}
	clear(s.states[n:])
	s.steps, s.times, s.states = s.steps[:n], s.times[:n], s.states[:n]
}

// index is the last moment at or before a step.
func (s *snapshots) index(step int) int {
	i := len(s.steps) - 1
	for i > 0 && s.steps[i] > step {
		i--
	}
	return i
}

// nearest is the step of that moment.
func (s *snapshots) nearest(step int) int { return s.steps[s.index(step)] }

// before is the step of the last moment not after a time.
func (s *snapshots) before(time float64) int {
	i := len(s.times) - 1
	for i > 0 && s.times[i] > time {
		i--
	}
	return s.steps[i]
}

// restore brings the run to that moment.
func (s *snapshots) restore(step int, run *propagate.Run) { run.Restore(s.states[s.index(step)]) }

func (s *snapshots) size() (moments, bytes int) {
	for _, state := range s.states {
		bytes += state.Bytes()
	}
	return len(s.states), bytes
}
