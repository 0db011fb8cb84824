package scenarios

import (
	"context"
	"fmt"
	"math"
	"math/cmplx"
	"strings"
	"testing"
)

// pulseOf is the pulse of a part.
func pulseOf(t *testing.T, r *PulseReport, part string) Pulse {
	t.Helper()
	for _, p := range r.Pulses {
		if p.Part == part {
			return p
		}
	}
	t.Fatalf("nothing is %s", part)
	return Pulse{}
}

// measure is a number of a pulse with its error.
func (p Pulse) measure(t *testing.T, name string) (value, bound float64) {
	t.Helper()
	for _, q := range p.Quantities {
		if q.Name == name {
			if q.Packet == nil {
				return *q.Average, *q.Error
			}
			return *q.Packet, *q.Error
		}
	}
	t.Fatalf("the pulse has no %s", name)
	return 0, 0
}

// within fails where got is off by more than its own error, or where that is
// larger than useful.
func within(t *testing.T, what string, got, bound, want, useful float64) {
	t.Helper()
	if !(math.Abs(got-want) <= bound) || !(bound <= useful) {
		t.Errorf("%s = %.12g, want %.12g within %.2g (useful: %.2g); off by %.2g", what, got, want, bound, useful, got-want)
	}
}

// A slab with strong reflection at both faces splits a short pulse into
// echoes. Of
//
//	t = t12 t21 exp(iqd) (1 + r^2 exp(2iqd) + ...),  r = (q-k)/(q+k),
//	r' = -r + r t12 t21 exp(2iqd) (1 + r^2 exp(2iqd) + ...),  t12 t21 = 1 - r^2
//
// (M. Born and E. Wolf, Principles of Optics, sec. 7.6.1; from memory), each term
// is one part, as long as they do not overlap: its probability is the average
// of its square over the spectrum, and it comes (2n+1) d/q after the first
// face, a round trip of 2d/q later than the one before.
func TestEchoesOfASlab(t *testing.T) {
	const k0, length, d, depth = 2.0, 4.0, 200.0, 30.0
	r := pulses(t, fmt.Sprintf("units = \"natural\"\n[[layer]]\nthickness = %g\nheight = %g\n[packet]\nenergy = %g\nlength = %g\n", d, -depth, k0*k0/2, length))
	start, near, far := -r.Planes.Start, -r.Planes.Near, r.Planes.Far-d
	part := func(term func(k, q, r float64) (amplitude, time float64)) (probability, mean float64) {
		const points = 4000
		reach := 8 / (2 * length)
		step := 2 * reach / points
		for i := range points {
			k := k0 - reach + step*(float64(i)+0.5)
			q := math.Sqrt(k*k + 2*depth)
			a, time := term(k, q, (q-k)/(q+k))
			w := step * math.Sqrt(2/math.Pi) * length * math.Exp(-2*(k-k0)*(k-k0)*length*length) * a * a
			probability += w
			mean += w * time
		}
		return probability, mean / probability
	}
	through, back := pulseOf(t, r, "transmitted"), pulseOf(t, r, "reflected")
	for n := range 4 {
		p, time := part(func(k, q, r float64) (float64, float64) {
			return (1 - r*r) * math.Pow(r, 2*float64(n)), (start+far)/k + float64(2*n+1)*d/q
		})
		compareEcho(t, fmt.Sprintf("transmitted %d", n+1), through.Parts[n], p, time)
		p, time = part(func(k, q, r float64) (float64, float64) {
			if n == 0 {
				return r, (start + near) / k
			}
			return (1 - r*r) * math.Pow(r, 2*float64(n)-1), (start+near)/k + float64(2*n)*d/q
		})
		compareEcho(t, fmt.Sprintf("reflected %d", n+1), back.Parts[n], p, time)
	}
	for _, p := range []Pulse{through, back} {
		total, sum := 0.0, 0.0
		total, _ = p.measure(t, "probability")
		for _, q := range p.Parts {
			sum += q.Probability
		}
		// Parts below a millionth of the first in height are in none.
		if !(math.Abs(sum-total) < 1e-5) {
			t.Errorf("%s: the parts make %.9g of %.9g", p.Part, sum, total)
		}
	}
}

// compareEcho allows what neighbours overlap by, besides the part's errors:
// tails beyond six deviations.
func compareEcho(t *testing.T, what string, got PulsePart, probability, time float64) {
	t.Helper()
	within(t, what+": probability", got.Probability, got.ProbabilityError+1e-8, probability, 1e-6)
	within(t, what+": time", got.Time, got.TimeError+1e-6, time, 0.02)
	if !(math.Abs(got.Peak-time) < got.Width) || !(got.Width > 1 && got.Width < 8) {
		t.Errorf("%s: peak at %g, width %g, mean %g", what, got.Peak, got.Width, time)
	}
}

// A free packet broadens by dispersion. Its flow against time is that of
//
//	psi(x,t) = (2 pi)^(-1/4) (s/z)^(1/2)/s exp(i(k0 x - k0^2 t/2) - (x-k0 t)^2/(4 z)), z = s^2 + it/2
//
// up to a factor (S. Fluegge, Practical Quantum Mechanics, problem 17; from
// memory); its moments are summed here point by point.
func TestFreePulseBroadens(t *testing.T) {
	const s, k0, thickness = 6.0, 1.0, 5.0
	r := pulses(t, "units = \"natural\"\n[[layer]]\nthickness = 5.0\nheight = 0.0\n[packet]\nenergy = 0.5\nlength = 6.0\n[planes]\nfar = 120.0\n")
	x := r.Planes.Far - r.Planes.Start
	flow := func(time float64) float64 {
		z := complex(s*s, time/2)
		psi := cmplx.Exp(complex(0, k0*x-k0*k0*time/2)-complex((x-k0*time)*(x-k0*time)/4, 0)/z) / cmplx.Sqrt(z) *
			complex(math.Sqrt(s)*math.Pow(2*math.Pi, -0.25), 0)
		slope := psi * (complex(0, k0) - complex((x-k0*time)/2, 0)/z)
		return imag(cmplx.Conj(psi) * slope)
	}
	var sum, first, second, third, peak, top float64
	const step = 0.02
	for time := step; time < 40*x; time += step {
		q, d := flow(time)*step, time-x
		sum += q
		first += q * d
		second += q * d * d
		third += q * d * d * d
		if q > top {
			top, peak = q, time
		}
	}
	mean := first / sum
	variance := second/sum - mean*mean
	width := math.Sqrt(variance)
	skew := (third/sum - 3*mean*second/sum + 2*mean*mean*mean) / (variance * width)
	p := pulseOf(t, r, "transmitted")
	for _, c := range []struct {
		name   string
		want   float64
		useful float64
	}{
		{"arrival", x + mean, 1e-3}, {"width", width, 1e-3}, {"free_width", width, 1e-9},
		{"skewness", skew, 1e-3}, {"peak_time", peak, 0.02}, {"peak_flow", top / step, 1e-6},
		{"incoming_width", 0, 0}, {"mean_energy", (k0*k0 + 1/(4*s*s)) / 2, 1e-6},
	} {
		if c.name == "incoming_width" {
			continue
		}
		got, bound := p.measure(t, c.name)
		// The sums here have the step as their resolution of a peak, and end
		// where the flow of k < 1/40 has not arrived: exp(-2 s^2 k0^2).
		extra := map[string]float64{"peak_time": step, "peak_flow": 1e-9, "free_width": 1e-8, "width": 1e-8}[c.name]
		within(t, c.name, got, bound+extra, c.want, c.useful+extra)
	}
}

// A shift against free flight is the group delay beyond free crossing and the
// filter part, on both roads. Reference sets avg.sech2.s1, .s2 and
// avg.sech2.barrier: averages by quadrature with mpmath; delays of
// E. P. Wigner, Phys. Rev. 98, 145 (1955), and the filter part by
// E. H. Hauge and J. A. Stovneng, Rev. Mod. Phys. 61, 917 (1989); formulas from
// memory. Wells without reflection hurry the packet and filter nothing.
func TestShiftOnBothRoads(t *testing.T) {
	for _, c := range []struct {
		id                     string
		height, k0, structure_ float64
		filter                 float64 // per length of flight
		reading                string
	}{
		{"avg.sech2.s1", -1, 1, -1.009870347397502938113, 0, "the structure itself hurried it, and filtered nothing"},
		{"avg.sech2.s2", -3, 1, -1.814166442277053850143, 0, "the structure itself hurried it, and filtered nothing"},
		{"avg.sech2.barrier", 1, 1.2, 1.177526128892174061048, -0.01122126302838770571432, "the structure itself held it"},
	} {
		trial, err := Prepare(context.Background(), compile(t, fmt.Sprintf(`units = "natural"
[[layer]]
shape = "sech2"
height = %g
width = 1.0
thickness = 46.0
[packet]
energy = %.17g
length = 8.0
`, c.height, c.k0*c.k0/2)), Forced{})
		if err != nil {
			t.Fatal(err)
		}
		r := trial.Finish(context.Background(), nil)
		s := r.Shift.Transmitted
		way := r.Planes.Far - r.Planes.Start
		for _, n := range []struct {
			what string
			got  ShiftNumber
			want float64
		}{{"structure", s.Structure, c.structure_}, {"filter", s.Filter, c.filter * way}, {"total", s.Total, c.structure_ + c.filter*way}, {"exit lead", s.ExitLead, 0}} {
			// The window of 46 widths leaves out exp(-46) of the shape.
			within(t, c.id+": average "+n.what, n.got.Average, 1e-9*way, n.want, 1)
			within(t, c.id+": packet "+n.what, *n.got.Packet, n.got.Error, n.want, 1e-3)
		}
		if !strings.Contains(s.Reading, c.reading) {
			t.Errorf("%s: %q", c.id, s.Reading)
		}
	}
}

// Of every demo both roads split the shift alike.
func TestShiftOfEveryDemo(t *testing.T) {
	compared := 0
	for _, d := range Demos() {
		r := demoTrial(t, d.Name, Forced{}).Finish(context.Background(), nil)
		for part, s := range map[string]*ShiftRoads{"transmitted": r.Shift.Transmitted, "reflected": r.Shift.Reflected} {
			if s == nil {
				continue
			}
			for i, n := range []ShiftNumber{s.Total, s.Structure, s.Filter, s.ExitLead} {
				if n.Packet == nil || !n.Agrees || !(n.Error < 1e-4*math.Abs(s.Free)) {
					t.Errorf("%s, %s, number %d: %+v", d.Name, part, i, n)
				}
				compared++
			}
			if s.Reading == "" {
				t.Errorf("%s, %s: no reading", d.Name, part)
			}
		}
	}
	if compared < 60 {
		t.Errorf("only %d numbers compared", compared)
	}
}

// A resonance that outlives the passage a thousand times: pulse and energies
// go on in the tail. On resonance a symmetric twin barrier transmits all
// (B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984)).
func TestPulseOfALongResonance(t *testing.T) {
	r := pulses(t, `units = "natural"
[[layer]]
thickness = 1.5
height = 3.0
[[layer]]
thickness = 3.0
height = 0.0
[[layer]]
thickness = 1.5
height = 3.0
[packet]
energy = 0.33
length = 14.0
`)
	if len(r.Trapped.Resonances) != 1 {
		t.Fatalf("resonances %+v", r.Trapped.Resonances)
	}
	level := r.Trapped.Resonances[0]
	through := curveOf(t, r, "transmission")
	at := closest(r.OneShot.Energy, level.Energy)
	// The maximum is displaced from the pole by a small part of the width.
	within(t, "T on resonance", *through.Packet[at], *through.Error[at]+1e-3, 1, 2e-3)
	p := pulseOf(t, r, "transmitted")
	width, _ := p.measure(t, "width")
	skew, _ := p.measure(t, "skewness")
	// Next to all that is transmitted leaves as exp(-t/lifetime), of
	// deviation lifetime and skewness 2.
	if !(math.Abs(width/level.Lifetime-1) < 0.1) || !(math.Abs(skew-2) < 0.2) {
		t.Errorf("width %g, lifetime %g, skewness %g", width, level.Lifetime, skew)
	}
}

// split finds the parts of a made-up flow: a deep minimum parts, a shallow one
// does not, and neither does what is far below the rest.
func TestSplit(t *testing.T) {
	for _, c := range []struct {
		name  string
		flow  []float64
		peaks []int
	}{
		{"nothing", []float64{0, 0, 0}, nil},
		{"one", []float64{0, 1, 3, 1, 0}, []int{2}},
		{"two", []float64{0, 3, 1, 2.5, 0}, []int{1, 3}},
		{"shallow", []float64{0, 3, 2, 2.5, 0}, []int{1}},
		{"shallow, then higher", []float64{0, 3, 2, 5, 0}, []int{3}},
		{"small after large", []float64{0, 100, 0, 1, 0}, []int{1, 3}},
		{"noise", []float64{0, 1, 0, 1e-7, 0, 0.5, 0}, []int{1, 5}},
		{"negative between", []float64{0, 1, -0.1, 1, 0}, []int{1, 3}},
	} {
		var peaks []int
		last := 0
		for _, p := range split(c.flow) {
			peaks = append(peaks, p.peak)
			if p.from != last {
				t.Errorf("%s: a part begins at %d, the last ended at %d", c.name, p.from, last)
			}
			last = p.to
		}
		if fmt.Sprint(peaks) != fmt.Sprint(c.peaks) {
			t.Errorf("%s: peaks %v, want %v", c.name, peaks, c.peaks)
		}
	}
}

// Moments of a Gaussian flow, and of one that falls exponentially, whose
// skewness is 2 (M. Abramowitz and I. A. Stegun, Handbook of Mathematical
// Functions, 26.1.31).
func TestMomentsOfKnownFlows(t *testing.T) {
	s := series{step: 0.05}
	for i := range 4000 {
		d := (s.at(i) - 70) / 3
		s.flow = append(s.flow, math.Exp(-d*d/2))
	}
	m := s.moments()
	for _, c := range [][3]float64{
		{m.total, 3 * math.Sqrt(2*math.Pi), 1e-12}, {m.mean, 70, 1e-11}, {m.deviation, 3, 1e-11}, {m.skewness, 0, 1e-10},
	} {
		if !(math.Abs(c[0]-c[1]) <= c[2]) { // rounding of 4000 terms
			t.Errorf("%.15g, want %.15g", c[0], c[1])
		}
	}
	fall := momentSum{mean: 5}
	fall.addTail(2, [4]float64{0.5, 0.5 * 4, 0.5 * 2 * 16, 0.5 * 6 * 64}) // lifetime 4 from time 2 on
	if m := fall.moments(0); !(math.Abs(m.mean-6) < 1e-12 && math.Abs(m.deviation-4) < 1e-12 && math.Abs(m.skewness-2) < 1e-12) {
		t.Errorf("exponential: %+v", m)
	}
}

// Roomy moves what the scenario leaves open, and nothing else.
func TestRoomy(t *testing.T) {
	const head = "units = \"natural\"\n[[layer]]\nthickness = 2.0\nheight = 1.0\n"
	for _, c := range []struct {
		text        string
		start, near float64 // NaN: open before, anything beyond 9 lengths
	}{
		{"[packet]\nenergy = 0.5\nlength = 10.0\n", math.NaN(), math.NaN()},
		{"[packet]\nenergy = 0.5\nlength = 10.0\nstart = -70.0\n", -70, math.NaN()},
		{"[packet]\nenergy = 0.5\nlength = 10.0\nstart = -70.0\n[planes]\nnear = -130.0\n", -70, -130},
		{"[packet]\nenergy = 0.5\nlength = 10.0\nfrom = \"right\"\n", math.NaN(), math.NaN()},
	} {
		s := compile(t, head+c.text)
		r := s.Roomy()
		g := geometry{side: s.Packet.Side, width: s.Structure.Width()}
		start, near := g.before(*r.Packet.Start)*s.Scale.Length, g.before(*r.Planes.Near)*s.Scale.Length
		if math.IsNaN(c.start) && !(start > 90) || c.start < 0 && math.Abs(start+c.start) > 1e-9 {
			t.Errorf("%q: start %g before the structure", c.text, start)
		}
		if math.IsNaN(c.near) && !(near > start+90) || c.near < 0 && math.Abs(near+c.near) > 1e-9 {
			t.Errorf("%q: near plane %g before the structure", c.text, near)
		}
	}
}
