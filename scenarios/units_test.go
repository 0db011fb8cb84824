package scenarios

import (
	"math"
	"slices"
	"strings"
	"testing"
)

// rounding is what a few operations in float64 may lose.
const rounding = 8 * 0x1p-52

// near compares with a relative tolerance; NaN is near nothing.
func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance*math.Abs(want)) {
		t.Errorf("%s is %.17g, want %.17g within %g", what, got, want, tolerance)
	}
}

// base reads a quantity and returns it in base units.
func base(t *testing.T, kind Kind, text string) float64 {
	t.Helper()
	q, err := ParseQuantity(kind, false, text)
	if err != nil {
		t.Fatal(err)
	}
	return q.Base()
}

// The constants against derived values of CODATA 2022 that are published on
// their own (NIST listing, physics.nist.gov/cuu/Constants): hbar in eV s, k_B
// in eV/K, h in eV/Hz, and the masses of electron, neutron and proton in u and
// in MeV/c^2 (those from memory). The last digits printed there set the
// tolerances.
func TestConstants(t *testing.T) {
	const c = 299.792458 // nm/fs, exact
	near(t, "hbar", hbar(false), 0.6582119569509066, rounding)
	near(t, "1 K", base(t, Energy, "1 K"), 8.617333262e-5, 1e-10)
	near(t, "1 Hz", base(t, Energy, "1 Hz"), 4.135667696e-15, 3e-10)
	near(t, "1 J", base(t, Energy, "1 J"), 6.241509074e18, 1e-10)
	near(t, "m_e c^2", base(t, Mass, "1 m_e")*c*c, 510998.95069, 1e-9)   // 0.51099895069(16) MeV
	near(t, "u c^2", base(t, Mass, "1 u")*c*c, 931494103.72, 1e-9)       // 931.49410372(29) MeV
	near(t, "m_n c^2", base(t, Mass, "neutron")*c*c, 939565421.94, 2e-9) // 939.56542194(48) MeV
	near(t, "m_p c^2", base(t, Mass, "proton")*c*c, 938272089.43, 2e-9)  // 938.27208943(29) MeV
	near(t, "m_n/u", base(t, Mass, "neutron")/base(t, Mass, "1 u"), 1.00866491606, 1e-9)
	near(t, "m_e/u", base(t, Mass, "electron")/base(t, Mass, "1 u"), 5.485799090441e-4, 1e-9)
	near(t, "m_p/m_e", base(t, Mass, "proton")/base(t, Mass, "electron"), 1836.152673426, 1e-9)
}

// Each atom against its mass number: an atom weighs its mass number in u to
// one per cent, H-1 included, so a slip of the table shows.
func TestAtoms(t *testing.T) {
	count := 0
	for _, name := range particleNames() {
		_, number, ok := strings.Cut(name, "-")
		if !ok {
			continue
		}
		count++
		near(t, name, base(t, Mass, name), base(t, Mass, number+" u"), 0.01)
	}
	if count != 7 {
		t.Errorf("%d atoms, want 7", count)
	}
	// The hydrogen atom is a proton and an electron less the binding energy of
	// 13.6 eV (1.5e-8 u).
	near(t, "H-1", base(t, Mass, "H-1"), base(t, Mass, "proton")+base(t, Mass, "electron"), 2e-8)
}

// Handbook figures that need several constants at once.
func TestHandbookFigures(t *testing.T) {
	h := hbar(false)
	hartree := func(mass string) float64 { return h * h / (2 * base(t, Mass, mass)) } // eV nm^2
	// hbar^2/2m: 3.809982 eV A^2 for the electron, 2.072125 meV A^2 for the
	// neutron (both in any handbook of the trade).
	near(t, "hbar^2/2m_e", hartree("electron"), 0.03809982, 1e-7)
	near(t, "hbar^2/2m_n", hartree("neutron"), 2.072125e-5, 2e-7)
	// Recoil of Rb-87 on its D2 line, 3.7710 kHz, wave length 780.241209686 nm
	// (D. A. Steck, Rubidium 87 D Line Data; both from memory).
	k := 2 * math.Pi / 780.241209686
	near(t, "recoil of Rb-87", hartree("Rb-87")*k*k/base(t, Energy, "1 kHz"), 3.7710, 2e-5)
	// A neutron of 252 neV, the optical height of nickel, moves at 6.94 m/s.
	v := math.Sqrt(2 * base(t, Energy, "252 neV") / base(t, Mass, "neutron"))
	near(t, "critical velocity of nickel", v*1e6, 6.9434, 1e-5)
}

func TestUnitsByPrefix(t *testing.T) {
	for _, c := range []struct {
		kind      Kind
		one, same string
	}{
		{Length, "1 m", "1e3 mm"}, {Length, "1 mm", "1e3 um"}, {Length, "1 um", "1e3 nm"},
		{Length, "1 nm", "10 angstrom"}, {Length, "1 angstrom", "100 pm"}, {Length, "1 \u00b5m", "1 um"},
		{Length, "1 \u03bcm", "1um"}, {Length, "1 \u00c5", "1 angstrom"}, {Length, "1 \u212b", "1 angstrom"},
		{Energy, "1 keV", "1e3 eV"}, {Energy, "1 eV", "1e3 meV"}, {Energy, "1 meV", "1e3 ueV"}, {Energy, "1 ueV", "1e3 neV"}, {Energy, "1 neV", "1e3 peV"},
		{Energy, "1 K", "1e3 mK"}, {Energy, "1 mK", "1e3 uK"}, {Energy, "1 uK", "1e3 nK"},
		{Energy, "1 THz", "1e3 GHz"}, {Energy, "1 GHz", "1e3 MHz"}, {Energy, "1 MHz", "1e3 kHz"}, {Energy, "1 kHz", "1e3 Hz"},
		{Time, "1 s", "1e3 ms"}, {Time, "1 ms", "1e3 us"}, {Time, "1 us", "1e3 ns"}, {Time, "1 ns", "1e3 ps"},
		{Time, "1 ps", "1e3 fs"}, {Time, "1 fs", "1e3 as"},
		{Mass, "electron", "1 m_e"}, {Mass, "2 neutron", "+2.0 neutron"}, {Mass, "kg", ""},
		{Strength, "1 eV nm", "1e4 meV angstrom"}, {Strength, "1 eV*nm", "1 eV \u00b7 nm"}, {Strength, ".5 neV um", "5e-1 neV  um"},
	} {
		if c.same == "" {
			if q, err := ParseQuantity(c.kind, false, c.one); err == nil {
				t.Errorf("%q was read as %v", c.one, q)
			}
			continue
		}
		near(t, c.one, base(t, c.kind, c.one), base(t, c.kind, c.same), rounding)
	}
}

// Every unit belongs to one kind only: what a message calls the kind of a
// wrong unit is then right.
func TestUnitsAreDistinct(t *testing.T) {
	seen := map[string]Kind{}
	for k := Length; k <= Mass; k++ {
		for _, name := range unitNames(k) {
			if other, twice := seen[name]; twice {
				t.Errorf("%s is a unit of %v and of %v", name, other, k)
			}
			seen[name] = k
		}
	}
	if len(seen) < 35 {
		t.Errorf("%d units", len(seen))
	}
}

func TestQuantityString(t *testing.T) {
	for _, c := range []struct {
		kind Kind
		text string
		want string
	}{
		{Length, "5nm", "5 nm"}, {Length, " -5.0  \u00b5m ", "-5 um"}, {Length, "5e-1 m", "0.5 m"}, {Length, "0", "0"},
		{Mass, "Rb-87", "Rb-87"}, {Mass, "1 Rb-87", "Rb-87"}, {Mass, "2 Rb-87", "2 Rb-87"}, {Mass, "1 m_e", "1 m_e"},
		{Strength, "0.3 eV*nm", "0.3 eV nm"}, {Energy, "1e3 eV", "1000 eV"}, {Energy, "5eV", "5 eV"},
	} {
		q, err := ParseQuantity(c.kind, false, c.text)
		if err != nil || q.String() != c.want {
			t.Errorf("%q is read as %q, want %q (%v)", c.text, q, c.want, err)
		}
	}
}

func TestQuantityTo(t *testing.T) {
	q, err := ParseQuantity(Length, false, "250 angstrom")
	if err != nil {
		t.Fatal(err)
	}
	got, err := q.To("nm")
	if err != nil || got.Unit != "nm" {
		t.Fatalf("%v, %v", got, err)
	}
	near(t, "250 angstrom in nm", got.Number, 25, rounding)
	if _, err := q.To("meV"); err == nil || !strings.Contains(err.Error(), `250 angstrom cannot be stated in "meV"; a length is accepted`) {
		t.Errorf("length in meV: %v", err)
	}
}

func TestNearest(t *testing.T) {
	words := []string{"energy", "length", "spread", "start", "from", "near", "far"}
	for written, want := range map[string]string{
		"enegry": "energy", "ENERGY": "energy", "lenght": "length", "sprad": "spread", "stat": "start",
		"form": "from", "nera": "near", "colour": "", "x": "", "": "", "fa": "",
		strings.Repeat("energy", 20): "",
	} {
		if got, _ := nearest(written, words); got != want {
			t.Errorf("nearest to %q is %q, want %q", written, got, want)
		}
	}
}

// The distance on textbook pairs (V. I. Levenshtein's kitten and sitting; a
// swap of neighbours counts once) and as a metric on a few words.
func TestDistance(t *testing.T) {
	for _, c := range []struct {
		a, b string
		want int
	}{{"kitten", "sitting", 3}, {"ca", "ac", 1}, {"", "abc", 3}, {"abc", "", 3}, {"same", "same", 0}, {"flaw", "lawn", 2}} {
		if got := distance(c.a, c.b); got != c.want {
			t.Errorf("distance(%q, %q) = %d, want %d", c.a, c.b, got, c.want)
		}
		if distance(c.a, c.b) != distance(c.b, c.a) {
			t.Errorf("distance(%q, %q) is not symmetric", c.a, c.b)
		}
	}
}

func TestKeysOfShapes(t *testing.T) {
	keys := layerKeys()
	for _, want := range []string{"shape", "thickness", "height", "height_end", "width", "strength", "mass", "loss", "file", "interpolate"} {
		if !slices.Contains(keys, want) {
			t.Errorf("no shape takes %s", want)
		}
	}
}
