package scenarios

import (
	"fluxtoll/potential/stationary"
)

// sample is one energy of the packet's spectrum with its exact amplitudes, as
// the stationary road found them: what the plan and the budget weigh with.
type sample struct {
	energy, weight float64 // weight is |phi|^2 dk
	stationary.Amplitudes
}

// maxSamples bounds how many energies the packet road's own operators are held
// against.
const maxSamples = 240

// samples turns the quadrature points of the averages into at most about limit
// samples: neighbours are merged so that each holds about the same share of
// what is transmitted, reflected and sent, and stands at the middle one.
func samples(a *stationary.Averages, limit int, lead leadEnergy) []sample {
	share := func(n stationary.Node) float64 {
		s := n.Weight
		if a.Transmitted.Value > 0 {
			s += n.Weight * n.Amplitudes.Transmission / a.Transmitted.Value
		}
		if a.Reflected.Value > 0 {
			s += n.Weight * n.Amplitudes.Reflection / a.Reflected.Value
		}
		return s
	}
	total := 0.0
	for _, n := range a.Nodes {
		total += share(n)
	}
	bin := 0.0
	if len(a.Nodes) > limit {
		bin = total / float64(limit)
	}
	return merge(a.Nodes, share, bin, lead)
}

// leadEnergy gives the energy of a wave number in a lead.
type leadEnergy func(k float64) float64

func merge(nodes []stationary.Node, share func(stationary.Node) float64, bin float64, energy leadEnergy) []sample {
	var out []sample
	for i := 0; i < len(nodes); {
		held, weight, j := 0.0, 0.0, i
		for j < len(nodes) && (j == i || held+share(nodes[j])/2 <= bin) {
			held += share(nodes[j])
			weight += nodes[j].Weight
			j++
		}
		n := nodes[heaviest(nodes[i:j], share)+i]
		if weight > 0 {
			out = append(out, sample{energy(n.K), weight, n.Amplitudes})
		}
		i = j
	}
	return out
}

// heaviest is the index of the node with the largest share.
func heaviest(nodes []stationary.Node, share func(stationary.Node) float64) int {
	best := 0
	for i := range nodes {
		if share(nodes[i]) > share(nodes[best]) {
			best = i
		}
	}
	return best
}

// band is the range of energies outside which less than a fraction of what is
// sent, transmitted and reflected lies.
func band(a *stationary.Averages, energy leadEnergy, fraction float64) (low, high float64) {
	cut := func(from, step int) float64 {
		var sent, through, back float64
		i := from
		for ; i >= 0 && i < len(a.Nodes); i += step {
			n := a.Nodes[i]
			sent += n.Weight
			through += n.Weight * n.Amplitudes.Transmission
			back += n.Weight * n.Amplitudes.Reflection
			if sent > fraction || through > fraction*a.Transmitted.Value || back > fraction*a.Reflected.Value {
				break
			}
		}
		return energy(a.Nodes[min(max(i, 0), len(a.Nodes)-1)].K)
	}
	return cut(0, 1), cut(len(a.Nodes)-1, -1)
}
