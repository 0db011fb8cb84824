package scenarios

import (
	"math"

	"fluxtoll/propagate"
)

// moments of a flow in time: its integral, mean, standard deviation, and the
// third central moment over the cube of that.
type moments struct{ total, mean, deviation, skewness float64 }

// momentSum sums them about the mean, in two passes over the same terms.
type momentSum struct{ total, first, second, third, mean float64 }

func (m *momentSum) add(t, q float64) {
	d := t - m.mean
	m.total += q
	m.first += q * d
	m.second += q * d * d
	m.third += q * d * d * d
}

// twice sums what each lists about its mean.
func twice(each func(*momentSum)) momentSum {
	var rough momentSum
	each(&rough)
	m := momentSum{mean: ratio(rough.first, rough.total)}
	each(&m)
	return m
}

// moments completes the sums; box is the variance that sums over intervals
// have too much (W. F. Sheppard, Proc. London Math. Soc. 29, 353 (1898)).
func (m momentSum) moments(box float64) moments {
	shift := ratio(m.first, m.total)
	variance := ratio(m.second, m.total) - shift*shift - box
	out := moments{total: m.total, mean: m.mean + shift, deviation: math.Sqrt(math.Max(0, variance))}
	third := ratio(m.third, m.total) - 3*shift*ratio(m.second, m.total) + 2*shift*shift*shift
	out.skewness = ratio(third, math.Pow(out.deviation, 3))
	return out
}

// addTail adds what a tail sends from a time on, by its moments from then.
func (m *momentSum) addTail(time float64, q [4]float64) {
	d := time - m.mean
	m.total += q[0]
	m.first += q[1] + d*q[0]
	m.second += q[2] + d*(2*q[1]+d*q[0])
	m.third += q[3] + d*(3*q[2]+d*(3*q[1]+d*q[0]))
}

// stepMoments are those of the flow in every step, by the ledger's continuity,
// and of the tail, if any.
func stepMoments(list []propagate.Stretch, right bool, tail *propagate.Tail) moments {
	box, total := 0.0, 0.0
	m := twice(func(m *momentSum) {
		for i := range list {
			p := &list[i]
			for n, flow := range traceAt(p, right).Flow {
				m.add(p.Time+p.Step*(float64(n)+0.5), flow*p.Step)
			}
		}
		if tail != nil {
			m.addTail(tail.Time, tail.TailMoments(right))
		}
	})
	if tail != nil {
		q := tail.TailMoments(right)[0]
		box, total = q*tail.Step*tail.Step/12, q
	}
	for i := range list {
		p := &list[i]
		for _, flow := range traceAt(p, right).Flow {
			box += flow * p.Step * p.Step * p.Step / 12
			total += flow * p.Step
		}
	}
	return m.moments(ratio(box, total))
}

// moments are those of the series, by the trapezoidal rule.
func (s series) moments() moments {
	m := twice(func(m *momentSum) {
		for i, flow := range s.flow {
			m.add(s.at(i), flow*s.step)
		}
	})
	return m.moments(0)
}
