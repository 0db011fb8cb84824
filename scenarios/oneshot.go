package scenarios

import (
	"math"
	"math/cmplx"
	"slices"

	"fluxtoll/potential"
	"fluxtoll/potential/stationary"
	"fluxtoll/propagate"
)

// OneShot is scattering against energy, out of one packet: the amplitude of
// every energy of its band at each plane over that of the incoming packet, held
// against the stationary amplitudes point by point. Display units.
type OneShot struct {
	Share  float64     `json:"share"`  // points with less |phi|^2 than this part of its peak are left out
	Energy []float64   `json:"energy"` // ascending
	Weight []float64   `json:"weight"` // |phi|^2 over its peak
	Curves []ShotCurve `json:"curves"`
	Agrees bool        `json:"agrees"` // every point of every curve is within its error
}

// ShotCurve is one quantity against energy on both roads. A point without
// meaning is nil.
type ShotCurve struct {
	Name        string     `json:"name"`
	Unit        string     `json:"unit"`
	Packet      []*float64 `json:"packet"`
	Stationary  []*float64 `json:"stationary"`
	Error       []*float64 `json:"error"` // bound of packet - stationary
	Worst       Deviation  `json:"worst"` // the largest |packet - stationary|
	WorstWeight Deviation  `json:"worst_weighted"`
	Agrees      bool       `json:"agrees"`
}

// Deviation is a difference and where it is.
type Deviation struct {
	Size   float64 `json:"size"` // weighted: times the weight
	Energy float64 `json:"energy"`
	Error  float64 `json:"error"` // the bound there, weighted likewise
}

// shot is scattering at one energy, out of the record, with errors. t and r
// are as in stationary.Amplitudes.
type shot struct {
	energy, weight float64
	t, r           complex128
	delayT, delayR float64
	slipT, slipR   float64 // errors of the amplitudes, absolute
	shiftT, shiftR float64 // errors of the delays, from those
	exact          stationary.Amplitudes
	gridT, gridR   float64 // of the probabilities, by the elements and the edges
	gridTT, gridTR float64 // of the times, likewise
	kinetic        float64
	openFar        bool
}

// shooter takes energies out of the record of a trial.
type shooter struct {
	*Trial
	near, far     potential.Lead
	back, through *propagate.Reader
	solver        *stationary.Solver
	mesh          *propagate.Scatterer
	noise         float64 // of an amplitude, in units of the incoming peak
}

func (t *Trial) shooter() *shooter {
	near, far := t.Scenario.leads()
	solves := float64(t.Run.Ledger().Steps * t.Plan.Pade.Member)
	right := t.Plan.side == FromLeft
	return &shooter{
		Trial: t, near: near, far: far,
		back: t.record.Reader(!right), through: t.record.Reader(right),
		solver: stationary.New(t.Scenario.Structure, t.Plan.side == FromRight),
		mesh:   propagate.NewScatterer(t.Plan.Mesh),
		noise:  8*0x1p-53*math.Sqrt(solves+16) + gridShare*math.Sqrt(t.Plan.sampling),
	}
}

// gridShare is how much of the waves of the grid that sampling the packet adds
// may be found at one energy of the band, as a part of their amplitude: a few
// times what was measured on the demos. They have far higher energies, whose
// phases in a step fall anywhere.
const gridShare = 2e-1

// incoming is the amplitude a(E) of the packet at the near face, of which a
// packet that moves freely makes psi = integral of a(E) exp(-iEt) dE:
// a = phi(k) exp(ik start)/(sqrt(2 pi) v), phi(k) = (2 L^2/pi)^(1/4)
// exp(-(k-k0)^2 L^2).
func (s *shooter) incoming(k float64) complex128 {
	d := (k - s.Scenario.Packet.K0) * s.Scenario.Packet.Length
	phi := math.Pow(2/math.Pi, 0.25) * math.Sqrt(s.Scenario.Packet.Length) * math.Exp(-d*d)
	size := phi * s.near.Mass / (k * math.Sqrt(2*math.Pi))
	return cmplx.Rect(size, k*s.Plan.start)
}

// wave is the wave number at an energy in a lead, 0 where it is closed.
func wave(l potential.Lead, energy float64) float64 {
	return math.Sqrt(2 * l.Mass * math.Max(0, energy-l.Height))
}

// at takes one energy.
func (s *shooter) at(energy float64) (shot, error) {
	k, q := wave(s.near, energy), wave(s.far, energy)
	d := (k - s.Scenario.Packet.K0) * s.Scenario.Packet.Length
	out := shot{energy: energy, weight: math.Exp(-2 * d * d), kinetic: energy - s.near.Height, openFar: q > 0}
	if err := s.solver.At(energy, &out.exact); err != nil {
		return out, err
	}
	in, p := s.incoming(k), s.Plan
	slow := s.near.Mass / k
	back, e := s.back.At(energy), s.slips(k)
	out.r = back.Amplitude / in * cmplx.Rect(1, -k*p.near)
	out.delayR = back.Time - (p.start+p.near)*slow
	out.slipR, out.shiftR = e.reflected(back, cmplx.Abs(in), cmplx.Abs(out.r))
	if out.openFar {
		through := s.through.At(energy)
		out.t = through.Amplitude / in * cmplx.Rect(math.Sqrt(q*s.near.Mass/(k*s.far.Mass)), -q*p.far)
		out.delayT = through.Time - p.start*slow - p.far*s.far.Mass/q
		out.slipT, out.shiftT = e.transmitted(through, cmplx.Abs(in), cmplx.Abs(out.t))
	}
	s.grid(&out)
	return out, nil
}

// grid fills what the elements and edges make of this energy. Elements count
// twice, as in the budget.
func (s *shooter) grid(o *shot) {
	ideal := sample{Amplitudes: o.exact}.ideal(s.Plan.geometry)
	exact, edged := s.mesh.At(o.energy, s.Plan.side == FromRight)
	space, edges := deviate(exact, ideal), deviate(edged, exact)
	add := func(a, b float64) float64 { return 2*math.Abs(a) + math.Abs(b) }
	o.gridT, o.gridR = add(space.transmitted, edges.transmitted), add(space.reflected, edges.reflected)
	if o.openFar {
		o.gridTT = add(space.timeTransmitted, edges.timeTransmitted)
	}
	o.gridTR = add(space.timeReflected, edges.timeReflected)
	// Waves that the edges send back meet the planes again.
	near, far := cmplx.Abs(edged.EdgeNear), cmplx.Abs(edged.EdgeFar)
	o.slipT += far * cmplx.Abs(o.t)
	o.slipR += near*cmplx.Abs(o.r) + far*cmplx.Abs(o.t)
}

// shotShare is the part of the spectrum's peak below which no point is given.
const shotShare = 1e-6

// OneShot reads the scattering off the packet at about so many energies, those
// of the resonances in its band besides.
func (t *Trial) OneShot(points int) (*OneShot, error) {
	if !t.recorded() {
		return nil, nil
	}
	s := t.shooter()
	out := &OneShot{Share: shotShare, Agrees: true, Energy: []float64{}, Weight: []float64{}}
	var shots []shot
	for _, e := range s.energies(points) {
		o, err := s.at(e)
		if err != nil {
			return nil, err
		}
		shots = append(shots, o)
		out.Energy = append(out.Energy, e*t.Scenario.Scale.Energy)
		out.Weight = append(out.Weight, o.weight)
	}
	for _, c := range t.curvesOf() {
		curve := c.build(out.Energy, shots)
		out.Curves = append(out.Curves, curve)
		out.Agrees = out.Agrees && curve.Agrees
	}
	return out, nil
}

// energies are equally spaced over what is shown of the band, with some about
// every resonance in it.
func (s *shooter) energies(points int) []float64 {
	low, high := s.shown()
	var list []float64
	for i := range points {
		list = append(list, low+(high-low)*float64(i)/float64(max(1, points-1)))
	}
	for _, r := range s.Averages.Resonances {
		for _, n := range []float64{-2, -1, -0.5, 0, 0.5, 1, 2} {
			if e := r.Energy + n*r.Width; e > low && e < high && r.Width < (high-low)/float64(points) {
				list = append(list, e)
			}
		}
	}
	slices.Sort(list)
	return slices.Compact(list)
}

// shown is the range of energies in which the spectrum exceeds its share and
// the grid resolves the wave.
func (s *shooter) shown() (low, high float64) {
	p := s.Scenario.Packet
	reach := math.Sqrt(-math.Log(shotShare)/2) / p.Length
	energy := func(k float64) float64 { return s.near.Height + k*k/(2*s.near.Mass) }
	low = math.Max(energy(math.Max(p.K0-reach, 1e-3*p.K0)), s.Plan.Low)
	return low, math.Min(energy(p.K0+reach), s.Plan.High)
}
