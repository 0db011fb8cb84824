package propagate

import (
	"fmt"
	"math"
	"math/cmplx"
)

// Eigenstate is a resonance or bound state of a mesh's own complex-scaled H:
//
//	(H - Energy M) u = 0,  Energy = E - i Width/2,
//
// which waves on the mesh carry in time as exp(-i Energy t), edges included.
// H is complex symmetric: with the bilinear product u^T M v, without
// conjugation, states of different energy are orthogonal. A sequence of states
// belongs to one mesh and is not changed after it is made.
type Eigenstate struct {
	Energy   complex128
	Norm     complex128 // u^T M u, edges included
	Residual float64    // norm of M^-1 (H - Energy M) u between the planes, u of norm 1 there: an energy

	// EnergyError and WidthError are by how much rounding may move Energy and
	// Width, measured.
	EnergyError, WidthError float64

	mesh *Mesh
	wave
	left, right rim
	width       float64
}

// eigenSteps bounds the steps of Newton's method. It converges quadratically;
// what has not converged by then walks from one state to the next.
const eigenSteps = 60

// Eigenstate returns the state that Newton's method reaches from a guess of its
// energy. It is an error if it reaches none.
//
// With the interior of the elements eliminated, T(E) z = 0 remains for the
// values z on the faces. z is taken from the twisted factorisation of T at
// the face k at which the twisted pivot
// gamma is smallest, T z = gamma e_k, z_k = 1, which gives small components of
// z to the same relative accuracy as large ones (I. S. Dhillon and
// B. N. Parlett, Linear Algebra Appl. 387, 1 (2004)). Newton's step for
// gamma(E) is gamma/(u^T M u), the Rayleigh quotient of u.
func (m *Mesh) Eigenstate(guess complex128) (*Eigenstate, error) {
	s := newEigenSolver(m)
	energy, last := guess, math.Inf(1)
	for range eigenSteps {
		step := s.step(energy)
		size := cmplx.Abs(step)
		if !(size < math.Inf(1)) {
			break
		}
		energy += step
		// Once small and no longer shrinking, steps are rounding.
		if size <= 1e-15*cmplx.Abs(energy) || size <= 1e-9*cmplx.Abs(energy) && size >= last/2 {
			return s.found(energy, size), nil
		}
		last = size
	}
	return nil, fmt.Errorf("propagate: no eigenstate is reached from the energy %.6g: start nearer to one", guess)
}

// Width is -2 Im Energy from the continuity equation between the planes, what flows out
// and is absorbed per time over what is inside: unlike the imaginary
// part of Energy it keeps its relative accuracy however small it is. For a bound
// state it is 0 but for rounding.
func (u *Eigenstate) Width() float64 { return u.width }

// Bound reports whether nothing can leave the state: both leads are closed at
// its energy, and no layer absorbs.
func (u *Eigenstate) Bound() bool {
	s := u.mesh.layout.structure
	return real(u.Energy) < math.Min(s.Entry.Height, s.Exit.Height) && u.Absorbed() == 0
}

// Inside is the integral of |u|^2 between the planes.
func (u *Eigenstate) Inside() float64 { return u.mesh.norm(u.mesh.left, u.mesh.right, u.wave) }

// InLayer is the integral of |u|^2 over a layer.
func (u *Eigenstate) InLayer(layer int) float64 {
	span := u.mesh.layerSpan[layer]
	return u.mesh.norm(span[0], span[1], u.wave)
}

// FlowLeft is the outward flow through the left plane, in units in which
// Inside is the norm.
func (u *Eigenstate) FlowLeft() float64 { return real(u.left.flow(u.left)) }

// FlowRight is the outward flow through the right plane.
func (u *Eigenstate) FlowRight() float64 { return real(u.right.flow(u.right)) }

// Absorbed is what all layers absorb per time.
func (u *Eigenstate) Absorbed() float64 {
	total := 0.0
	for i := range u.mesh.layerSpan {
		total += real(u.mesh.absorption(i, u.wave, u.wave))
	}
	return total
}

// Psi writes u on the nodes (len(psi) = Mesh.Nodes()).
func (u *Eigenstate) Psi(psi []complex128) { u.mesh.expand(u.wave, psi) }

// eigenSolver is the scratch space of Mesh.Eigenstate.
type eigenSolver struct {
	mesh         *Mesh
	views        []view
	diag, off    []complex128 // T on the faces between the walls
	above, below []complex128 // pivots of the elimination from the left and from the right
	z            []complex128 // on all faces
}

func newEigenSolver(m *Mesh) *eigenSolver {
	n := len(m.faces)
	return &eigenSolver{
		mesh: m, views: make([]view, len(m.cells)),
		diag: make([]complex128, n), off: make([]complex128, n-1),
		above: make([]complex128, n), below: make([]complex128, n), z: make([]complex128, n),
	}
}

// step finds z at an energy and returns Newton's step.
func (s *eigenSolver) step(energy complex128) complex128 {
	s.assemble(energy)
	k := s.twist()
	gamma := s.pivot(k)
	s.follow(k)
	return gamma / s.norm()
}

// assemble builds T(energy).
func (s *eigenSolver) assemble(energy complex128) {
	m := s.mesh
	for i := range m.cells {
		s.views[i] = m.cells[i].eigenView(energy)
	}
	for f, strength := range m.strength {
		s.diag[f] = complex(strength, 0)
	}
	for i, e := range m.elements {
		c := &s.views[e.cell].matrix
		s.diag[i] += c.ll
		s.diag[i+1] += c.rr
		s.off[i] = c.lr
	}
}

// twist eliminates from both ends and returns the face with the smallest
// twisted pivot. The walls at faces 0 and last hold z = 0.
func (s *eigenSolver) twist() int {
	last := len(s.diag) - 1
	for i := 1; i < last; i++ {
		s.above[i] = s.diag[i]
		if i > 1 {
			s.above[i] -= s.off[i-1] * s.off[i-1] / awayFromZero(s.above[i-1])
		}
	}
	for i := last - 1; i > 0; i-- {
		s.below[i] = s.diag[i]
		if i < last-1 {
			s.below[i] -= s.off[i] * s.off[i] / awayFromZero(s.below[i+1])
		}
	}
	best, least := 1, math.Inf(1)
	for i := 1; i < last; i++ {
		if p := square(s.pivot(i)); p < least {
			best, least = i, p
		}
	}
	return best
}

// pivot is the twisted pivot at a face, 1/(inv T)_kk.
func (s *eigenSolver) pivot(k int) complex128 { return s.above[k] + s.below[k] - s.diag[k] }

// awayFromZero replaces an exact zero.
func awayFromZero(v complex128) complex128 {
	if v == 0 {
		return 1e-300
	}
	return v
}

// follow solves T z = gamma e_k, z_k = 1, outwards from k.
func (s *eigenSolver) follow(k int) {
	last := len(s.diag) - 1
	s.z[0], s.z[last], s.z[k] = 0, 0, 1
	for i := k - 1; i > 0; i-- {
		s.z[i] = -s.off[i] * s.z[i+1] / awayFromZero(s.above[i])
	}
	for i := k + 1; i < last; i++ {
		s.z[i] = -s.off[i-1] * s.z[i-1] / awayFromZero(s.below[i])
	}
}

// norm is u^T M u.
func (s *eigenSolver) norm() complex128 {
	total := complex(0, 0)
	for i, e := range s.mesh.elements {
		w := &s.views[e.cell].bilinear
		a, b := s.z[i], s.z[i+1]
		total += w.ll*a*a + 2*w.lr*a*b + w.rr*b*b
	}
	return total
}

// found makes the eigenstate of the energy at which Newton's method ended, with
// steps of the given size. The width is made again with an energy that is off
// by as much as the true one may be.
func (s *eigenSolver) found(energy complex128, size float64) *Eigenstate {
	const rounding = 64 * 0x1p-53 // sums over an element, of terms some hundred times the energy
	off := size + rounding*cmplx.Abs(energy)
	u, moved := s.state(energy), s.state(energy+complex(off, 0))
	u.EnergyError = off
	u.WidthError = 2 * math.Abs(moved.Width()-u.Width())
	return u
}

// state makes the eigenstate of an energy, scaled to norm 1 between the planes.
func (s *eigenSolver) state(energy complex128) *Eigenstate {
	m := s.mesh
	s.step(energy)
	u := &Eigenstate{Energy: energy, mesh: m, wave: newWave(m)}
	copy(u.face, s.z)
	for i, e := range m.elements {
		c := &m.cells[e.cell]
		c.interior(energy, s.z[i], s.z[i+1], u.mode[e.mode:e.mode+len(c.lambda)])
	}
	scale := complex(1/math.Sqrt(m.norm(m.left, m.right, u.wave)), 0)
	for i := range u.all {
		u.all[i] *= scale
	}
	u.Norm = m.product(u.wave, u.wave)
	u.left, u.right = m.rims(u.wave, energy)
	u.Residual = m.residual(u.wave, energy)
	u.width = (u.FlowLeft() + u.FlowRight() + u.Absorbed()) / u.Inside()
	return u
}

// eigenView is view without its guard against eigenvalues of the interior: the
// energies are complex, and a shift would be a shift of the state.
func (c *cell) eigenView(energy complex128) view {
	a, b := c.shift(1, energy)
	faces := condensed{ll: complex(c.mass[0], 0), rr: complex(c.mass[c.order], 0)}
	v := view{matrix: c.bare(a, b), bilinear: faces}
	for j, lambda := range c.lambda {
		g := a / awayFromZero(a*complex(lambda, 0)+b)
		l, r := c.couple[0][j], c.couple[1][j]
		v.matrix.add(-a*g, l, r)
		v.bilinear.add(g*g, l, r)
	}
	v.bilinear.scale(c.mu)
	return v
}

// interior writes the amplitudes that a state of the given energy has inside,
// for its values on the faces.
func (c *cell) interior(energy, left, right complex128, modes []complex128) {
	a, b := c.shift(1, energy)
	for j, lambda := range c.lambda {
		pull := complex(c.couple[0][j], 0)*left + complex(c.couple[1][j], 0)*right
		modes[j] = -a * pull / awayFromZero(a*complex(lambda, 0)+b)
	}
}
