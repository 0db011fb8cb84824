package propagate

// Status says why a run ended.
type Status int

// The ends of a run.
const (
	Running     Status = iota // it has not ended
	Settled                   // what remains between the planes is negligible
	StepLimit                 // the limit on steps was reached
	TimeLimit                 // the limit on time was reached
	Interrupted               // its context was done
)

func (s Status) String() string {
	switch s {
	case Running:
		return "running"
	case Settled:
		return "settled"
	case StepLimit:
		return "step limit"
	case TimeLimit:
		return "time limit"
	case Interrupted:
		return "interrupted"
	}
	return "unknown"
}
