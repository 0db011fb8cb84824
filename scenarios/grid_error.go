package scenarios

import (
	"math"
	"runtime"
	"sync"

	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// errorSet holds one error for each measured quantity: absolute for
// probabilities, in units of time for times.
type errorSet struct {
	transmitted, reflected, lost, arrivalTransmitted, arrivalReflected, dwell float64
}

func (e errorSet) plus(o errorSet) errorSet {
	return errorSet{
		e.transmitted + o.transmitted, e.reflected + o.reflected, e.lost + o.lost,
		e.arrivalTransmitted + o.arrivalTransmitted, e.arrivalReflected + o.arrivalReflected, e.dwell + o.dwell,
	}
}

func (e errorSet) times(f float64) errorSet {
	return errorSet{
		f * e.transmitted, f * e.reflected, f * e.lost, f * e.arrivalTransmitted, f * e.arrivalReflected, f * e.dwell,
	}
}

// gridError is what the elements, and what the edges, do to the averages: the
// spectrum average of the absolute difference between scattering on the mesh
// and the exact amplitudes. No sign is lost by luck. Samples on a narrow peak
// are not compared at their own energy, but stand and fall with the peak.
type gridError struct{ space, edges errorSet }

// deviation is the difference of two stationary answers at one energy.
type deviation struct{ transmitted, reflected, lost, timeTransmitted, timeReflected, dwell float64 }

// compareGrid scatters every sample on the mesh, on as many goroutines as
// there are processors; the sum is taken in the order of the samples.
func compareGrid(mesh *propagate.Mesh, g geometry, list []sample, peaks []peak) gridError {
	type pair struct {
		space, edges deviation
		near, far    float64 // reflection probabilities of the edges
	}
	each := make([]pair, len(list))
	workers := min(runtime.GOMAXPROCS(0), 1+len(list)/8)
	var group sync.WaitGroup
	for w := range workers {
		group.Go(func() {
			scatterer := propagate.NewScatterer(mesh)
			for i := w; i < len(list); i += workers {
				if k := peakAt(peaks, list[i].energy); k != nil {
					each[i] = pair{k.space.deviate(list[i], g), k.edges.deviate(list[i], g), k.near, k.far}
					continue
				}
				exact, edged := scatterer.At(list[i].energy, g.side == FromRight)
				each[i] = pair{
					deviate(exact, list[i].ideal(g)), deviate(edged, exact),
					norm2(edged.EdgeNear), norm2(edged.EdgeFar),
				}
			}
		})
	}
	group.Wait()
	means := meanTimes(list, g)
	var total gridError
	for i, s := range list {
		total.space = total.space.plus(s.weigh(each[i].space, g, means))
		total.edges = total.edges.plus(s.weigh(each[i].edges, g, means))
		back := s.weight * (each[i].near*s.Reflection + each[i].far*s.Transmission)
		total.edges = total.edges.plus(errorSet{transmitted: back, reflected: back, lost: back})
	}
	return total
}

func norm2(v complex128) float64 { return real(v)*real(v) + imag(v)*imag(v) }

// ideal is what scattering on a perfect mesh would give.
func (s sample) ideal(g geometry) propagate.Scattered {
	out := propagate.Scattered{
		Transmission: s.Transmission, Reflection: s.Reflection, Dwell: s.Dwell,
		PhaseTimeReflected: 2*g.near/s.SpeedIn + s.GroupDelayReflected,
	}
	if s.SpeedOut > 0 {
		out.PhaseTimeTransmitted = g.near/s.SpeedIn + s.GroupDelayTransmitted + g.far/s.SpeedOut
	}
	return out
}

func deviate(a, b propagate.Scattered) deviation {
	return deviation{
		a.Transmission - b.Transmission, a.Reflection - b.Reflection,
		a.Transmission + a.Reflection - b.Transmission - b.Reflection,
		a.PhaseTimeTransmitted - b.PhaseTimeTransmitted, a.PhaseTimeReflected - b.PhaseTimeReflected,
		a.Dwell - b.Dwell,
	}
}

// arrivals are the times at which this energy's wave would reach the planes.
func (s sample) arrivals(g geometry) (transmitted, reflected float64) {
	reflected = (g.start+g.near)/s.SpeedIn + s.GroupDelayReflected
	if s.SpeedOut > 0 {
		transmitted = g.start/s.SpeedIn + s.GroupDelayTransmitted + g.far/s.SpeedOut
	}
	return transmitted, reflected
}

// partMeans are mean arrivals over the samples with their weights.
type partMeans struct{ transmitted, reflected, timeTransmitted, timeReflected float64 }

func meanTimes(list []sample, g geometry) partMeans {
	var m partMeans
	for _, s := range list {
		t, r := s.arrivals(g)
		m.transmitted += s.weight * s.Transmission
		m.reflected += s.weight * s.Reflection
		m.timeTransmitted += s.weight * s.Transmission * t
		m.timeReflected += s.weight * s.Reflection * r
	}
	m.timeTransmitted = ratio(m.timeTransmitted, m.transmitted)
	m.timeReflected = ratio(m.timeReflected, m.reflected)
	return m
}

// ratio is a/b, or 0 where b is 0.
func ratio(a, b float64) float64 {
	if b == 0 {
		return 0
	}
	return a / b
}

// weigh turns a deviation at one energy into its part of the averages' errors.
// A wrong probability also moves a mean time, by its distance from the mean.
func (s sample) weigh(d deviation, g geometry, m partMeans) errorSet {
	t, r := s.arrivals(g)
	w := s.weight
	e := errorSet{
		transmitted: w * math.Abs(d.transmitted), reflected: w * math.Abs(d.reflected),
		lost: w * math.Abs(d.lost), dwell: w * math.Abs(d.dwell),
	}
	if m.transmitted > leastPart && s.Transmission > 0 {
		e.arrivalTransmitted = w * (s.Transmission*math.Abs(d.timeTransmitted) +
			math.Abs(d.transmitted*(t-m.timeTransmitted))) / m.transmitted
	}
	if m.reflected > leastPart && s.Reflection > 0 {
		e.arrivalReflected = w * (s.Reflection*math.Abs(d.timeReflected) +
			math.Abs(d.reflected*(r-m.timeReflected))) / m.reflected
	}
	return e
}

// relative expresses times as parts of what they belong to and returns the
// largest error of a probability and of a time.
func (e errorSet) relative(a *stationary.Averages, m partMeans) (probability, time float64) {
	probability = math.Max(e.transmitted, math.Max(e.reflected, e.lost))
	for _, t := range [][2]float64{
		{e.arrivalTransmitted, m.timeTransmitted}, {e.arrivalReflected, m.timeReflected}, {e.dwell, a.Dwell.Value},
	} {
		if t[1] > 0 {
			time = math.Max(time, t[0]/t[1])
		}
	}
	return probability, time
}

// of returns the largest error as a multiple of what is allowed.
func (e errorSet) of(s *Scenario, a *stationary.Averages, m partMeans) float64 {
	probability, time := e.relative(a, m)
	return math.Max(probability/s.Tolerance, time/s.timeTolerance())
}
