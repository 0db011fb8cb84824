package propagate

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// diagonalise finds the interior modes by the symmetric eigenproblem of
// mass^(-1/2) stiff mass^(-1/2); a mirror-symmetric element falls into an even
// and an odd part, each of half the size.
func (p *pencil) diagonalise() {
	n := p.order - 1
	for f := range p.couple {
		p.couple[f] = make([]float64, 0, n)
	}
	if p.mirror {
		p.addModes(folding(n, 1))
		p.even = len(p.modes)
		p.addModes(folding(n, -1))
		return
	}
	whole := make([]base, n)
	for i := range whole {
		whole[i] = base{{i, 1}}
	}
	p.addModes(whole)
}

// base is a vector over the interior by its few entries that are not zero.
type base []struct {
	at    int
	value float64
}

// folding lists an orthonormal basis of the vectors of length n that are even
// (parity 1) or odd (parity -1) under reversal.
func folding(n int, parity float64) []base {
	var basis []base
	for i := range n / 2 {
		basis = append(basis, base{{i, math.Sqrt2 / 2}, {n - 1 - i, parity * math.Sqrt2 / 2}})
	}
	if n%2 == 1 && parity > 0 {
		basis = append(basis, base{{n / 2, 1}})
	}
	return basis
}

// addModes appends the modes within the span of an orthonormal basis that the
// eigenproblem does not leave.
func (p *pencil) addModes(basis []base) {
	n := len(basis)
	if n == 0 {
		return
	}
	sym := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			sym.SetSym(i, j, p.between(basis[i], basis[j]))
		}
	}
	var eig mat.EigenSym
	if !eig.Factorize(sym, true) {
		panic("propagate: eigenmodes of an element did not converge")
	}
	var vectors mat.Dense
	eig.VectorsTo(&vectors)
	for j := range n {
		v := make([]float64, p.order-1)
		for b, base := range basis {
			for _, x := range base {
				v[x.at] += vectors.At(b, j) * x.value / math.Sqrt(p.mass[x.at+1])
			}
		}
		p.addMode(v)
	}
}

// between is a^T mass^(-1/2) stiff mass^(-1/2) b over the interior.
func (p *pencil) between(a, b base) float64 {
	total := 0.0
	for _, x := range a {
		for _, y := range b {
			i, j := x.at+1, y.at+1
			total += x.value * y.value * p.stiff[i][j] / math.Sqrt(p.mass[i]*p.mass[j])
		}
	}
	return total
}

// addMode appends a mode, its eigenvalue and its coupling to the faces. Both are
// taken from the mode's slope, as sums of terms that do not cancel: the
// eigenproblem leaves in every eigenvalue the rounding of the largest, some
// p^2 times that of the waves an element is there to carry.
func (p *pencil) addMode(v []float64) {
	energy, norm, left, right := 0.0, 0.0, 0.0, 0.0
	for q, w := range p.kinetic {
		slope := 0.0
		for i, x := range v {
			slope += p.diff[q][i+1] * x
		}
		energy += w * slope * slope
		left += w * p.diff[q][0] * slope
		right += w * p.diff[q][p.order] * slope
	}
	for i, x := range v {
		energy += p.mass[i+1] * p.height[i+1] * x * x
		norm += p.mass[i+1] * x * x
	}
	if p.mirror {
		right = math.Copysign(left, right)
	}
	p.lambda = append(p.lambda, energy/norm)
	p.modes = append(p.modes, v)
	p.couple[0] = append(p.couple[0], left)
	p.couple[1] = append(p.couple[1], right)
}

// amplitudes writes c_j = v_j^T mass_ii psi_i for the interior values psi.
func (p *pencil) amplitudes(psi, c []complex128) {
	for j, v := range p.modes {
		re, im := 0.0, 0.0
		for i, x := range psi {
			w := v[i] * p.mass[i+1]
			re += w * real(x)
			im += w * imag(x)
		}
		c[j] = complex(re, im)
	}
}

// values writes psi_i = sum over j of v_j c_j for the amplitudes c.
func (p *pencil) values(c, psi []complex128) {
	clear(psi)
	for j, v := range p.modes {
		re, im := real(c[j]), imag(c[j])
		for i, x := range v {
			psi[i] += complex(x*re, x*im)
		}
	}
}
