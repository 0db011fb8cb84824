package propagate

import (
	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/cblas128"
)

// factor is one factor 1 + 2 Re(p)/(z - p) of a time step, z = -i dt (H - E0),
// ready to be applied: chi solves
//
//	A chi = M psi,  A = -i dt (H - E0 M) - p M.
//
// Inside an element the interior unknowns are eliminated by a dense matrix
// made once (static condensation); the faces are left with a symmetric
// tridiagonal system whose elimination is made once.
type factor struct {
	mesh  *Mesh
	cells []kernel
	off   []complex128 // tridiagonal: coupling of face f to f+1
	pivot []complex128 // inverse pivots
	gain  complex128   // 2 Re(p)
}

// kernel is the dense part of one cell. With n interior nodes, rows 0..n-1 of
// dense give inv(A_ii) M_i psi_i and rows n, n+1 what that passes to the left
// and the right face, A_fi inv(A_ii) M_i psi_i.
type kernel struct {
	n           int
	dense       cblas128.General
	left, right []complex128 // inv(A_ii) A_if for the two faces
	faces       condensed
	massLeft    complex128
	massRight   complex128
	absorb      float64 // 2 Re(p) * 2 * dt * loss * mu, of |chi|^2 mass
	mass        []float64
}

func newFactor(m *Mesh, dt, origin float64, pole complex128) *factor {
	alpha := complex(0, -dt)
	beta := pole + alpha*complex(origin, 0)
	f := &factor{
		mesh: m, cells: make([]kernel, len(m.cells)),
		off: make([]complex128, len(m.elements)), pivot: make([]complex128, len(m.faces)),
		gain: complex(2*real(pole), 0),
	}
	for i := range m.cells {
		f.cells[i] = newKernel(&m.cells[i], alpha, beta)
		f.cells[i].absorb = 4 * real(pole) * dt * m.cells[i].loss * real(m.cells[i].mu)
	}
	f.eliminate(alpha)
	return f
}

func newKernel(c *cell, alpha, beta complex128) kernel {
	n := c.order - 1
	k := kernel{
		n: n, faces: c.condense(alpha, beta), mass: c.mass,
		massLeft:  c.mu * complex(c.mass[0], 0),
		massRight: c.mu * complex(c.mass[c.order], 0),
		left:      make([]complex128, n), right: make([]complex128, n),
		dense: cblas128.General{Rows: n + 2, Cols: n, Stride: max(n, 1), Data: make([]complex128, (n+2)*n)},
	}
	a, b := c.shift(alpha, beta)
	for j, v := range c.modes {
		g := 1 / (a*complex(c.lambda[j], 0) + b)
		l, r := a*g*complex(c.couple[0][j], 0), a*g*complex(c.couple[1][j], 0)
		for i := range n {
			k.left[i] += l * complex(v[i], 0)
			k.right[i] += r * complex(v[i], 0)
			row, w := k.dense.Data[i*n:(i+1)*n], g*complex(v[i], 0)*c.mu
			for q := range n {
				row[q] += w * complex(v[q]*c.mass[q+1], 0)
			}
		}
	}
	for q := range n {
		w := c.mu * complex(c.mass[q+1], 0)
		k.dense.Data[n*n+q] = k.left[q] * w
		k.dense.Data[(n+1)*n+q] = k.right[q] * w
	}
	return k
}

// eliminate factors the tridiagonal system of the faces. The two walls at the
// ends hold psi = 0.
func (f *factor) eliminate(alpha complex128) {
	m := f.mesh
	for i, s := range m.strength {
		f.pivot[i] = alpha * complex(s, 0)
	}
	for i, e := range m.elements {
		c := &f.cells[e.cell]
		f.pivot[i] += c.faces.ll
		f.pivot[i+1] += c.faces.rr
		f.off[i] = c.faces.lr
	}
	last := len(f.pivot) - 1
	f.pivot[1] = 1 / f.pivot[1]
	for i := 2; i < last; i++ {
		f.pivot[i] = 1 / (f.pivot[i] - f.off[i-1]*f.off[i-1]*f.pivot[i-1])
	}
}

// workspace is the scratch of a solve.
type workspace struct {
	dense []complex128 // order+1 values for each element
	face  []complex128 // right side and solution on the faces
	start []int        // where each element's dense values begin
}

func newWorkspace(m *Mesh) *workspace {
	w := &workspace{face: make([]complex128, len(m.faces)), start: make([]int, len(m.elements))}
	size := 0
	for i, e := range m.elements {
		w.start[i] = size
		size += m.cells[e.cell].order + 1
	}
	w.dense = make([]complex128, size)
	return w
}

// solve finds chi on the faces and leaves, for each element, the particular
// solution of its interior in the workspace.
func (f *factor) solve(psi []complex128, w *workspace) {
	m := f.mesh
	for i, at := range m.faces {
		w.face[i] = m.faceMass[i] * psi[at]
	}
	for i := range m.elements {
		e := &m.elements[i]
		k := &f.cells[e.cell]
		if k.n == 0 {
			continue
		}
		y := w.dense[w.start[i] : w.start[i]+k.n+2]
		cblas128.Gemv(blas.NoTrans, 1, k.dense,
			cblas128.Vector{N: k.n, Inc: 1, Data: psi[e.first+1:]}, 0,
			cblas128.Vector{N: k.n + 2, Inc: 1, Data: y})
		w.face[i] -= y[k.n]
		w.face[i+1] -= y[k.n+1]
	}
	f.sweep(w.face)
}

// sweep solves the tridiagonal system in place.
func (f *factor) sweep(b []complex128) {
	last := len(b) - 1
	b[0], b[last] = 0, 0
	for i := 2; i < last; i++ {
		b[i] -= f.off[i-1] * f.pivot[i-1] * b[i-1]
	}
	for i := last - 1; i > 0; i-- {
		b[i] = (b[i] - f.off[i]*b[i+1]) * f.pivot[i]
	}
}

// update finishes chi inside the elements, adds 2 Re(p) chi to psi, and adds
// what each lossy element absorbs to lost.
func (f *factor) update(psi []complex128, w *workspace, lost []float64) {
	m := f.mesh
	psi[m.faces[0]] += f.gain * w.face[0]
	for i := range m.elements {
		e := &m.elements[i]
		k := &f.cells[e.cell]
		l, r := w.face[i], w.face[i+1]
		inside := psi[e.first+1 : e.first+1+k.n]
		y := w.dense[w.start[i] : w.start[i]+k.n]
		for q := range y {
			y[q] -= l*k.left[q] + r*k.right[q]
		}
		if k.absorb != 0 {
			lost[e.layer] += k.absorb * k.squares(l, y, r)
		}
		for q := range y {
			inside[q] += f.gain * y[q]
		}
		psi[m.faces[i+1]] += f.gain * r
	}
}

// squares is the sum of mass |chi|^2 over an element.
func (k *kernel) squares(l complex128, inside []complex128, r complex128) float64 {
	sum := k.mass[0]*square(l) + k.mass[k.n+1]*square(r)
	for q, v := range inside {
		sum += k.mass[q+1] * square(v)
	}
	return sum
}

func square(v complex128) float64 { return real(v)*real(v) + imag(v)*imag(v) }

// outflow is the probability that passes a plane in this factor, outward,
// exactly: 4 Re(p) Re(conj(chi) q), q = (A chi - M psi) of the inner element
// alone at the plane. It needs the workspace as solve left it and psi as it
// was. right tells which plane.
func (f *factor) outflow(psi []complex128, w *workspace, right bool) float64 {
	m := f.mesh
	face, inner := m.left, m.left
	if right {
		face, inner = m.right, m.right-1
	}
	k := &f.cells[m.elements[inner].cell]
	y := w.dense[w.start[inner] : w.start[inner]+k.n+2]
	l, r := w.face[inner], w.face[inner+1]
	value := psi[m.faces[face]]
	q := k.faces.ll*l + k.faces.lr*r - k.massLeft*value
	chi := l
	if right {
		q = k.faces.lr*l + k.faces.rr*r - k.massRight*value
		chi = r
	}
	if k.n > 0 {
		if right {
			q += y[k.n+1]
		} else {
			q += y[k.n]
		}
	}
	return 2 * real(f.gain) * (real(chi)*real(q) + imag(chi)*imag(q))
}
