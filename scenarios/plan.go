package scenarios

import (
	"fmt"
	"math"

	"fluxtoll/potential"
	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// Plan is the numerics of the packet road for one scenario, chosen from the
// tolerance and the stationary averages. Everything is in internal units.
type Plan struct {
	geometry
	Low, High float64 // band of energies that the grid resolves
	Order     int
	Phase     float64 // |k| h of an element at most
	Pade      propagate.Pade
	TimeStep  float64
	Origin    float64 // energy from which phases are counted
	Expected  float64 // time at which the run is expected to end
	MostSteps int     // step limit of the run
	Mesh      *propagate.Mesh

	States []*propagate.Eigenstate // by which the run is finished, if any

	k0, length float64           // of the packet
	handled    []stationary.Pole // the averages' resonances of the States

	samples  []sample // merged: for what costs a solve each
	all      []sample
	grids    gridError
	start0   errorSet // what the start does to the averages: the packet term
	sampling float64  // probability of what the mesh adds to the packet at the start
}

// LimitError says that a run was refused because it would exceed a limit.
type LimitError struct {
	What     string // "grid nodes", "time steps", "memory", "work"
	Estimate float64
	Limit    float64
	Flag     string // the flag that lifts the limit
}

func (e *LimitError) Error() string {
	return fmt.Sprintf("the packet road would need about %.2g %s; the limit is %.2g; %s lifts it",
		e.Estimate, e.What, e.Limit, e.Flag)
}

// The tolerance is shared out among the terms of the budget; what is left is
// for rounding and for the averages' own error.
const (
	shareSpace  = 0.25
	shareTime   = 0.25
	shareEdges  = 0.1
	sharePacket = 0.05
	shareTail   = 0.1
)

// leastPart is the smallest transmitted or reflected probability whose arrival
// the packet road is asked to time: below it rounding in the sums weighs more
// than the tolerance.
const leastPart = 1e-12

// smallPart is the relative accuracy that the plan, though not the verdict,
// asks of a probability however small, and leastSmall the smallest.
const (
	smallPart  = 1e-4
	leastSmall = 1e-15
)

// planner holds what the steps of planning share.
type planner struct {
	*Plan
	scenario *Scenario
	forced   Forced
	averages *stationary.Averages
	near     potential.Lead
	far      potential.Lead
}

// newPlan makes the plan. The error is a *LimitError where the run would be
// too large.
func newPlan(s *Scenario, a *stationary.Averages, beyond stationary.Mean, forced Forced) (*Plan, error) {
	forced.Limits = forced.orDefault()
	p := &planner{Plan: &Plan{k0: s.Packet.K0, length: s.Packet.Length}, scenario: s, forced: forced, averages: a}
	p.near, p.far = s.leads()
	p.geometry.beyond = beyond
	p.spectrum()
	p.positions()
	if err := p.grid(); err != nil {
		return nil, err
	}
	p.start0 = p.start0.plus(p.misplaced(p.geometry, p.sampling))
	p.poles()
	if err := p.time(); err != nil {
		return nil, err
	}
	return p.Plan, nil
}

// energy is the total energy of a wave number in the packet's lead.
func (p *planner) energy(k float64) float64 { return p.near.Height + k*k/(2*p.near.Mass) }

// spectrum finds the band and the samples.
func (p *planner) spectrum() {
	p.Low, p.High = band(p.averages, p.energy, 1e-2*p.scenario.Tolerance)
	p.samples = samples(p.averages, maxSamples, p.energy)
	p.all = samples(p.averages, len(p.averages.Nodes), p.energy)
	p.Origin = p.scenario.Packet.Energy
}

// grid chooses order, element length and edges, and refines until the
// elements' own scattering is close enough to the exact one.
func (p *planner) grid() error {
	p.Order, p.Phase = 12, 8
	if p.scenario.Tolerance < 1e-8 {
		p.Phase = 6.5
	}
	if p.forced.Order > 0 {
		p.Order = p.forced.Order
	}
	if p.forced.Element > 0 {
		p.Phase = p.forced.Element * math.Sqrt(2*p.near.Mass*(p.High-p.near.Height))
	}
	const refinements = 5
	best := math.Inf(1)
	for range refinements {
		mesh, err := p.mesh()
		if err != nil {
			return err
		}
		grids := compareGrid(mesh, p.geometry, p.samples, p.peaks(mesh))
		sampling := p.packet().SamplingError(mesh)
		worst := math.Max(p.weight(grids.space), p.weight(p.misplaced(p.geometry, sampling)))
		if worst < best {
			best, p.Mesh, p.grids, p.sampling = worst, mesh, grids, sampling
		}
		if p.forced.Element > 0 || best <= shareSpace || worst > best {
			break
		}
		p.Phase *= 0.75
	}
	return nil
}

// weight is an error as a multiple of what is allowed, a small part's own
// accuracy included.
func (p *planner) weight(e errorSet) float64 {
	w := e.of(p.scenario, p.averages, p.means(p.geometry))
	for _, part := range [][2]float64{
		{e.transmitted, p.averages.Transmitted.Value}, {e.reflected, p.averages.Reflected.Value},
	} {
		if part[1] > leastSmall {
			w = math.Max(w, part[0]/(smallPart*part[1]))
		}
	}
	return w
}

// packet is the packet as the packet road takes it.
func (p *Plan) packet() propagate.Packet {
	k0 := p.k0
	if p.side == FromRight {
		k0 = -k0
	}
	return propagate.Packet{Centre: p.at(p.start), Length: p.length, K0: k0}
}

// mesh builds the mesh for the present order and phase.
func (p *planner) mesh() (*propagate.Mesh, error) {
	limit := math.Max(shareEdges*p.scenario.Tolerance/4, 1e-13)
	m := p.means(p.geometry)
	nearEdge := p.edge(p.near, limit, func(s sample) float64 { return ratio(s.Reflection, m.reflected) })
	farEdge := p.edge(p.far, limit, func(s sample) float64 {
		// What comes back from the far edge comes late, and most of it ends as
		// reflected.
		share := ratio(s.Transmission, m.transmitted)
		if m.timeReflected > 0 && s.SpeedOut > 0 {
			share += s.Transmission / m.reflected * p.geometry.far / s.SpeedOut / m.timeReflected
		}
		return share
	})
	if p.side == FromRight {
		nearEdge, farEdge = farEdge, nearEdge
	}
	resolution := propagate.Resolution{
		Order: p.Order, Phase: p.Phase, Low: p.Low, High: p.High,
		Height:   p.heightTolerance(),
		MaxNodes: p.forced.Nodes,
	}
	layout, err := propagate.NewLayout(p.scenario.Structure, resolution, p.extent(), nearEdge, farEdge)
	if err != nil {
		if size, ok := err.(*propagate.SizeError); ok {
			return nil, &LimitError{"grid nodes", size.Nodes, float64(size.Limit), "--max-nodes"}
		}
		return nil, err
	}
	if bytes := layout.Bytes(); bytes > float64(p.forced.Bytes) {
		return nil, &LimitError{"bytes of memory", bytes, float64(p.forced.Bytes), "--max-memory"}
	}
	return propagate.NewMesh(layout), nil
}

// heightTolerance is how well an element must resolve V: a part of the
// tolerance, but no better than the sums that measure it.
func (p *planner) heightTolerance() float64 {
	kinetic := p.scenario.Packet.Energy - p.near.Height
	span := math.Abs(p.High) + math.Abs(p.Low)
	for _, g := range p.scenario.Structure.Segments {
		lo, hi := g.Height.Range(g.From, g.To)
		span = math.Max(span, math.Max(math.Abs(lo), math.Abs(hi)))
	}
	const rounding = 5e-14 // of a sum of some hundred terms
	return math.Max(1e-2*p.scenario.Tolerance*kinetic, rounding*span)
}

// edge chooses an edge for a lead; share is what part of its outgoing wave an
// energy makes up.
func (p *planner) edge(lead potential.Lead, limit float64, share func(sample) float64) propagate.Edge {
	var goals []propagate.EdgeGoal
	for _, s := range p.samples {
		if w := s.weight * share(s); w > 0 && !math.IsInf(w, 0) {
			goals = append(goals, propagate.EdgeGoal{Energy: s.energy, Weight: w})
		}
	}
	e := propagate.ChooseEdge(lead, p.Order, append(goals, p.threshold(lead)...), limit)
	if p.forced.Edge > 0 {
		e.Count = p.forced.Edge
	}
	return e
}

// threshold lists goals ever closer to the height of the far lead where the
// packet's energies straddle it: each stands for what of the packet lies that
// close, as a share of the smaller part.
func (p *planner) threshold(lead potential.Lead) []propagate.EdgeGoal {
	const closest = 1e-12 // of the band
	step := lead.Height - p.near.Height
	if !(step > 0 && lead.Height > p.Low && lead.Height < p.High) {
		return nil
	}
	k := math.Sqrt(2 * p.near.Mass * step)
	d := (k - p.k0) * p.length
	density := math.Sqrt(2/math.Pi) * p.length * math.Exp(-2*d*d) * p.near.Mass / k
	part := 1.0
	for _, v := range []float64{p.averages.Transmitted.Value, p.averages.Reflected.Value} {
		if v > leastPart {
			part = math.Min(part, v)
		}
	}
	var goals []propagate.EdgeGoal
	for e := (p.High - p.Low) / 16; e > closest*(p.High-p.Low); e /= 4 {
		goals = append(goals, propagate.EdgeGoal{Energy: lead.Height + e, Weight: e * density / part})
	}
	return goals
}
