package propagate

import (
	"math"
	"math/cmplx"

	"fluxtoll/potential"
)

// problem is a scattering problem at one energy with a known answer, natural
// units. Times are group times across the structure [0, width] and, for what
// is reflected, at its face; NaN where nothing is known.
//
// The values were computed with mpmath at 30 digits from the formulas named
// and verified by a second computation; formulas and citations are from
// memory.
type problem struct {
	id, source    string
	entry, exit   potential.Lead
	layers        []potential.Layer
	energy        float64
	transmission  float64
	transmitted   float64 // time
	reflected     float64 // time
	dwell         float64
	perfect       bool // nothing is reflected: its phase has no meaning
	totalReversed bool // T = 0
}

// Sources of the problems.
const (
	landau   = "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25"
	daniel   = "D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966)"
	hartman  = "T. E. Hartman, J. Appl. Phys. 33, 3427 (1962); M. Buettiker, Phys. Rev. B 27, 6178 (1983)"
	winful   = "H. G. Winful, Phys. Rev. Lett. 91, 260401 (2003)"
	hauge    = "E. H. Hauge and J. A. Stovneng, Rev. Mod. Phys. 61, 917 (1989)"
	airy     = "NIST Digital Library of Mathematical Functions, 9.2"
	wigner   = "E. P. Wigner, Phys. Rev. 98, 145 (1955)"
	poschl   = "G. Poeschl and E. Teller, Z. Phys. 83, 143 (1933); " + landau
	griffith = "D. J. Griffiths, Introduction to Quantum Mechanics, sec. 2.5"
)

func flatLayer(thickness, height, mass float64) []potential.Layer {
	return []potential.Layer{{Thickness: thickness, Shape: potential.Flat{Height: height}, Mass: mass}}
}

func pointLayer(strength float64) []potential.Layer {
	return []potential.Layer{{Shape: potential.Point{Strength: strength}, Mass: 1}}
}

func problems() []problem {
	none := math.NaN()
	free := potential.Lead{Mass: 1}
	lead := func(height, mass float64) potential.Lead { return potential.Lead{Height: height, Mass: mass} }
	ramp := func(thickness, end float64) []potential.Layer {
		return []potential.Layer{{Thickness: thickness, Shape: potential.Ramp{HeightEnd: end}, Mass: 1}}
	}
	return []problem{
		{id: "step.T.eq.E2", source: landau, entry: free, exit: lead(1, 1), energy: 2,
			transmission: 0.9705627484771405856203},
		{id: "step.T.eq.E1.05", source: landau, entry: free, exit: lead(1, 1), energy: 1.05,
			transmission: 0.5881666528902848014494},
		{id: "step.T.down.E1", source: landau, entry: free, exit: lead(-3, 1), energy: 1,
			transmission: 8.0 / 9},
		{id: "step.T.uneq.E2", source: daniel, entry: free, exit: lead(1, 1.5), energy: 2,
			transmission: 0.9282032302755091741098},
		{id: "step.T.velocity-matched", source: daniel, entry: free, exit: lead(1, 0.5), energy: 2,
			transmission: 1, perfect: true},
		{id: "step.T.massonly", source: daniel, entry: lead(0, 0.067), exit: lead(0, 0.0919), energy: 3,
			transmission: 0.9937845457368551743230},
		{id: "step.delay.R.eq", source: wigner, entry: free, exit: lead(1, 1), energy: 0.5,
			reflected: 2, totalReversed: true},
		{id: "step.delay.R.uneq", source: wigner, entry: free, exit: lead(1, 1.5), energy: 0.4,
			reflected: 2.083333333333333333333, totalReversed: true},
		{id: "rect.T.bdd.above", source: daniel, entry: free, exit: free, layers: flatLayer(3, 1, 0.6), energy: 1.6,
			transmission: 0.9825839563864375162523, transmitted: none, reflected: none, dwell: none},
		{id: "rect.T.E=V0", source: landau, entry: free, exit: free, layers: flatLayer(3, 1, 1), energy: 1,
			transmission: 2.0 / 11, transmitted: none, reflected: none, dwell: none},
		{id: "rect.times.above", source: winful, entry: free, exit: free, layers: flatLayer(3, 1, 1), energy: 1.5,
			transmission: 0.9934054906777256163816,
			transmitted:  3.494676492348067688756, reflected: 3.494676492348067688756, dwell: 3.521385956150390075444},
		{id: "rect.times.well", source: winful, entry: free, exit: free, layers: flatLayer(1.7, -2, 1), energy: 0.5,
			transmission: 0.7689260993256659092511,
			transmitted:  0.5178495895963812357189, reflected: 0.5178495895963812357189, dwell: 0.8509183792411287253654},
		{id: "rect.times.bdd", source: winful, entry: free, exit: free, layers: flatLayer(3, 1, 1.5), energy: 0.5,
			transmission: 0.002468410750864475395570,
			transmitted:  1.955421098514065190723, reflected: 1.955421098514065190723, dwell: 0.9767848952254584170880},
		{id: "hartman.a1", source: hartman, entry: free, exit: free, layers: flatLayer(1, 1, 1), energy: 0.5,
			transmission: none,
			transmitted:  1.523188311911529776239, reflected: 1.523188311911529776239, dwell: 0.7615941559557648881195},
		{id: "hartman.a3", source: hartman, entry: free, exit: free, layers: flatLayer(3, 1, 1), energy: 0.5,
			transmission: 0.009866037165440191273156,
			transmitted:  1.990109507373460902664, reflected: 1.990109507373460902664, dwell: 0.9950547536867304513319},
		{id: "hartman.a10", source: hartman, entry: free, exit: free, layers: flatLayer(10, 1, 1), energy: 0.5,
			transmission: 8.244614455767397374609e-9,
			transmitted:  1.999999991755385527239, reflected: 1.999999991755385527239, dwell: 0.9999999958776927636196},
		{id: "delta.a1", source: griffith + "; " + hauge, entry: free, exit: free, layers: pointLayer(1), energy: 0.5,
			transmission: 0.5, transmitted: 0.5, reflected: 0.5},
		{id: "delta.a-2", source: griffith + "; " + hauge, entry: free, exit: free, layers: pointLayer(-2), energy: 0.8,
			transmission: 0.2857142857142857142857,
			transmitted:  -0.2823462196578910117856, reflected: -0.2823462196578910117856},
		{id: "stack.asym.times", source: winful, entry: free, exit: lead(0.6, 1.1), energy: 1.3,
			layers: []potential.Layer{
				{Thickness: 1, Shape: potential.Flat{Height: 2}, Mass: 1.2},
				{Thickness: 0.8, Shape: potential.Flat{Height: -0.5}, Mass: 1},
				{Thickness: 0.6, Shape: potential.Flat{Height: 1.7}, Mass: 0.9},
			},
			transmission: 0.1999673862794808810379,
			transmitted:  1.448543012469434326479, reflected: 0.9310280743607684657416, dwell: 0.6953517879676374209063},
		{id: "ramp.T.L2.E1.4", source: airy, entry: free, exit: lead(1, 1), layers: ramp(2, 1), energy: 1.4,
			transmission: 0.9893347335896839202132, transmitted: none, reflected: none, dwell: none},
		{id: "ramp.T.down", source: airy, entry: free, exit: lead(-2, 1), layers: ramp(3, -2), energy: 0.5,
			transmission: 0.9842951480983962348505, transmitted: none, reflected: none, dwell: none},
		{id: "ramp.delayR.L2.E0.7", source: airy, entry: free, exit: lead(1, 1), layers: ramp(2, 1), energy: 0.7,
			transmitted: none, reflected: 4.652301695630634345054, dwell: none, totalReversed: true},
		{id: "sech2.T.barrier.cosh", source: poschl, entry: free, exit: free, energy: 0.5,
			layers:       []potential.Layer{{Thickness: 40, Shape: potential.Hump{Height: 1, Width: 1}, Mass: 1}},
			transmission: 0.1157899310245710506482, transmitted: none, reflected: none, dwell: none},
	}
}

// barrier returns the transmission and reflection probabilities of a
// rectangular barrier of the given thickness, (complex) height and mass
// between leads of height 0 and mass 1,
//
//	t' = 1/(cosh ka + (i/2)(g-1/g) sinh ka),  r = -(i/2)(g+1/g) sinh ka t',
//
// k = sqrt(2 m (V-E)), g = (k/m)/sqrt(2E) (Landau and Lifshitz, sec. 25,
// problem 2, and BenDaniel and Duke 1966 for the masses; from memory). Loss is
// a negative imaginary part of V.
func barrier(energy, thickness float64, height complex128, mass float64) (transmission, reflection float64) {
	kappa := cmplx.Sqrt(complex(2*mass, 0) * (height - complex(energy, 0)))
	g := kappa / complex(mass*math.Sqrt(2*energy), 0)
	x := kappa * complex(thickness, 0)
	t := 1 / (cmplx.Cosh(x) + 0.5i*(g-1/g)*cmplx.Sinh(x))
	r := -0.5i * (g + 1/g) * cmplx.Sinh(x) * t
	return square(t), square(r)
}

// setup is a grid around the problem.
func (p problem) setup() setup {
	s := stepSetup()
	s.entry, s.exit, s.layers = p.entry, p.exit, p.layers
	s.low, s.high, s.phase = 0.8*p.energy, 1.2*p.energy, 5
	width := 0.0
	for _, l := range p.layers {
		width += l.Thickness
	}
	s.extent = Extent{Left: -4, PlaneLeft: -3, PlaneRight: width + 2.5, Right: width + 3}
	return s
}

// times are what a scatterer should find for the problem on its set-up.
func (p problem) times() (transmitted, reflected float64) {
	v, w := waveIn(p.entry, p.energy).speed(), waveIn(p.exit, p.energy).speed()
	return 3/v + p.transmitted + 2.5/w, 6/v + p.reflected
}
