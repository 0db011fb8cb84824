package scenarios

import (
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"fluxtoll/potential"
)

// compile reads and compiles a scenario.
func compile(t *testing.T, text string) *Scenario {
	t.Helper()
	f, err := Read("test.toml", strings.NewReader(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	s, err := f.Compile()
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// A neutron of 1 meV has the wave length 0.904457 nm and the speed 437.393 m/s
// (from E = 81.8042 meV A^2/lambda^2 and v = 3956.034 m/s A/lambda, in any
// handbook of neutron scattering).
func TestInternalUnitsOfANeutron(t *testing.T) {
	s := compile(t, `
		particle.mass = "neutron"
		packet = {energy = "1 meV", length = "2 nm"}
		display.time = "ps"
	`)
	near(t, "wave length/2 pi", s.Scale.Length, 9.04457/10/(2*math.Pi), 1e-6)
	near(t, "twice the kinetic energy", s.Scale.Energy, 2, rounding)
	near(t, "speed", s.Scale.Length/s.Scale.Time, 0.437393, 1e-6) // nm/ps
	near(t, "length", s.Packet.Length*s.Scale.Length, 2, rounding)
	near(t, "energy", s.Packet.Energy, 0.5, rounding)
}

// The internal units are those of the packet's own lead: there k0 = 1, the
// mass is 1, and energy less height is 1/2; the other lead follows.
func TestInternalUnitsFromEitherSide(t *testing.T) {
	const text = `
		units = "natural"
		particle.mass = 3
		entry = {height = 1, mass = 2}
		exit = {height = 4, mass = 5}
		bias.drop = 2
		packet = {energy = 10, length = 7, from = "left"}
		layer = [{thickness = 6, height = 8}, {shape = "delta", strength = 9}]
	`
	for _, c := range []struct {
		from                        string
		k0, kinetic, mass           float64
		entryHeight, exitHeight, m1 float64
	}{
		// k0 = sqrt(2 m (E-V)): left sqrt(2*2*9) = 6, right sqrt(2*5*8).
		{"left", 6, 9, 2, 1, 2, 3. / 2},
		{"right", math.Sqrt(80), 8, 5, 1, 2, 3. / 5},
	} {
		s := compile(t, strings.Replace(text, `"left"`, `"`+c.from+`"`, 1))
		e := 2 * c.kinetic
		near(t, c.from+": length scale", s.Scale.Length, 1/c.k0, rounding)
		near(t, c.from+": energy scale", s.Scale.Energy, e, rounding)
		near(t, c.from+": time scale", s.Scale.Time, 1/e, rounding)
		near(t, c.from+": packet length", s.Packet.Length, 7*c.k0, rounding)
		near(t, c.from+": energy", s.Packet.Energy, 10/e, rounding)
		near(t, c.from+": k0", s.Packet.K0, 1, 0)
		near(t, c.from+": entry height", s.Structure.Entry.Height, c.entryHeight/e, rounding)
		near(t, c.from+": exit height", s.Structure.Exit.Height, c.exitHeight/e, rounding)
		near(t, c.from+": entry mass", s.Structure.Entry.Mass, 2/c.mass, rounding)
		near(t, c.from+": exit mass", s.Structure.Exit.Mass, 5/c.mass, rounding)
		near(t, c.from+": layer mass", s.Structure.Segments[0].Mass.At(0), c.m1, rounding)
		near(t, c.from+": width", s.Structure.Width(), 6*c.k0, rounding)
		near(t, c.from+": height at the left face", s.Structure.HeightAt(0), 8/e, rounding)
		near(t, c.from+": height before the right face", s.Structure.Segments[0].Height.At(6*c.k0), 6/e, rounding)
		near(t, c.from+": strength", s.Structure.Deltas[0].Strength, 9*c.k0/e, rounding)
		if s.Scale.LengthUnit+s.Scale.EnergyUnit+s.Scale.TimeUnit != "" {
			t.Errorf("natural units have names: %+v", s.Scale)
		}
	}
}

// spread = hbar v0/(2 length), so either may be given.
func TestSpreadIsAnotherLength(t *testing.T) {
	by := func(key string) float64 {
		return compile(t, "particle.mass = \"0.067 m_e\"\npacket.energy = \"310 meV\"\npacket."+key).Packet.Length
	}
	// v0 = 1.27576 nm/fs: hbar v0/(2*14 nm) = 29.99002849 meV (worked out with
	// another program, from the same constants).
	near(t, "length by spread", by(`spread = "29.990028477855 meV"`), by(`length = "14 nm"`), 1e-12)
}

func TestShapes(t *testing.T) {
	files := fstest.MapFS{
		"linear.csv": {Data: []byte("x, height, mass\n# a comment\n1, 2, 1\n2, 4, 3\n4, 4, 3\n")},
		"smooth.csv": {Data: []byte("\ufeffheight,x\r\n0,0\r\n1,1\r\n")},
	}
	read := func(layer string) (*Scenario, error) {
		text := "units = \"natural\"\nentry.height = 1\nexit.height = 3\nbias.drop = 0\npacket = {energy = 1.5, length = 9}\ntolerance = 1e-6\nlayer = [{" + layer + "}]"
		f, err := Read("dir/shapes.toml", strings.NewReader(text), Within(files, "."))
		if err != nil {
			return nil, err
		}
		return f.Compile()
	}
	// Here 2 m (E-V) = 1 and m = 1: internal units are natural units.
	const cut = 1e-6 * 1e-3 / 2
	for _, c := range []struct {
		layer             string
		width             float64 // of the structure
		left, mid, right  float64 // heights just inside the faces and in the middle
		tolerance         float64
		massLeft, massMid float64
	}{
		{`thickness = 2, height = 5`, 2, 5, 5, 5, rounding, 1, 1},
		{`shape = "ramp", thickness = 2, height = 5, height_end = -1, mass = 2`, 2, 5, 2, -1, rounding, 2, 2},
		{`shape = "sech2", width = 2, height = 5, thickness = 4`, 4, 5 / math.Pow(math.Cosh(1), 2), 5, 5 / math.Pow(math.Cosh(1), 2), rounding, 1, 1},
		{`shape = "gauss", width = 2, height = 5, thickness = 4`, 4, 5 * math.Exp(-0.5), 5, 5 * math.Exp(-0.5), rounding, 1, 1},
		{`shape = "gauss", width = 2, height = 5`, 4 * math.Sqrt(2*math.Log(5/cut)), cut, 5, cut, 1e-6, 1, 1},
		{`shape = "smooth-step", width = 2`, 4 * math.Log(2/cut), 1, 2, 3, 1e-6, 1, 1},
		{`shape = "smooth-step", width = 2, height = 7, height_end = 5`, 4 * math.Log(2/cut), 7, 6, 5, 1e-6, 1, 1},
		{`shape = "smooth-step", width = 2, height = 3`, 4, 3, 3, 3, rounding, 1, 1}, // no rise: a window of its own
		{`shape = "sech2", width = 2, height = 0`, 4, 0, 0, 0, 0, 1, 1},
		{`shape = "table", file = "linear.csv"`, 3, 2, 4, 4, rounding, 1, 3},
		{`shape = "table", file = "smooth.csv", interpolate = "smooth", mass = 3`, 1, 0, 0.5, 1, rounding, 3, 3},
	} {
		s, err := read(c.layer)
		if err != nil {
			t.Errorf("%s: %v", c.layer, err)
			continue
		}
		b := s.Structure.Width()
		first, last := s.Structure.Segments[0], s.Structure.Segments[len(s.Structure.Segments)-1]
		near(t, c.layer+": width", b, c.width, 10*rounding)
		near(t, c.layer+": left", first.Height.At(0), c.left, c.tolerance)
		near(t, c.layer+": middle", s.Structure.HeightAt(b/2), c.mid, c.tolerance)
		near(t, c.layer+": right", last.Height.At(b), c.right, c.tolerance)
		near(t, c.layer+": mass left", first.Mass.At(0), c.massLeft, rounding)
		near(t, c.layer+": mass in the middle", s.Structure.MassAt(b/2), c.massMid, rounding)
	}
}

// Smooth is the monotone cubic, not the straight line: at a quarter of a
// symmetric rise between flat ends it lies at 5/32, where the cubic 3u^2-2u^3
// does.
func TestSmoothTableIsSmooth(t *testing.T) {
	files := fstest.MapFS{"t.csv": {Data: []byte("x, height\n0, 0\n1, 0\n2, 1\n3, 1\n")}}
	for word, want := range map[string]float64{"smooth": 5. / 32, "linear": 0.25} {
		text := "units = \"natural\"\npacket = {energy = 0.5, length = 9}\nlayer = [{shape = \"table\", file = \"t.csv\", interpolate = \"" + word + "\"}]"
		f, err := Read("t.toml", strings.NewReader(text), Within(files, "."))
		if err != nil {
			t.Fatal(err)
		}
		s, err := f.Compile()
		if err != nil {
			t.Fatal(err)
		}
		near(t, word, s.Structure.HeightAt(1.25), want, 4*rounding)
	}
}

// A smooth step under bias rises to the exit's height before the drop; the
// drop then lowers both.
func TestSmoothStepUnderBias(t *testing.T) {
	s := compile(t, `
		units = "natural"
		exit.height = 3
		bias.drop = 2
		packet = {energy = 0.5, length = 9}
		layer = [{shape = "smooth-step", width = 1, thickness = 60}]
	`)
	end := s.Structure.Segments[0].Height.At(60)
	near(t, "height at the end", end, 1, 1e-12)
	near(t, "exit", s.Structure.Exit.Height, 1, rounding)
}

func TestPlacesInInternalUnits(t *testing.T) {
	s := compile(t, sound)
	near(t, "start", *s.Packet.Start*s.Scale.Length, -140, rounding)
	near(t, "near", *s.Planes.Near*s.Scale.Length, -280, rounding)
	near(t, "far", *s.Planes.Far*s.Scale.Length, 80, rounding)
	if s = compile(t, bare); s.Packet.Start != nil || s.Planes.Near != nil || s.Planes.Far != nil {
		t.Error("places were chosen that the file does not give")
	}
}

// The bounds that messages state are accepted as they stand.
func TestStatedBoundsAreAccepted(t *testing.T) {
	for _, c := range []struct{ from, start, near, far string }{
		{"left", "-56 nm", "-112 nm", "9 nm"},
		{"right", "65 nm", "121 nm", "0 nm"},
	} {
		f, err := Read("test.toml", strings.NewReader(sound), nil)
		if err != nil {
			t.Fatal(err)
		}
		if f.Packet.From = FromLeft; c.from == "right" {
			f.Packet.From = FromRight
		}
		for path, text := range map[string]string{"packet.start": c.start, "planes.near": c.near, "planes.far": c.far} {
			if err := f.Set(path, text); err != nil {
				t.Fatal(err)
			}
		}
		if _, err := f.Compile(); err != nil {
			t.Errorf("from the %s: %v", c.from, err)
		}
	}
}

func TestDisplayUnits(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{sound, "nm meV fs"},
		{"particle.mass = \"Rb-87\"\npacket = {energy = \"20 nK\", length = \"5 um\"}", "um nK ms"},
		{"particle.mass = \"neutron\"\npacket = {energy = \"120 neV\", length = \"200 nm\"}", "nm neV ns"},
		{"particle.mass = \"electron\"\npacket = {energy = \"1 eV\", spread = \"10 meV\"}", "nm eV fs"},
		{"particle.mass = \"electron\"\npacket = {energy = \"1 MeV\", spread = \"10 meV\"}", ""},
		{"particle.mass = \"electron\"\nentry.height = \"-1 meV\"\npacket = {energy = 0, length = \"1 um\"}", "um meV ps"},
		{"particle.mass = \"electron\"\npacket = {energy = \"1 eV\", length = \"1 um\"}\ndisplay = {length = \"angstrom\", energy = \"THz\", time = \"s\"}", "angstrom THz s"},
	} {
		f, err := Read("test.toml", strings.NewReader(c.text), nil)
		if c.want == "" {
			if err == nil {
				t.Errorf("%q was read", c.text)
			}
			continue
		}
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
			continue
		}
		s, err := f.Compile()
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
			continue
		}
		if got := s.Scale.LengthUnit + " " + s.Scale.EnergyUnit + " " + s.Scale.TimeUnit; got != c.want {
			t.Errorf("%q is shown in %q, want %q", c.text, got, c.want)
		}
	}
}

func TestScaleInternal(t *testing.T) {
	s := compile(t, sound)
	for _, c := range []struct {
		kind Kind
		text string
		want float64
	}{
		{Length, "0.014 um", s.Packet.Length},
		{Energy, "0.31 eV", s.Packet.Energy},
		{Time, "1 ps", 1000 / s.Scale.Time},
	} {
		q, err := ParseQuantity(c.kind, false, c.text)
		if err != nil {
			t.Fatal(err)
		}
		near(t, c.text, s.Scale.Internal(q), c.want, rounding)
	}
}

// Legal but hard: what is small or large compared with the wave length stays
// as it is.
func TestHardScenariosCompile(t *testing.T) {
	for name, text := range map[string]string{
		"energy at the exit's height": strings.Replace(sound, `height = "20 meV"`, `height = "320 meV"`, 1),
		"energy below the exit":       strings.Replace(sound, `height = "20 meV"`, `height = "9 eV"`, 1),
		"a layer of a femtometre":     strings.Replace(sound, `"6 nm"`, `"1e-6 nm"`, 1),
		"twelve decades of height":    strings.Replace(sound, `"100 meV"`, `"100 GHz"`, 1),
		"a mountain":                  strings.Replace(sound, `"250 meV"`, `"1e12 meV"`, 1),
		"a packet of three waves":     strings.Replace(bare, "length = 10", "length = 2", 1),
		"a packet of 10,000 waves":    strings.Replace(bare, "length = 10", "length = 4e4", 1),
		"a thick barrier":             strings.Replace(bare, "thickness = 2", "thickness = 1e4", 1),
		"a negative drop":             strings.Replace(sound, `"10 meV"`, `"-10 meV"`, 1),
		"a well":                      strings.Replace(sound, `"250 meV"`, `"-250 meV"`, 1),
	} {
		if err := readAndCompile("hard.toml", text); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

func TestTitleIsOneHarmlessLine(t *testing.T) {
	text := "title = \"a\\u001b[2Jb\\nc\\u202Ed \u00e9" + strings.Repeat("x", 300) + "\"\n" + bare
	got := compile(t, text).Title
	if !strings.HasPrefix(got, "a [2Jb c d \u00e9xx") || len([]rune(got)) != 120 {
		t.Errorf("title is %q", got)
	}
}

// finite reports whether every number of a structure is one.
func finite(s *potential.Structure) bool {
	sum := s.Entry.Height + s.Entry.Mass + s.Exit.Height + s.Exit.Mass + s.Width()
	for _, g := range s.Segments {
		for _, x := range []float64{g.From, (g.From + g.To) / 2, g.To} {
			sum += math.Abs(g.Height.At(x)) + math.Abs(g.Mass.At(x)) + g.Loss
		}
	}
	for _, d := range s.Deltas {
		sum += d.X + math.Abs(d.Strength)
	}
	return !math.IsNaN(sum) && !math.IsInf(sum, 0)
}
