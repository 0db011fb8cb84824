package scenarios

import "strings"

// particles are the names a mass may be given by. The masses of neutron and
// proton are those of CODATA 2022. Those of the atoms are in u, from AME2020
// (M. Wang et al., Chinese Phys. C 45, 030003 (2021)), rounded to their
// uncertainty; all but Rb-87 are from memory.
func particles() []unit {
	const u = atomicMass * kilogram
	return []unit{
		{"electron", electronMass * kilogram},
		{"neutron", neutronMass * kilogram},
		{"proton", protonMass * kilogram},
		{"H-1", 1.00782503190 * u},
		{"He-4", 4.00260325413 * u},
		{"Li-7", 7.01600343 * u},
		{"Na-23", 22.9897692820 * u},
		{"K-39", 38.963706487 * u},
		{"Rb-87", 86.909180529 * u},
		{"Cs-133", 132.905451959 * u},
	}
}

// particleNames lists them.
func particleNames() []string { return names(particles()) }

// isName reports whether a text could be meant as a particle's name: it starts
// with a letter and is no number that other programs know.
func isName(text string) bool {
	lower := strings.ToLower(text)
	return lower != "" && 'a' <= lower[0] && lower[0] <= 'z' && !strings.HasPrefix(lower, "nan") && !strings.HasPrefix(lower, "inf")
}
