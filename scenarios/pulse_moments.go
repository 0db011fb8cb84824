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
func twice(each func(add func(t, q float64))) momentSum {
	var rough momentSum
	each(rough.add)
	m := momentSum{mean: ratio(rough.first, rough.total)}
	each(m.add)
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

// stepMoments are those of the flow in every step, by the ledger's continuity.
func stepMoments(list []propagate.Stretch, right bool) moments {
	box, total := 0.0, 0.0
	m := twice(func(add func(t, q float64)) {
		for i := range list {
			p := &list[i]
			for n, flow := range traceAt(p, right).Flow {
				add(p.Time+p.Step*(float64(n)+0.5), flow*p.Step)
			}
		}
	})
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
	m := twice(func(add func(t, q float64)) {
		for i, flow := range s.flow {
			add(s.at(i), flow*s.step)
		}
	})
	return m.moments(0)
}
