package stationary

import "math"

// maxTerms bounds the series; with the bounds on a slice it is not reached.
const maxTerms = 64

// scratch holds the series of the two basis solutions about the middle of a
// slice, (1, 0) and (0, 1) there, and of their derivatives with respect to
// energy: columns c, s, dc, ds. Term n is the coefficient times 2^-n.
type scratch[N number] struct {
	u, w  [maxTerms + 1][4]N
	terms int
	ends  [2]basis[N] // at the left and the right end
	t     transfer[N]
	sl    *slice[N]
}

// basis is the values of the four columns at one end.
type basis[N number] struct{ u, w [4]N }

// transfer carries (u, w) from the right end of a slice to its left end; d is
// its derivative with respect to energy.
type transfer[N number] struct{ m, d, gram [4]N }

// cross returns the transfer of a slice; it is valid until the next call.
func (s *scratch[N]) cross(sl *slice[N], energy N) *transfer[N] {
	s.sl = sl
	s.expand(sl, energy*sl.double)
	s.sum()
	s.t.join(&s.ends[0], &s.ends[1])
	return &s.t
}

// expand fills the series of u' = mass w, w' = (height - e) u, whose terms
// fall like those of an exponential; they end when two in a row no longer
// count.
func (s *scratch[N]) expand(sl *slice[N], e N) {
	s.u[0] = [4]N{1, 0, 0, 0}
	s.w[0] = [4]N{0, 1, 0, 0}
	const surely = 16 // terms that are always needed at full span
	var count N
	quiet := false
	for n := 0; n < maxTerms; n++ {
		count++
		s.term(sl, e, 1/(2*count), n)
		s.terms = n + 1
		if n < surely {
			continue
		}
		was := quiet
		if quiet = s.quiet(size(sl.mass[0])); quiet && was {
			return
		}
	}
}

// term computes term n+1 from those before it.
func (s *scratch[N]) term(sl *slice[N], e, f N, n int) {
	last := &s.u[n]
	du := [4]N{}
	dw := [4]N{-e * last[0], -e * last[1], -e*last[2] - sl.double*last[0], -e*last[3] - sl.double*last[1]}
	for j := 0; j < len(sl.mass) && j <= n; j++ {
		accumulate(&du, sl.mass[j], &s.w[n-j])
	}
	for j := 0; j < len(sl.height) && j <= n; j++ {
		accumulate(&dw, sl.height[j], &s.u[n-j])
	}
	s.u[n+1] = [4]N{f * du[0], f * du[1], f * du[2], f * du[3]}
	s.w[n+1] = [4]N{f * dw[0], f * dw[1], f * dw[2], f * dw[3]}
}

// accumulate adds c v to sum.
func accumulate[N number](sum *[4]N, c N, v *[4]N) {
	sum[0] += c * v[0]
	sum[1] += c * v[1]
	sum[2] += c * v[2]
	sum[3] += c * v[3]
}

// quiet reports whether the last term is negligible; mass is the ratio of the
// sizes of u and w.
func (s *scratch[N]) quiet(mass float64) bool {
	const negligible = 1e-18
	u, w := &s.u[s.terms], &s.w[s.terms]
	return size(u[0])+size(w[1])+size(u[1])/mass+size(w[0])*mass < negligible
}

// size is the modulus.
func size[N number](x N) float64 {
	switch v := any(x).(type) {
	case float64:
		return math.Abs(v)
	case complex128:
		return math.Hypot(real(v), imag(v))
	}
	return 0
}

// sum adds the series up at both ends, smallest terms first.
func (s *scratch[N]) sum() {
	var u, w [2][4]N // even and odd terms
	for n := s.terms; n >= 0; n-- {
		for i := range 4 {
			u[n%2][i] += s.u[n][i]
			w[n%2][i] += s.w[n][i]
		}
	}
	for i := range 4 {
		s.ends[0].u[i], s.ends[0].w[i] = u[0][i]-u[1][i], w[0][i]-w[1][i]
		s.ends[1].u[i], s.ends[1].w[i] = u[0][i]+u[1][i], w[0][i]+w[1][i]
	}
}

// join makes the matrix from the right end r to the left end l: the basis at
// l times its inverse at r, whose determinant is 1; the derivative by the
// product rule; and the Gram matrix of the basis that is (1, 0), (0, 1) at r.
func (t *transfer[N]) join(l, r *basis[N]) {
	for row := range 2 {
		v := &l.u
		if row == 1 {
			v = &l.w
		}
		t.m[2*row] = v[0]*r.w[1] - v[1]*r.w[0]
		t.m[2*row+1] = v[1]*r.u[0] - v[0]*r.u[1]
		t.d[2*row] = v[2]*r.w[1] - v[3]*r.w[0] + v[0]*r.w[3] - v[1]*r.w[2]
		t.d[2*row+1] = v[3]*r.u[0] - v[2]*r.u[1] + v[1]*r.u[2] - v[0]*r.u[3]
	}
	cc := r.wronskian(0, 0) - l.wronskian(0, 0)
	cs := r.wronskian(0, 1) - l.wronskian(0, 1)
	ss := r.wronskian(1, 1) - l.wronskian(1, 1)
	a, b := r.w[1], -r.w[0] // (1, 0) at r in terms of c and s
	e, f := -r.u[1], r.u[0] // (0, 1)
	t.gram[0] = a*a*cc + 2*a*b*cs + b*b*ss
	t.gram[1] = a*e*cc + (a*f+b*e)*cs + b*f*ss
	t.gram[3] = e*e*cc + 2*e*f*cs + f*f*ss
}

// wronskian is half of u_E w - u w_E for the columns i and j: it grows by the
// integral of u_i u_j dx (F. T. Smith, Phys. Rev. 118, 349 (1960), Eq. (9),
// with the mass of BenDaniel and Duke). On a slice no longer than a couple of
// radians it does not cancel.
func (b *basis[N]) wronskian(i, j int) N {
	return (b.u[2+i]*b.w[j] - b.u[j]*b.w[2+i]) / 2
}

// density is the integral of |u|^2 over a slice without loss, w at its right
// end.
func density(t *transfer[float64], w *wave) float64 {
	return t.gram[0]*(w.pu*w.pu+w.qu*w.qu) + 2*t.gram[1]*(w.pu*w.pw+w.qu*w.qw) + t.gram[3]*(w.pw*w.pw+w.qw*w.qw)
}

// sampledDensity is the integral of |u|^2 over the slice last crossed, (u, w)
// at its right end, by Gauss-Legendre quadrature of the summed series.
func sampledDensity(s *scratch[complex128], u, w complex128) float64 {
	r := &s.ends[1]
	a, b := r.w[1]*u-r.u[1]*w, r.u[0]*w-r.w[0]*u
	sum := 0.0
	for i, x := range legendreNodes {
		var v complex128
		for n := s.terms; n >= 0; n-- {
			v = v*complex(x, 0) + a*s.u[n][0] + b*s.u[n][1]
		}
		sum += legendreWeights[i] * square(v)
	}
	return s.sl.length / 2 * sum
}
