package stationary

import (
	"math"
	"math/cmplx"
)

// Incoming returns the amplitude of the incident wave at the near face,
// exp(log) in, for an outgoing wave of amplitude 1 at the far face, at a
// complex energy, and d(in)/dE over the same exp(log). Its zeros are the poles
// of t and r: resonances in the lower half plane, bound states on the real
// axis below both leads.
//
// The wave number of a lead continues the physical one down from the upper
// half plane: Re k > 0 where Re E lies above the lead's height, Im k > 0
// where it lies below.
func (s *Solver) Incoming(energy complex128) (in, slope complex128, log float64) {
	k := wavenumber(energy-complex(s.near.Height, 0), s.near.Mass)
	q := wavenumber(energy-complex(s.far.Height, 0), s.far.Mass)
	return s.incoming(energy, k, q)
}

// incoming is Incoming with the wave numbers of the near and the far lead
// chosen by the caller.
func (s *Solver) incoming(energy, k, q complex128) (in, slope complex128, log float64) {
	r := s.leaving(q)
	for i := range s.elements {
		s.pass(&r, &s.elements[i], energy)
	}
	m := complex(s.near.Mass, 0)
	in = (r.u - 1i*m*r.w/k) / 2
	slope = (r.du-1i*m*r.dw/k)/2 + 1i*m*m*r.w/(2*k*k*k)
	return in, slope, r.log
}

// leaving is the outgoing wave of wave number q at the far face.
func (s *Solver) leaving(q complex128) ray {
	return ray{u: 1, w: complex(0, 1/s.far.Mass) * q, dw: 1i / q}
}

// wavenumber is sqrt(2 m e) on the sheet Incoming names.
func wavenumber(e complex128, m float64) complex128 {
	k := cmplx.Sqrt(complex(2*m, 0) * e)
	if real(e) < 0 && imag(k) < 0 {
		return -k
	}
	return k
}

// ray is a solution at a complex energy with its derivative, over exp(log).
type ray struct {
	u, w, du, dw complex128
	log          float64
}

// pass carries r through one element from right to left.
func (s *Solver) pass(r *ray, e *element, energy complex128) {
	switch e.kind {
	case point:
		j := complex(2*e.strength, 0)
		r.w -= j * r.u
		r.dw -= j * r.du
	case smooth:
		at := energy + complex(0, e.loss)
		slices := s.smooths[e.smooth].complexSlices(real(energy), e.loss+math.Abs(imag(energy)))
		for i := len(slices) - 1; i >= 0; i-- {
			t := s.cplx.cross(&slices[i], at)
			r.apply(&t.m, &t.d, 0)
		}
	default:
		var f lossyLayer
		f.set(energy+complex(-e.height, e.loss), e.mass, e.length)
		r.apply(&f.m, &f.d, f.growth)
	}
}

// apply multiplies by a matrix and its derivative, both over exp(growth).
func (r *ray) apply(m, d *[4]complex128, growth float64) {
	r.du, r.dw = m[0]*r.du+m[1]*r.dw+d[0]*r.u+d[1]*r.w, m[2]*r.du+m[3]*r.dw+d[2]*r.u+d[3]*r.w
	r.u, r.w = m[0]*r.u+m[1]*r.w, m[2]*r.u+m[3]*r.w
	r.log += growth
	if n := square(r.u) + square(r.w); n > 1e60 || n < 1e-60 && n > 0 {
		_, b := math.Frexp(math.Sqrt(n))
		f := complex(math.Ldexp(1, -b), 0)
		r.u, r.w, r.du, r.dw = r.u*f, r.w*f, r.du*f, r.dw*f
		r.log += float64(b) * math.Ln2
	}
}
