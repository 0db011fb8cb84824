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
	for _, g := range q.unresolved {
		q.hidden(g, out)
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

// beyond adds eight times the integrals of a Gaussian tail with the integrands'
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
	g := math.Exp(logDensity)
	integrands(row, &a, g, t)
	if !zero {
		// All may be reflected beyond, and a delay is never known to be less
		// than that of a step, some 1/E.
		step := 8 * s.near.Mass / (k * k)
		row[sumR], row[sumSlowR] = g, g/a.SpeedIn
		row[sumDelayR] = math.Abs(row[sumDelayR]) + g*step
		row[sumDelayT] = math.Abs(row[sumDelayT]) + t*step
	}
	for j, f := range row {
		switch {
		case !zero:
			out[j] += math.Abs(f) * 8 * p.Width * p.Width / math.Abs(k-p.K0)
		case j == sumSlow || j == sumSlowR || j == sumDelayR:
			out[j] += math.Abs(f) * k * -math.Log(leastFraction)
		default:
			out[j] += math.Abs(f) * k
		}
	}
	return nil
}

// hidden adds what resonances in a gap may bring. With
// T = WL WR/(e^2 + W^2/4), W = WL + WR, and a dwell time WL/(e^2 + W^2/4)
// (G. Breit and E. Wigner, Phys. Rev. 49, 519 (1936)) the integrals over the
// energy are at most 2 pi min(WL, WR) and 2 pi; over delays no more than 2 pi.
// The width to the far lead is T over the dwell time at resonance; where the
// search stopped early it may be anything up to the gap itself.
func (q *quadrature) hidden(g gap, out []float64) {
	s := q.solver
	near := g.from.energy - s.near.Height
	v := math.Sqrt(2 * near / s.near.Mass)
	width, density := q.widest(g)
	if !(near > 0) || density == 0 {
		return
	}
	n := 2 * math.Pi * float64(g.hidden()) * density / v
	out[sumR] += n * width
	out[sumSlowR] += n * width / v
	out[sumDelayR] += n
	out[sumDwell] += n
	if s.lossy {
		out[sumA] += n * math.Abs(g.to.energy-g.from.energy)
	}
	for i := range s.layers {
		out[sums+i] += n
	}
	if far := g.from.energy - s.far.Height; far > 0 {
		t := n * math.Exp(-q.window.peak)
		out[sumT] += t * width
		out[sumDelayT] += t
		out[sumSlowInT] += t * width / v
		out[sumSlowOutT] += t * width / math.Sqrt(2*far/s.far.Mass)
	}
}

// widest bounds the width to the far lead of what a gap hides, and returns the
// largest |phi|^2 in it.
func (q *quadrature) widest(g gap) (width, density float64) {
	s, p := q.solver, q.spectrum
	a, b := s.incidentWave(g.from.energy), s.incidentWave(g.to.energy)
	density = math.Exp(p.logDensity(min(max(p.K0, min(a, b)), max(a, b))))
	width = math.Abs(g.to.energy - g.from.energy)
	if g.blind {
		return width, density
	}
	var at Amplitudes
	near := g.from.energy - s.near.Height
	if s.at(level{g.from.energy, near, g.from.energy - s.far.Height}, &at) == nil && at.Dwell > 0 {
		width = min(width, at.Transmission/at.Dwell)
	}
	return width, density
}

// incidentWave is the wave number in the incident lead.
func (s *Solver) incidentWave(energy float64) float64 {
	return math.Sqrt(2 * s.near.Mass * max(0, energy-s.near.Height))
}
