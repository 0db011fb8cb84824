package scenarios

import "math"

// splitBelow is the part of the lower of two neighbouring maxima below which
// the flow between them must fall for them to be two parts of a pulse;
// leastPeak is the least of the highest maximum that makes a part.
const (
	splitBelow = 0.5
	leastPeak  = 1e-6
)

// stretchOfPulse is one part of a split pulse, as points of its series: from
// and to are where it was split, or the ends.
type stretchOfPulse struct{ from, peak, to int }

// split divides a flow at the minima between its maxima.
func split(flow []float64) []stretchOfPulse {
	floor := 0.0
	for _, v := range flow {
		floor = math.Max(floor, v*leastPeak)
	}
	var out []stretchOfPulse
	now, low := stretchOfPulse{}, 0
	for i, v := range flow {
		switch peak := flow[now.peak]; {
		case flow[low] < splitBelow*math.Min(peak, v) && peak > floor && v > floor:
			now.to = low
			out = append(out, now)
			now, low = stretchOfPulse{low, i, i}, i
		case v > peak:
			now.peak, low = i, i
		case v < flow[low]:
			low = i
		}
	}
	now.to = len(flow) - 1
	if len(flow) > 0 && flow[now.peak] > floor {
		out = append(out, now)
	}
	return out
}

// shape are moments of a stretch of a series, in time.
type shape struct{ probability, mean, deviation float64 }

// shape sums by the trapezoidal rule, spectrally accurate for a flow that
// vanishes at the ends.
func (s series) shape(part stretchOfPulse) shape {
	var sum, first, second float64
	from := s.at(part.peak)
	for i := part.from; i <= part.to; i++ {
		q := s.flow[i] * s.step
		if i == part.from || i == part.to {
			q /= 2
		}
		d := s.at(i) - from
		sum += q
		first += q * d
		second += q * d * d
	}
	mean := ratio(first, sum)
	return shape{sum, from + mean, math.Sqrt(math.Max(0, ratio(second, sum)-mean*mean))}
}

// top is the maximum of the parabola through the peak and the points so many
// before and after it.
func (s series) top(peak, apart int) (time, height float64) {
	a, b := peak-apart, peak+apart
	if a < 0 || b >= len(s.flow) {
		return s.at(peak), s.flow[peak]
	}
	l, m, r := s.flow[a], s.flow[peak], s.flow[b]
	bend := l - 2*m + r
	if !(bend < 0) {
		return s.at(peak), m
	}
	d := (l - r) / (2 * bend)
	return s.at(peak) + d*float64(apart)*s.step, m - (l-r)*d/4
}
