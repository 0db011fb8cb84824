package propagate

// MostRecorded bounds the steps that a record holds: 48 bytes each.
const MostRecorded = 1 << 20

// Record is what a run did at both planes, step by step. Keeping it changes
// nothing in the run. A run that goes back and on again (Restore) repeats
// itself bit for bit: steps that are recorded already are passed over.
type Record struct {
	Pade      Pade
	Stretches []Stretch // in order of time, each beginning where the last ends
	Steps     int       // recorded
	Missed    int       // steps of the run beyond MostRecorded
	start     [2]complex128
	run       *Run
}

// Stretch is a part of a record in steps of one size.
type Stretch struct {
	Time        float64 // at its beginning
	Step        float64
	Origin      float64 // energy from which its phases are counted
	Left, Right Trace
}

// Trace is what was seen at a plane: psi at the beginning of the stretch and
// after every step of it (phases as in Stepper), and the mean flow outward in
// every step, probability per time.
type Trace struct {
	Psi  []complex128
	Flow []float64
}

// End is the time at the end of the stretch.
func (s *Stretch) End() float64 { return s.Time + s.Step*float64(len(s.Left.Flow)) }

// trace is that of the right or the left plane.
func (s *Stretch) trace(right bool) *Trace {
	if right {
		return &s.Right
	}
	return &s.Left
}

// Record begins to record a run that has not taken a step yet.
func (r *Run) Record() *Record {
	if r.Ledger().Steps != 0 {
		panic("propagate: a record begins before the first step")
	}
	record := &Record{Pade: r.Pade, start: r.atPlanes(), run: r}
	watch := r.ending.Watch
	r.ending.Watch = func(l *Ledger) {
		if watch != nil {
			watch(l)
		}
		record.enter(r.Stepper)
	}
	return record
}

// atPlanes is psi at the left and the right plane.
func (s *Stepper) atPlanes() [2]complex128 {
	return [2]complex128{s.psi.face[s.Mesh.left], s.psi.face[s.Mesh.right]}
}

// enter books the step that the stepper has just taken.
func (r *Record) enter(s *Stepper) {
	switch l := &s.ledger; {
	case l.Steps <= r.Steps:
		return
	case r.Steps == MostRecorded:
		r.Missed = max(r.Missed, l.Steps-r.Steps)
		return
	}
	psi := s.atPlanes()
	part := r.stretch(s)
	part.Left.add(psi[0], s.ledger.FlowLeft)
	part.Right.add(psi[1], s.ledger.FlowRight)
	r.start = psi
	r.Steps++
}

// stretch is the one that the stepper's present step belongs to.
func (r *Record) stretch(s *Stepper) *Stretch {
	last := len(r.Stretches) - 1
	if last < 0 || r.Stretches[last].Step != s.Step || r.Stretches[last].Origin != s.Origin {
		r.Stretches = append(r.Stretches, Stretch{
			Time: s.ledger.since, Step: s.Step, Origin: s.Origin,
			Left:  Trace{Psi: []complex128{r.start[0]}},
			Right: Trace{Psi: []complex128{r.start[1]}},
		})
		last++
	}
	return &r.Stretches[last]
}

func (t *Trace) add(psi complex128, flow float64) {
	t.Psi, t.Flow = append(t.Psi, psi), append(t.Flow, flow)
}
