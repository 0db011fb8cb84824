package scenarios

import "math"

// freeWidth is the standard deviation of the time at which a freely moving
// packet passes a plane at a distance beyond its start, weighted with the
// flow,
//
//	Var(way/v) + <(4 (k-k0)^2 L^4 + 2 (k-k0) L^2/k)/v^2>,
//
// rooted, means over |phi|^2: the second moment of the flow of
// a(E) = phi(k) exp(i k way)/(sqrt(2 pi) v). The error is that of the rule,
// whose points are halved for it. It has no meaning (ok is false) where the
// spectrum reaches to k = 0, at which times diverge.
func (s *Scenario) freeWidth(way float64) (width, slip float64, ok bool) {
	p := s.Packet
	const least = 4.5 // k0 L: |phi(0)|^2 is then below 1e-17 of its peak
	if p.K0*p.Length < least {
		return 0, 0, false
	}
	width = s.freeWidthBy(way, freePoints)
	return width, math.Abs(width-s.freeWidthBy(way, freePoints/2)) + 1e-14*width, true
}

// freePoints is the number of points of the rule: of spectral accuracy for a
// Gaussian.
const freePoints = 512

func (s *Scenario) freeWidthBy(way float64, points int) float64 {
	p := s.Packet
	near, _ := s.leads()
	reach := math.Min(8/(2*p.Length), 0.999*p.K0)
	var sum, first, second, own float64
	mean := way * near.Mass / p.K0
	for i := range points + 1 {
		d := reach * (2*float64(i)/float64(points) - 1)
		k := p.K0 + d
		weight, slow := math.Exp(-2*d*d*p.Length*p.Length), near.Mass/k
		t, x := way*slow-mean, d*p.Length*p.Length
		sum += weight
		first += weight * t
		second += weight * t * t
		own += weight * slow * slow * (4*x*x + 2*x/k)
	}
	m := first / sum
	return math.Sqrt(second/sum - m*m + own/sum)
}
