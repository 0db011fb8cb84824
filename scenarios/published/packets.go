package published

// packets are averages over the spectrum of a Gaussian packet, taken on both
// roads.
func packets() []Case {
	return []Case{
		{
			Name:   "Packet on a step",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 1, averaged", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[exit]
height = 1
[packet]
energy = 2
length = 5
`,
			Checks: []Check{
				{"transmitted", 0.9688294864523954, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Packet on a step to a heavier material",
			Source: "D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966), averaged", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[exit]
height = 1
mass = 1.5
[packet]
energy = 2
length = 5
`,
			Checks: []Check{
				{"transmitted", 0.926045121683784, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Packet across the top of a step",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 1, averaged", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[exit]
height = 1
[packet]
energy = 1
length = 5
`,
			Checks: []Check{
				{"transmitted", 0.33325486174121327, []Road{Average}},
			},
		},
		{
			Name:   "Packet tunnelling through a barrier",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 2, averaged; M. Buettiker, Phys. Rev. B 27, 6178 (1983)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[[layer]]
thickness = 2
height = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.07194928470098558, []Road{Average, Packet}},
				{"group_delay_reflected", 1.9336392799673556, []Road{Average, Packet}},
				{"dwell", 0.9664023047888736, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Packet over a barrier",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 2, averaged", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[[layer]]
thickness = 3
height = 1
[packet]
energy = 1.62
length = 6
`,
			Checks: []Check{
				{"transmitted", 0.961872851198131, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Packet over a well",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 2, averaged; M. Buettiker, Phys. Rev. B 27, 6178 (1983)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[[layer]]
thickness = 1.7
height = -2
[packet]
energy = 0.5
length = 8
`,
			Checks: []Check{
				{"transmitted", 0.7687942690069671, []Road{Average, Packet}},
				{"dwell", 0.8528565226334286, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Packet on a sech2 barrier",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 4, averaged; E. P. Wigner, Phys. Rev. 98, 145 (1955)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[[layer]]
shape = "sech2"
height = 1
width = 1
thickness = 40
[packet]
energy = 0.72
length = 8
`,
			Checks: []Check{
				{"transmitted", 0.32148526785396403, []Road{Average, Packet}},
				{phaseDelayTransmitted, 1.1775261288921741, []Road{Average, Packet}},
				{phaseDelayReflected, 1.1460455193495678, []Road{Average, Packet}},
				{"dwell", 34.57695496643234, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Packet over a sech2 well without reflection",
			Source: "G. Poeschl and E. Teller, Z. Phys. 83, 143 (1933), averaged", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[[layer]]
shape = "sech2"
height = -1
width = 1
thickness = 40
[packet]
energy = 0.5
length = 8
`,
			Checks: []Check{
				{"transmitted", 1, []Road{Average, Packet}},
				{phaseDelayTransmitted, -1.009870347397503, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Packet over a smooth step",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 3, averaged", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[exit]
height = 1
[[layer]]
shape = "smooth-step"
width = 0.2
thickness = 16
[packet]
energy = 2.42
length = 6
`,
			Checks: []Check{
				{"transmitted", 0.996433543277828, []Road{Average, Packet}},
				{phaseDelayTransmitted, -0.005413619383266528, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Packet on a ramp: arrival 30 behind it",
			Source: "NIST Digital Library of Mathematical Functions, chapter 9, averaged; E. H. Hauge and J. A. Stovneng, Rev. Mod. Phys. 61, 917 (1989)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[exit]
height = 1
[[layer]]
shape = "ramp"
thickness = 2
height = 0
height_end = 1
[packet]
energy = 1.62
length = 6
start = -60
[planes]
near = -120
far = 32
`,
			Checks: []Check{
				{"transmitted", 0.9955897486354206, []Road{Average, Packet}},
				// 60<1/v1> + 32<1/v2> + <d(arg t)/dE> = 62.32550328794861 over what is
				// transmitted, less 2.847165e-6: what is totally reflected reaches past
				// the plane and comes back, which takes from the sum of times at the
				// plane the integral of |phi|^2 |psi(2)|^2 exp(-60 kappa)/(2 kappa v1) dk
				// over k < sqrt(2), with psi matched to Airy functions.
				{"arrival_transmitted", 62.32550044078344, []Road{Average, Packet}},
				{"group_delay_reflected", 2.766162587363027, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Packet on a twin barrier",
			Source: "B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984), averaged; M. Buettiker, Phys. Rev. B 27, 6178 (1983)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-06
[[layer]]
thickness = 0.6
height = 2
[[layer]]
thickness = 3
height = 0
[[layer]]
thickness = 0.6
height = 2
[packet]
energy = 0.28125
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.4795662206963049, []Road{Average, Packet}},
				{"group_delay_reflected", 15.679968036668782, []Road{Average, Packet}},
				{"dwell", 23.226257445589738, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Electrons through 4 nm of Al0.3Ga0.7As in GaAs",
			Source: "D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966), averaged; material: I. Vurgaftman, J. R. Meyer and L. R. Ram-Mohan, J. Appl. Phys. 89, 5815 (2001)", FromMemory: true,
			Scenario: `
tolerance = 1e-06
[particle]
mass = "0.067 m_e"
[[layer]]
thickness = "4 nm"
height = "0.2593062005163511 eV"
mass = "0.0919 m_e"
[packet]
energy = "0.15 eV"
length = "20 nm"
[display]
time = "fs"
`,
			Checks: []Check{
				{"transmitted", 0.05929957735953544, []Road{Average, Packet}},
				{"group_delay_reflected", 4.725595411485866, []Road{Average, Packet}},
				{"dwell", 2.6821544358101614, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Electrons over a step of GaAs to Al0.3Ga0.7As",
			Source: "D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966), averaged; material: I. Vurgaftman, J. R. Meyer and L. R. Ram-Mohan, J. Appl. Phys. 89, 5815 (2001)", FromMemory: true,
			Scenario: `
tolerance = 1e-06
[particle]
mass = "0.067 m_e"
[exit]
height = "0.2593062005163511 eV"
mass = "0.0919 m_e"
[packet]
energy = "0.4 eV"
length = "20 nm"
[display]
time = "fs"
`,
			Checks: []Check{
				{"transmitted", 0.890472754791457, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Electrons on a twin barrier, tuned to its level",
			Source: "G. Garcia-Calderon, R. Romo and J. Villavicencio (parameters), averaged; M. Buettiker, Phys. Rev. B 27, 6178 (1983)", FromMemory: true,
			Scenario: `
tolerance = 1e-06
[particle]
mass = "0.067 m_e"
[[layer]]
thickness = "5 nm"
height = "0.23 eV"
[[layer]]
thickness = "5 nm"
height = "0 eV"
[[layer]]
thickness = "5 nm"
height = "0.23 eV"
[packet]
energy = "0.08005426019449142 eV"
length = "60 nm"
[display]
time = "fs"
`,
			Checks: []Check{
				{"transmitted", 0.1622348549158961, []Road{Average, Packet}},
				{"dwell", 210.15010501114887, []Road{Average, Packet}},
			},
		},
		{
			Name:   "Neutrons of 300 neV on nickel, as a packet",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 1, averaged; height from the UCN table of TRIUMF", FromMemory: false,
			Scenario: `
tolerance = 1e-06
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
				{"transmitted", 0.8017236887263645, []Road{Average, Packet}},
			},
		},
	}
}
