package published

// steps are jumps of height and mass between two leads.
func steps() []Case {
	return []Case{
		{
			Name:   "Step, twice as much energy as its height",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 1", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = 1
[packet]
energy = 2
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.9705627484771406, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Step down, energy above it a third of its depth",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 1", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = -3
[packet]
energy = 1
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.8888888888888888, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Step to a heavier material",
			Source: "D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = 1
mass = 1.5
[packet]
energy = 2
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.9282032302755092, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Change of mass alone, GaAs to Al0.3Ga0.7As",
			Source: "D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[particle]
mass = 0.067
[exit]
height = 0
mass = 0.0919
[packet]
energy = 0.37
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.9937845457368552, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Reflection from a step above the energy",
			Source: "E. P. Wigner, Phys. Rev. 98, 145 (1955)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"reflected", 1, []Road{PlaneWave}},
				{"group_delay_reflected", 2.0, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Reflection from a step, heavier behind it",
			Source: "E. P. Wigner, Phys. Rev. 98, 145 (1955)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = 1
mass = 1.5
[packet]
energy = 0.4
length = 10
`,
			Checks: []Check{
				{"group_delay_reflected", 2.0833333333333335, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Neutrons of 300 neV on nickel, 252 neV",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 1; height from the UCN table of TRIUMF", FromMemory: false,
			Scenario: `
tolerance = 1e-12
[particle]
mass = "neutron"
[exit]
height = "252 neV"
[packet]
energy = "300 neV"
length = "150 nm"
[display]
time = "ns"
`,
			Checks: []Check{
				{"reflected", 0.1836734693877551, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Neutrons of 100 neV on nickel, total reflection",
			Source: "E. P. Wigner, Phys. Rev. 98, 145 (1955)", FromMemory: true,
			Scenario: `
tolerance = 1e-12
[particle]
mass = "neutron"
[exit]
height = "252 neV"
[packet]
energy = "100 neV"
length = "500 nm"
[display]
time = "ns"
`,
			Checks: []Check{
				{"group_delay_reflected", 5.338803953091817, []Road{PlaneWave}},
			},
		},
	}
}
