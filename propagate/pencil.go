package propagate

// pencil is the pair of real matrices (stiffness with potential, mass) of one
// element and the eigenmodes of its interior. Everything an element is asked
// for - its condensed form for any complex shift, a factor of a time step -
// follows from the modes without another factorisation.
//
// With f the two faces and i the interior nodes, A = a*stiff + b*mass gives
//
//	inv(A_ii) = sum over j of v_j v_j^T / (a lambda_j + b),
//
// where stiff_ii v_j = lambda_j mass_ii v_j and v_j^T mass_ii v_j = 1. A wave
// function on the interior is kept by its amplitudes c_j = v_j^T mass_ii psi_i,
// in which A_ii is diagonal and sum |c_j|^2 is the interior's part of the norm.
type pencil struct {
	*rule
	mass   []float64    // diagonal, order+1
	stiff  [][]float64  // (order+1)^2, symmetric
	lambda []float64    // order-1 interior eigenvalues
	modes  [][]float64  // modes[j][i]: mode j at interior node i
	couple [2][]float64 // couple[f][j] = stiff_fi v_j, f = 0 left, 1 right

	kinetic []float64 // w_q/(2 m_q h): the stiffness is sum_q kinetic_q D_qi D_qj
	height  []float64 // plus mass_i height_i on the diagonal

	// mirror says that the element is its own mirror image. Its modes 0 to
	// even-1 are then even and the others odd, exactly: couple[1][j] is
	// couple[0][j] for the former and -couple[0][j] for the latter.
	mirror bool
	even   int
}

// newPencil makes the matrices of an element of length h for heights u and
// masses m (length order+1) given at the nodes of the rule:
//
//	stiff_ij = (1/2) sum_q w_q D_qi D_qj / (m_q h) + h w_i u_i delta_ij,
//	mass_i   = h w_i.
func newPencil(r *rule, h float64, u, m []float64) *pencil {
	p := assemblePencil(r, h, u, m)
	p.diagonalise()
	return p
}

// uniformPencil is the pencil of length 1, mass 1 and height 0.
func uniformPencil(r *rule) *pencil {
	zero, one := make([]float64, r.order+1), make([]float64, r.order+1)
	for i := range one {
		one[i] = 1
	}
	p := assemblePencil(r, 1, zero, one)
	p.mirror = true
	p.diagonalise()
	return p
}

func assemblePencil(r *rule, h float64, u, m []float64) *pencil {
	n := r.order + 1
	p := &pencil{rule: r, mass: make([]float64, n), stiff: make([][]float64, n)}
	for i := range p.stiff {
		p.stiff[i] = make([]float64, n)
		p.mass[i] = h * r.weights[i]
	}
	p.kinetic, p.height = make([]float64, n), u
	for q := range p.kinetic {
		p.kinetic[q] = r.weights[q] / (2 * h * m[q])
	}
	for i := range n {
		for j := range i {
			v := 0.0
			for q, w := range p.kinetic {
				v += w * r.diff[q][i] * r.diff[q][j]
			}
			p.stiff[i][j], p.stiff[j][i] = v, v
		}
	}
	// A constant has no kinetic energy: the diagonal closes the row.
	for i, row := range p.stiff {
		row[i] = p.mass[i]*u[i] - sum(row)
	}
	return p
}
