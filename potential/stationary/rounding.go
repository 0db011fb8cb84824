package stationary

import "math"

// rounding is what rounding may do to a panel's sums. The amplitudes of a node
// are off by a few roundings, steady, which may be alike at all nodes; and by
// what the crossing of the structure makes of them, jitter, which is different
// at every node, so that its squares add. Next to a narrow resonance the
// second is by far the larger.
type rounding struct {
	steady, jitter       [sums]float64 // jitter squared
	layerSteady, layerSq float64       // of the layers' sums, relative
}

// add adds the share of one node, g and t its weights times |phi|^2 and
// |phi|^2 T, place the relative change of |phi|^2 when k is off by a rounding.
func (r *rounding) add(a *Amplitudes, g, t, place float64) {
	const few = 4 * eps
	r.share(a, g, t, few, eps, func(j int, x float64) { r.steady[j] += x })
	r.share(a, g, t, a.rounding, eps*place, func(j int, x float64) { r.jitter[j] += x * x })
	r.layerSteady = 2 * few
	layer := 2*a.rounding + eps*place
	r.layerSq = max(r.layerSq, layer*layer)
}

// share passes on what a relative error nu of the amplitudes and one of weight
// of |phi|^2 do to each integrand.
func (r *rounding) share(a *Amplitudes, g, t, nu, weight float64, to func(int, float64)) {
	// A delay is off by what moves the poles, over their distance.
	slope := a.sharpness + math.Abs(a.GroupDelayTransmitted) + a.Dwell
	reflected := g * (2*nu*(math.Sqrt(a.Reflection)+nu) + weight*a.Reflection)
	to(sumOne, weight*g)
	to(sumSlow, weight*g/a.SpeedIn)
	if t > 0 {
		transmitted := t * (2*nu + weight)
		to(sumT, transmitted)
		to(sumDelayT, transmitted*slope)
		to(sumSlowInT, transmitted/a.SpeedIn)
		to(sumSlowOutT, transmitted/a.SpeedOut)
	}
	to(sumR, reflected)
	to(sumDelayR, reflected*slope)
	to(sumSlowR, reflected/a.SpeedIn)
	to(sumA, (2*nu+weight)*a.Absorption*g)
	to(sumDwell, (2*nu+weight)*a.Dwell*g)
}

// sigmas is how many standard deviations of the jitter count as its bound.
const sigmas = 3

// of bounds the rounding of sum j, value the panel's sums.
func (r *rounding) of(j int, value []float64) float64 {
	if j < sums {
		return r.steady[j] + sigmas*math.Sqrt(r.jitter[j])
	}
	return value[j] * (r.layerSteady + sigmas*math.Sqrt(r.layerSq))
}
