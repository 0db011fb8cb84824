package propagate

import (
	"math"
	"math/cmplx"
	"testing"

	"fluxtoll/potential"
)

// freeSetup is a packet in free space that moves to the right.
func freeSetup() setup {
	s := stepSetup()
	s.exit.Height = 0
	return s
}

// average is the mean of f over the packet's spectrum in k,
// |phi(k)|^2 = sqrt(2/pi) s exp(-2 s^2 (k-k0)^2), by the trapezoidal rule,
// which is of spectral accuracy for it.
func (p Packet) average(f func(k float64) float64) float64 {
	total, weight := 0.0, 0.0
	for i := -600; i <= 600; i++ {
		d := float64(i) / 600 * 7 / (2 * p.Length) // to 7 standard deviations, 1e-11
		w := math.Exp(-2 * p.Length * p.Length * d * d)
		total += w * f(math.Abs(p.K0)+d)
		weight += w
	}
	return total / weight
}

// sentBack is the probability that the right edge of a set-up sends back,
// measured: the packet runs into it, and what is then between the planes
// differs by this from the same run in a box so large that nothing returns.
func sentBack(t *testing.T, s setup, time float64) float64 {
	t.Helper()
	large := s
	large.extent.Right += 300 + 10*s.packet.Length
	here, there := s.stepper(t), large.stepper(t)
	advance(here, time)
	advance(there, time)
	m := here.Mesh
	difference := newWave(m)
	for f := m.left; f <= m.right; f++ {
		difference.face[f] = here.psi.face[f] - there.psi.face[f]
	}
	for i := m.elements[m.left].mode; i < m.elements[m.right].mode; i++ {
		difference.mode[i] = here.psi.mode[i] - there.psi.mode[i]
	}
	return m.norm(m.left, m.right, difference)
}

// A bad edge sends back what Edge.Reflection says it does.
func TestEdgeReflectionPredictsTheMeasured(t *testing.T) {
	s := freeSetup()
	s.order, s.phase, s.edge.First = 8, 4, 1
	s.extent.Left, s.extent.PlaneLeft = -200, -200 // room for all that returns
	for _, count := range []int{1, 2, 3} {
		s.edge.Count = count
		measured := sentBack(t, s, 80)
		computed := s.packet.average(func(k float64) float64 {
			return square(s.edge.Reflection(s.exit, s.order, k*k/2))
		})
		if !(computed > 1e-12) {
			t.Fatalf("%d elements send back %g: not bad enough to measure", count, computed)
		}
		near(t, "measured/computed", measured/computed, 1, 1e-3)
	}
}

// The edge that is chosen for a packet sends back less than 1e-9 over its
// band, in a run.
func TestChosenEdgeMeasured(t *testing.T) {
	for _, packet := range []Packet{
		{Centre: -40, Length: 5, K0: 2},
		{Centre: -15, Length: 2, K0: 2.5}, // five wavelengths: k from 0.75 to 4.25 at 7 deviations
	} {
		s := freeSetup()
		s.packet, s.high = packet, 10
		var goals []EdgeGoal
		for i := -60; i <= 60; i++ {
			k := packet.K0 + float64(i)/60*7/(2*packet.Length)
			goals = append(goals, EdgeGoal{k * k / 2, 1.0 / 121})
		}
		s.edge = ChooseEdge(s.exit, s.order, goals, 1e-6)
		for _, g := range goals {
			r := square(s.edge.Reflection(s.exit, s.order, g.Energy))
			if !(r < 1e-9) {
				t.Errorf("computed reflection %g at energy %g", r, g.Energy)
			}
		}
		if r := sentBack(t, s, 50); !(r < 1e-9) {
			t.Errorf("measured reflection %g of %+v", r, packet)
		}
	}
}

// The mesh's own edges and an edge on its own are the same thing.
func TestEdgeOnAMeshIsTheEdgeAlone(t *testing.T) {
	s := mixedSetup()
	s.edge.Count = 3
	s.extent.Left, s.extent.Right = s.extent.PlaneLeft, s.extent.PlaneRight
	_, edged := NewScatterer(s.mesh(t)).At(1.7, false)
	for _, pair := range [][2]complex128{
		{edged.EdgeNear, s.edge.Reflection(s.entry, s.order, 1.7)},
		{edged.EdgeFar, s.edge.Reflection(s.exit, s.order, 1.7)},
	} {
		closeTo(t, "reflection", pair[0], pair[1], 1e-12)
	}
}

// Without rotation the edge is a box with a wall: everything comes back, in
// the phase of the way there and back.
func TestUnrotatedEdgeIsAWall(t *testing.T) {
	e := Edge{Count: 3, First: 1, Growth: 1.4}
	length := 1 + 1.4 + 1.4*1.4
	for _, k := range []float64{0.5, 1.1, 2.3} {
		got := e.Reflection(potential.Lead{Mass: 1}, 16, k*k/2)
		closeTo(t, "reflection", got, -cmplx.Exp(complex(0, 2*k*length)), 1e-10)
	}
}

func TestChooseEdge(t *testing.T) {
	lead := potential.Lead{Height: 0.3, Mass: 0.8}
	goals := []EdgeGoal{{0.1, 5}, {0.35, 0.3}, {9, 0.7}} // the first is closed
	sum := func(e Edge) float64 {
		return 0.3*cmplx.Abs(e.Reflection(lead, 12, 0.35)) + 0.7*cmplx.Abs(e.Reflection(lead, 12, 9))
	}
	count := 0
	for _, limit := range []float64{1e-3, 1e-6, 1e-10} {
		e := ChooseEdge(lead, 12, goals, limit)
		if !(sum(e) <= limit) || e.Count <= count {
			t.Errorf("limit %g: %+v sends back %g", limit, e, sum(e))
		}
		shorter := e
		if shorter.Count--; e.Count > leastEdge && sum(shorter) <= limit {
			t.Errorf("limit %g: one element less would do", limit)
		}
		count = e.Count
	}
	best := ChooseEdge(lead, 12, goals, 0)
	if !(sum(best) < 1e-12) {
		t.Errorf("best edge %+v sends back %g", best, sum(best))
	}
	if e := ChooseEdge(lead, 12, nil, 1e-9); e.Count != leastEdge || !(e.First > 0) {
		t.Errorf("edge for nothing: %+v", e)
	}
}
