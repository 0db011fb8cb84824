package scenarios

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

// isParticle reports whether name is a particle's.
func isParticle(name string) bool {
	_, ok := find(particles(), name)
	return ok
}
