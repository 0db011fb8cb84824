package scenarios

import "strings"

// Kind is what a quantity measures.
type Kind int

// The kinds of quantity. Strength is an energy times a length.
const (
	Plain Kind = iota
	Length
	Energy
	Time
	Mass
	Strength
)

func (k Kind) String() string {
	return [...]string{"number", "length", "energy", "time", "mass", "strength"}[k]
}

// article returns the kind with its article.
func (k Kind) article() string {
	if k == Energy {
		return "an energy"
	}
	return "a " + k.String()
}

// unit is a unit's name and its size in the base unit of its kind: eV, nm,
// fs, and eV fs^2/nm^2 for masses. In these the constants of electrons, atoms
// and neutrons alike are far from the limits of a float64.
type unit struct {
	name string
	base float64
}

// units lists the units of a kind. A strength has products of two units
// instead; see strengthUnit.
func units(k Kind) []unit {
	switch k {
	case Length:
		return []unit{{"m", 1e9}, {"mm", 1e6}, {"um", 1e3}, {"nm", 1}, {"angstrom", 0.1}, {"pm", 1e-3}}
	case Energy:
		return energyUnits()
	case Time:
		return []unit{{"s", 1e15}, {"ms", 1e12}, {"us", 1e9}, {"ns", 1e6}, {"ps", 1e3}, {"fs", 1}, {"as", 1e-3}}
	case Mass:
		return []unit{{"kg", kilogram}, {"u", atomicMass * kilogram}, {"m_e", electronMass * kilogram}}
	}
	return nil
}

// energyUnits lists those of an energy E, and those in which E/k_B and E/h
// are stated.
func energyUnits() []unit {
	const kelvin, hertz = boltzmann / electronVolt, planck / electronVolt
	return []unit{
		{"keV", 1e3}, {"eV", 1}, {"meV", 1e-3}, {"ueV", 1e-6}, {"neV", 1e-9}, {"peV", 1e-12}, {"J", 1 / electronVolt},
		{"K", kelvin}, {"mK", kelvin * 1e-3}, {"uK", kelvin * 1e-6}, {"nK", kelvin * 1e-9},
		{"Hz", hertz}, {"kHz", hertz * 1e3}, {"MHz", hertz * 1e6}, {"GHz", hertz * 1e9}, {"THz", hertz * 1e12},
	}
}

func find(list []unit, name string) (float64, bool) {
	for _, u := range list {
		if u.name == name {
			return u.base, true
		}
	}
	return 0, false
}

// unitSize returns the size of a unit in the base unit of its kind.
func unitSize(k Kind, name string) (float64, bool) {
	if size, ok := find(units(k), name); ok {
		return size, true
	}
	switch k {
	case Mass:
		return find(particles(), name)
	case Strength:
		return strengthUnit(name)
	}
	return 0, false
}

// strengthUnit reads an energy unit and a length unit with one space between.
func strengthUnit(name string) (float64, bool) {
	energy, length, _ := strings.Cut(name, " ")
	e, ok := find(units(Energy), energy)
	l, okLength := find(units(Length), length)
	return e * l, ok && okLength
}

// canonical returns a unit's one spelling: micro signs as u, the letter
// A-ring as angstrom, and the factors of a product parted by one space.
func canonical(name string) string {
	if isWord(name) {
		return name // by far the most: 100,000 layers are read in half a second
	}
	name = strings.NewReplacer("\u00b5", "u", "\u03bc", "u", "\u00c5", "angstrom", "\u212b", "angstrom",
		"*", " ", "\u00b7", " ").Replace(name)
	return strings.Join(strings.Fields(name), " ")
}

// isWord reports whether a name is made of ASCII letters, digits, - and _.
func isWord(name string) bool {
	for i := range len(name) {
		c := name[i] | 0x20
		if !('a' <= c && c <= 'z' || isDigit(name[i]) || name[i] == '-' || name[i] == '_') {
			return false
		}
	}
	return name != ""
}

// kindOf returns the kind that has the unit.
func kindOf(name string) (Kind, bool) {
	for k := Length; k <= Strength; k++ {
		if _, ok := unitSize(k, name); ok {
			return k, true
		}
	}
	return Plain, false
}

// names lists the names of units.
func names(list []unit) []string {
	out := make([]string, len(list))
	for i, u := range list {
		out[i] = u.name
	}
	return out
}

// unitNames lists the spellings a kind accepts.
func unitNames(k Kind) []string {
	if k == Mass {
		return append(names(units(k)), particleNames()...)
	}
	return names(units(k))
}

// spelledUnits is the list for a message.
func spelledUnits(k Kind) string {
	switch k {
	case Mass:
		return "in kg, u or m_e, or a name: " + strings.Join(particleNames(), ", ")
	case Strength:
		return `as an energy times a length, such as "0.3 eV nm"`
	}
	return "in " + strings.Join(unitNames(k), ", ")
}
