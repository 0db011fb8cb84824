package stationary

import (
	"context"
	"math"
	"runtime"
	"slices"
	"sync"
	"sync/atomic"
)

// Curve returns the amplitudes at every one of the energies, all above the
// incident lead's height. It works on all processors; what it returns does not depend on their
// number.
func (s *Solver) Curve(ctx context.Context, energies []float64) ([]Amplitudes, error) {
	return s.curve(ctx, energies, runtime.GOMAXPROCS(0))
}

// curve is Curve with a number of workers.
func (s *Solver) curve(ctx context.Context, energies []float64, workers int) ([]Amplitudes, error) {
	out := make([]Amplitudes, len(energies))
	errs := make([]error, len(energies))
	var next atomic.Int64
	work := func(s *Solver) {
		for i := int(next.Add(1)) - 1; i < len(out); i = int(next.Add(1)) - 1 {
			if errs[i] = ctx.Err(); errs[i] == nil {
				errs[i] = s.At(energies[i], &out[i])
			}
		}
	}
	var group sync.WaitGroup
	for range min(workers, len(energies)) - 1 {
		clone := s.Clone()
		group.Go(func() { work(clone) })
	}
	work(s)
	group.Wait()
	for _, err := range errs {
		if err != nil {
			return nil, err
		}
	}
	return out, nil
}

// ProbabilityError bounds what rounding does to Transmission, Reflection and
// Absorption at this energy: three standard deviations of what the crossing
// makes of it, and some roundings more.
func (a *Amplitudes) ProbabilityError() float64 {
	nu := a.relativeError()
	reflected := 2 * nu * (math.Sqrt(a.Reflection) + nu)
	return max(reflected, 2*nu*a.Transmission, 2*nu*a.Absorption)
}

// TimeError bounds what rounding does to the delays and dwell times.
func (a *Amplitudes) TimeError() float64 {
	return 2 * a.relativeError() * (a.sharpness + math.Abs(a.GroupDelayTransmitted) + a.Dwell)
}

// relativeError bounds the relative error of the amplitudes.
func (a *Amplitudes) relativeError() float64 { return sigmas*a.rounding + 4*eps }

// Fineness says how closely straight lines between the points of an adaptive
// curve follow it.
type Fineness struct {
	Probability float64 // absolute, of Transmission, Reflection and Absorption
	// Time is relative to the time itself or to the dwell time, whichever is
	// longer; the delay of reflection counts as far as anything is reflected.
	Time   float64
	Points int // with more than so many points it gives up
}

// Adaptive returns the amplitudes at energies between from and to, both
// included, chosen so that straight lines between them are as fine as asked for, and so that no resonance
// is missed: about every pole that a real energy can feel (see Resonances)
// stands a ladder of points. Unresolved counts poles too narrow for double
// precision. Beyond the number of points it returns what it has and ErrEvaluations.
func (s *Solver) Adaptive(ctx context.Context, from, to float64, f Fineness) (points []Amplitudes, unresolved int, err error) {
	poles, unresolved, err := s.Resonances(ctx, from, to, 4*f.Points)
	if ctx.Err() != nil {
		return nil, 0, ctx.Err()
	}
	if err != nil && poles == nil {
		return nil, 0, err
	}
	limit := err
	points, err = s.Curve(ctx, s.rungs(from, to, poles))
	if err != nil {
		return nil, 0, err
	}
	fine := make([]bool, len(points)) // the interval that ends there
	for {
		middles, at := open(points, fine)
		if len(middles) == 0 {
			return points, unresolved, limit
		}
		if len(points)+len(middles) > f.Points {
			return points, unresolved, ErrEvaluations
		}
		found, err := s.Curve(ctx, middles)
		if err != nil {
			return nil, 0, err
		}
		points, fine = woven(points, fine, found, at, f, s.near.Height)
	}
}

// open lists the middles of the intervals that are not known to be fine, and
// the indices of the points that end them.
func open(points []Amplitudes, fine []bool) (middles []float64, ends []int) {
	for i := 1; i < len(points); i++ {
		a, b := points[i-1].Energy, points[i].Energy
		mid := a + (b-a)/2
		if !fine[i] && b-a > 64*eps*math.Abs(b) && mid > a && mid < b {
			middles, ends = append(middles, mid), append(ends, i)
		}
	}
	return middles, ends
}

// woven puts the middles in their places. Where a middle lies close to the
// straight line, both halves are fine.
func woven(points []Amplitudes, fine []bool, middles []Amplitudes, ends []int, f Fineness, lead float64) ([]Amplitudes, []bool) {
	out := make([]Amplitudes, 0, len(points)+len(middles))
	flags := make([]bool, 0, cap(out))
	next := 0
	for i := range points {
		flag := true
		if next < len(ends) && ends[next] == i {
			m := &middles[next]
			flag = f.straight(&points[i-1], m, &points[i], lead)
			out, flags = append(out, *m), append(flags, flag)
			next++
		}
		out, flags = append(out, points[i]), append(flags, flag)
	}
	return out, flags
}

// straight reports whether m, halfway between a and b, lies close enough to
// the line between them.
func (f Fineness) straight(a, m, b *Amplitudes, lead float64) bool {
	off := func(x, y, z float64) float64 { return math.Abs(y - (x+z)/2) }
	if !(off(a.Transmission, m.Transmission, b.Transmission) <= f.Probability &&
		off(a.Reflection, m.Reflection, b.Reflection) <= f.Probability &&
		off(a.Absorption, m.Absorption, b.Absorption) <= f.Probability) {
		return false
	}
	unit := max(m.Dwell, 1/(m.Energy-lead))
	if !(off(a.Dwell, m.Dwell, b.Dwell) <= f.Time*unit) {
		return false
	}
	if !(m.Reflection*off(a.GroupDelayReflected, m.GroupDelayReflected, b.GroupDelayReflected) <= f.Time*max(unit, math.Abs(m.GroupDelayReflected))) {
		return false
	}
	open := a.SpeedOut > 0 && m.SpeedOut > 0 && b.SpeedOut > 0
	return !open || off(a.GroupDelayTransmitted, m.GroupDelayTransmitted, b.GroupDelayTransmitted) <= f.Time*max(unit, math.Abs(m.GroupDelayTransmitted))
}

// rungs are the energies to begin with: evenly spaced wave numbers, the far
// lead's height, and ladders about the poles.
func (s *Solver) rungs(from, to float64, poles []Pole) []float64 {
	const intervals = 64
	lo, hi := s.incidentWave(from), s.incidentWave(to)
	list := []float64{from, to, s.far.Height}
	for i := 1; i < intervals; i++ {
		k := lo + (hi-lo)*float64(i)/intervals
		list = append(list, s.near.Height+k*k/(2*s.near.Mass))
	}
	for _, p := range poles {
		list = append(list, p.Energy)
		for d := max(p.Width/4, 4*eps*math.Abs(p.Energy)); d < (to-from)/intervals; d *= 2 {
			list = append(list, p.Energy-d, p.Energy+d)
		}
	}
	list = slices.DeleteFunc(list, func(e float64) bool { return !(e >= from && e <= to) })
	slices.Sort(list)
	return slices.Compact(list)
}
