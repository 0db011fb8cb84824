package propagate

import (
	"math"
	"math/cmplx"

	"fluxtoll/potential"
)

// EdgeGoal is one energy at which an edge has to absorb, and the share of the
// packet that meets the edge there.
type EdgeGoal struct{ Energy, Weight float64 }

// Edges from leastEdge to mostEdge elements are tried.
const (
	leastEdge = 4
	mostEdge  = 40
)

// ChooseEdge returns the shortest edge for which the weighted sum of
// |reflection amplitude| over the goals is at most limit, or, where none of
// those tried is good enough, the one with the least. Goals at which the lead
// is closed do not count.
func ChooseEdge(lead potential.Lead, order int, goals []EdgeGoal, limit float64) Edge {
	goals = openGoals(lead, goals)
	uniform := uniformPencil(newRule(order))
	unit := shortestWave(lead, goals)
	var trials []*edgeTrial
	for _, first := range []float64{2, 3, 4.5, 6} {
		for _, growth := range []float64{1.3, 1.5, 1.7, 2.1} {
			e := Edge{First: first * unit, Growth: growth, Angle: EdgeAngle}
			trials = append(trials, newEdgeTrial(e, uniform, lead, goals))
		}
	}
	best, least := Edge{}, math.Inf(1)
	for range mostEdge {
		for _, t := range trials {
			sum := t.extend()
			if t.edge.Count >= leastEdge && sum < least {
				best, least = t.edge, sum
			}
		}
		if least <= limit {
			break
		}
	}
	return best
}

// openGoals drops the goals at which the lead is closed.
func openGoals(lead potential.Lead, goals []EdgeGoal) []EdgeGoal {
	var open []EdgeGoal
	for _, g := range goals {
		if g.Energy > lead.Height {
			open = append(open, g)
		}
	}
	return open
}

// shortestWave is 1/k of the fastest goal; without any, a length at which
// everything tried is absurdly long, and absorbs.
func shortestWave(lead potential.Lead, goals []EdgeGoal) float64 {
	top := math.SmallestNonzeroFloat32
	for _, g := range goals {
		top = max(top, g.Energy-lead.Height)
	}
	return 1 / math.Sqrt(2*lead.Mass*top)
}

// edgeTrial is an edge that grows element by element, with what it reflects at
// every goal.
type edgeTrial struct {
	edge  Edge
	next  float64 // length of the element to come
	cell  cell
	lead  potential.Lead
	goals []EdgeGoal
	waves []leadWave
	rows  []edgeRow
}

func newEdgeTrial(e Edge, uniform *pencil, lead potential.Lead, goals []EdgeGoal) *edgeTrial {
	t := &edgeTrial{
		edge: e, next: e.First, lead: lead, goals: goals, cell: cell{pencil: uniform},
		waves: make([]leadWave, len(goals)), rows: make([]edgeRow, len(goals)),
	}
	for i, g := range goals {
		t.waves[i] = waveIn(lead, g.Energy)
	}
	return t
}

// extend adds one element and returns the weighted sum of what is reflected.
func (t *edgeTrial) extend() float64 {
	h := complex(t.next, 0) * cmplx.Exp(complex(0, t.edge.Angle))
	c := flatCell(t.cell.pencil, h, t.lead.Height, t.lead.Mass, 0)
	t.edge.Count++
	t.next *= t.edge.Growth
	sum := 0.0
	for i, g := range t.goals {
		t.rows[i].append(c.condense(1, complex(g.Energy, 0)))
		sum += g.Weight * cmplx.Abs(t.waves[i].reflect(t.rows[i].all.ll))
	}
	return sum
}
