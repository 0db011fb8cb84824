package scenarios

import "math"

// leastEcho is the least height of a part of a pulse that is marked, as a part
// of the highest flow so far and of the one expected.
const leastEcho = 1e-3

// Echo is a part of a split pulse: its number among all parts, from 1, as
// `pulse` counts them, and its highest bin's middle and flow.
type Echo struct {
	Number       int
	Time, Height float64
}

// echoes finds the parts of a flow, once their highest point has passed, of no
// less than a thousandth of the highest flow so far and of the one expected;
// none where the pulse is not split.
func echoes(ends, flow []float64, expected float64) []Echo {
	floor := leastEcho * expected
	for _, v := range flow {
		floor = math.Max(floor, leastEcho*v)
	}
	var list []Echo
	for i, part := range split(flow) {
		if part.peak == len(flow)-1 || !(flow[part.peak] >= floor) {
			continue
		}
		begin := 0.0
		if part.peak > 0 {
			begin = ends[part.peak-1]
		}
		list = append(list, Echo{i + 1, (begin + ends[part.peak]) / 2, flow[part.peak]})
	}
	if len(list) < 2 {
		return nil
	}
	return list
}

// mark adds the echoes at both planes.
func (f *Flows) mark(a Arrivals) {
	f.NearEchoes = echoes(f.Ends, f.Near, a.PeakReflected)
	f.FarEchoes = echoes(f.Ends, f.Far, a.PeakTransmitted)
}
