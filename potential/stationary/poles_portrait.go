package stationary

import "math"

// portrait is a solution that leaves by one lead, of |psi| = 1 at its face
// there: the integral of |psi|^2 over every step of the way, listed from the
// far face to the near one.
type portrait struct {
	steps  []tally
	layers []int   // of each step
	flux   float64 // out at the face; 0 where the lead is closed
	tail   float64 // integral of |psi|^2 over the lead where it is closed
}

// portraits draws the solutions at z that leave by the far and by the near
// lead, on the same steps.
func (s *Solver) portraits(z complex128, on sheet) (byFar, byNear portrait) {
	k, q := denominator{s, on}.waves(z)
	byFar.leaves(q, s.far.Mass, on.farOpen)
	byNear.leaves(k, s.near.Mass, on.nearOpen)
	r := s.leaving(q)
	s.walk(z, true, func(t *step) {
		byFar.add(t, r.u, r.w, r.log)
		r.apply(&t.m, &t.m, t.growth)
	})
	r = ray{u: 1, w: complex(0, -1/s.near.Mass) * k}
	s.walk(z, false, func(t *step) {
		inverse := [4]complex128{t.m[3], -t.m[1], -t.m[2], t.m[0]}
		r.apply(&inverse, &inverse, t.growth)
		byNear.add(t, r.u, r.w, r.log)
	})
	for i, j := 0, len(byNear.steps)-1; i < j; i, j = i+1, j-1 {
		byNear.steps[i], byNear.steps[j] = byNear.steps[j], byNear.steps[i]
		byNear.layers[i], byNear.layers[j] = byNear.layers[j], byNear.layers[i]
	}
	return byFar, byNear
}

// leaves sets what belongs to the lead by which the solution leaves.
func (p *portrait) leaves(k complex128, mass float64, open bool) {
	if open {
		p.flux = real(k) / mass
	} else {
		p.tail = 1 / (2 * imag(k))
	}
}

// add adds a step, (u, w) over exp(log) at its right face.
func (p *portrait) add(t *step, u, w complex128, log float64) {
	if t.density == nil {
		return
	}
	p.steps = append(p.steps, tally{t.density(u, w), log + t.growth})
	p.layers = append(p.layers, t.layer)
}

// step is a stretch of a layer, or a point: its matrix over exp(growth), from right to
// left and of determinant exp(-2 growth), and the integral of |psi|^2 over
// it, over exp(2 growth), for (u, w) at its right face; nil for a point.
type step struct {
	m       [4]complex128
	growth  float64
	layer   int
	density func(u, w complex128) float64
}

// walk visits the steps from the far face to the near one, or the other way.
func (s *Solver) walk(z complex128, towardNear bool, visit func(t *step)) {
	n := len(s.elements)
	for i := range n {
		if !towardNear {
			i = n - 1 - i
		}
		e := &s.elements[i]
		switch e.kind {
		case point:
			visit(&step{m: [4]complex128{1, 0, complex(-2*e.strength, 0), 1}})
		case smooth:
			s.walkSmooth(e, z, towardNear, visit)
		default:
			walkFlat(e, z, visit)
		}
	}
}

// walkFlat divides a layer so that the wave changes by no more than e^10 in a
// step.
func walkFlat(e *element, z complex128, visit func(t *step)) {
	const most = 10
	var f lossyLayer
	kinetic := z + complex(-e.height, e.loss)
	f.set(kinetic, e.mass, e.length)
	n := 1 + int(math.Min(f.growth/most, 1000))
	f.set(kinetic, e.mass, e.length/float64(n))
	for range n {
		visit(&step{f.m, f.growth, e.layer, f.density})
	}
}

func (s *Solver) walkSmooth(e *element, z complex128, towardNear bool, visit func(t *step)) {
	slices := s.smooths[e.smooth].complexSlices(real(z), e.loss+math.Abs(imag(z)))
	for i := range slices {
		if towardNear {
			i = len(slices) - 1 - i
		}
		t := s.cplx.cross(&slices[i], z+complex(0, e.loss))
		visit(&step{t.m, 0, e.layer, func(u, w complex128) float64 { return sampledDensity(&s.cplx, u, w) }})
	}
}
