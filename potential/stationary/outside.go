package stationary

import "math"

// outside bounds what the panels do not see: the spectrum beyond the window
// and resonances too narrow to be resolved.
func (q *quadrature) outside() ([]float64, error) {
	n := sums + q.solver.layers
	out := make([]float64, n)
	row := make([]float64, n)
	first, last := q.stretches[0], q.stretches[len(q.stretches)-1]
	for _, edge := range []struct {
		st *stretch
		x  float64
	}{{first, first.edge(false)}, {last, last.edge(true)}} {
		if err := q.beyond(edge.st, edge.x, row, out); err != nil {
			return nil, err
		}
	}
	for _, p := range q.unresolved {
		q.hidden(p, out)
	}
	return out, nil
}

// edge is the x at the stretch's lower or upper end in k.
func (st *stretch) edge(upper bool) float64 {
	if upper == (st.sign > 0) {
		return st.to
	}
	return st.from
}

// beyond adds twice the integrals of a Gaussian tail with the integrands'
// values at the edge, all being transmitted. Towards k = 0, where the window
// ends at a fraction of a width, it adds the integrals down to 0, and for
// those that go as 1/k as many powers of e again as the window has.
func (q *quadrature) beyond(st *stretch, x float64, row, out []float64) error {
	s, p := q.solver, q.spectrum
	var a Amplitudes
	if err := s.at(s.levelAt(st, x), &a); err != nil {
		return err
	}
	k, _ := st.at(x)
	logDensity := p.logDensity(k)
	zero := k < p.K0 && k < 1e-3*p.Width
	t := 0.0
	switch {
	case zero && a.SpeedOut > 0:
		t = math.Exp(logDensity + a.LogTransmission - q.window.peak)
	case a.SpeedOut > 0:
		t = math.Exp(logDensity - q.window.peak)
	}
	integrands(row, &a, math.Exp(logDensity), t)
	for j, f := range row {
		switch {
		case !zero:
			out[j] += math.Abs(f) * 2 * p.Width * p.Width / math.Abs(k-p.K0)
		case j == sumSlow || j == sumSlowR || j == sumDelayR:
			out[j] += math.Abs(f) * k * -math.Log(leastFraction)
		default:
			out[j] += math.Abs(f) * k
		}
	}
	return nil
}

// hidden adds what a resonance at p that cannot be resolved may bring. With
// T = WL WR/(e^2 + W^2/4), W = WL + WR, and a dwell time WL/(e^2 + W^2/4)
// (G. Breit and E. Wigner, Phys. Rev. 49, 519 (1936)) the integrals over the
// energy are at most 2 pi min(WL, WR) and 2 pi; over delays at most pi/2 and
// pi. The width to the far lead is T over the dwell time at resonance.
func (q *quadrature) hidden(p probe, out []float64) {
	s := q.solver
	near := p.energy - s.near.Height
	k := math.Sqrt(2 * s.near.Mass * near)
	v := k / s.near.Mass
	var a Amplitudes
	l := level{p.energy, near, p.energy - s.far.Height}
	if !(near > 0) || s.at(l, &a) != nil || a.Dwell == 0 {
		return
	}
	g := math.Exp(q.spectrum.logDensity(k)) / v
	width := min(a.Transmission/a.Dwell, 1e-12*math.Abs(near))
	out[sumR] += 2 * math.Pi * width * g
	out[sumSlowR] += 2 * math.Pi * width * g / v
	out[sumDelayR] += 2 * math.Pi * g
	out[sumDwell] += 2 * math.Pi * g
	for i := range s.layers {
		out[sums+i] += 2 * math.Pi * g
	}
	if s.lossy {
		out[sumA] += 2 * math.Pi * 1e-12 * near * g
	}
	if a.SpeedOut > 0 {
		t := math.Exp(q.spectrum.logDensity(k)-q.window.peak) / v
		out[sumT] += 2 * math.Pi * width * t
		out[sumDelayT] += 2 * math.Pi * t
		out[sumSlowInT] += 2 * math.Pi * width * t / v
		out[sumSlowOutT] += 2 * math.Pi * width * t / a.SpeedOut
	}
}
