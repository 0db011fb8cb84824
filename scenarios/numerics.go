package scenarios

// Numerics reports every numerical setting of a run, in display units.
type Numerics struct {
	Nodes       int     `json:"nodes"`
	Elements    int     `json:"elements"`
	Order       int     `json:"order"`
	Shortest    float64 `json:"shortest_element"`
	Longest     float64 `json:"longest_element"`
	EdgeNear    int     `json:"edge_elements_left"`
	EdgeFar     int     `json:"edge_elements_right"`
	Pade        int     `json:"pade"`
	TimeStep    float64 `json:"time_step"`
	Origin      float64 `json:"energy_origin"`
	BandLow     float64 `json:"band_low"`
	BandHigh    float64 `json:"band_high"`
	Steps       int     `json:"steps"`
	Solves      int     `json:"solves"`
	EndTime     float64 `json:"end_time"`
	Evaluations int     `json:"evaluations"` // energies on the stationary road
}

func (t *Trial) numerics() Numerics {
	s, p, l := t.Scenario.Scale, t.Plan, t.Run.Ledger()
	shortest, longest := p.Mesh.ElementLengths()
	left, right := p.Mesh.EdgeElements()
	return Numerics{
		Nodes: p.Mesh.Nodes(), Elements: p.Mesh.Elements(), Order: p.Mesh.Order(),
		Shortest: shortest * s.Length, Longest: longest * s.Length,
		EdgeNear: left, EdgeFar: right,
		Pade: p.Pade.Member, TimeStep: p.TimeStep * s.Time,
		Origin: p.Origin * s.Energy, BandLow: p.Low * s.Energy, BandHigh: p.High * s.Energy,
		Steps: l.Steps, Solves: l.Steps * p.Pade.Member, EndTime: l.Time * s.Time,
		Evaluations: t.Averages.Evaluations,
	}
}
