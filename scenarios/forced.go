package scenarios

// Forced holds numerical settings that a user insists on; the zero value
// leaves everything to the plan. Lengths and times are in internal units.
type Forced struct {
	Order    int     // order of the elements, 2 to 24
	Element  float64 // length of an element in the leads
	Edge     int     // elements in each absorbing edge
	Pade     int     // member of the time-stepping family, 1 = Crank-Nicolson
	TimeStep float64
	StopTime float64 // end of the run, settled or not
	Limits
}

// Limits bound the work of one run. Zero means the default.
type Limits struct {
	Nodes int // grid nodes
	Steps int // time steps
	Bytes int // memory of the matrices, bytes
}

// Default limits: a run within them ends in a few minutes on one core.
const (
	DefaultNodes = 4_000_000
	DefaultSteps = 2_000_000
	DefaultBytes = 4 << 30
	// defaultWork bounds nodes x steps x factors: a minute or two.
	defaultWork = 1e10
)

func (l Limits) orDefault() Limits {
	if l.Nodes == 0 {
		l.Nodes = DefaultNodes
	}
	if l.Steps == 0 {
		l.Steps = DefaultSteps
	}
	if l.Bytes == 0 {
		l.Bytes = DefaultBytes
	}
	return l
}
