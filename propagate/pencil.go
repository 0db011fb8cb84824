package propagate

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// pencil is the pair of real matrices (stiffness with potential, mass) of one
// element and the eigenmodes of its interior. Everything an element is asked
// for - its condensed form for any complex shift, its inverse for a time
// step - follows from the modes without another factorisation.
//
// With f the two faces and i the interior nodes, A = a*stiff + b*mass gives
//
//	inv(A_ii) = sum over j of v_j v_j^T / (a lambda_j + b),
//
// where stiff_ii v_j = lambda_j mass_ii v_j and v_j^T mass_ii v_j = 1.
type pencil struct {
	*rule
	mass   []float64    // diagonal, order+1
	stiff  [][]float64  // (order+1)^2, symmetric
	lambda []float64    // order-1 interior eigenvalues
	modes  [][]float64  // modes[j][i]: mode j at interior node i
	couple [2][]float64 // couple[f][j] = stiff_fi v_j, f = 0 left, 1 right
}

// newPencil makes the matrices of an element of length h for height u and
// mass m given at the nodes of the rule:
//
//	stiff_ij = (1/2) sum_q w_q D_qi D_qj / (m_q h) + h w_i u_i delta_ij,
//	mass_i   = h w_i.
func newPencil(r *rule, h float64, u, m []float64) *pencil {
	n := r.order + 1
	p := &pencil{rule: r, mass: make([]float64, n), stiff: make([][]float64, n)}
	for i := range p.stiff {
		p.stiff[i] = make([]float64, n)
		p.mass[i] = h * r.weights[i]
	}
	for i := range n {
		sum := 0.0
		for j := range n {
			if j == i {
				continue
			}
			v := 0.0
			for q := range n {
				v += r.weights[q] * r.diff[q][i] * r.diff[q][j] / m[q]
			}
			p.stiff[i][j] = v / (2 * h)
			sum += p.stiff[i][j]
		}
		// A constant has no kinetic energy: the diagonal closes the row.
		p.stiff[i][i] = p.mass[i]*u[i] - sum
	}
	p.diagonalise()
	return p
}

// uniformPencil is the pencil of length 1, mass 1 and height 0.
func uniformPencil(r *rule) *pencil {
	zero, one := make([]float64, r.order+1), make([]float64, r.order+1)
	for i := range one {
		one[i] = 1
	}
	return newPencil(r, 1, zero, one)
}

// diagonalise finds the interior modes by the symmetric eigenproblem of
// mass^(-1/2) stiff mass^(-1/2).
func (p *pencil) diagonalise() {
	n := p.order - 1
	if n == 0 {
		return
	}
	sym := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			sym.SetSym(i, j, p.stiff[i+1][j+1]/math.Sqrt(p.mass[i+1]*p.mass[j+1]))
		}
	}
	var eig mat.EigenSym
	if !eig.Factorize(sym, true) {
		panic("propagate: eigenmodes of an element did not converge")
	}
	var vectors mat.Dense
	eig.VectorsTo(&vectors)
	p.lambda = eig.Values(nil)
	p.modes = make([][]float64, n)
	for f := range p.couple {
		p.couple[f] = make([]float64, n)
	}
	for j := range n {
		p.modes[j] = make([]float64, n)
		for i := range n {
			v := vectors.At(i, j) / math.Sqrt(p.mass[i+1])
			p.modes[j][i] = v
			p.couple[0][j] += p.stiff[0][i+1] * v
			p.couple[1][j] += p.stiff[p.order][i+1] * v
		}
	}
}
