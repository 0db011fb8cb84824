package published

// barriers are single flat layers.
func barriers() []Case {
	return []Case{
		{
			Name:   "Barrier, at half its height",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 2", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 3
height = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.00986603716544019, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Barrier, at its top",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 2", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 3
height = 1
[packet]
energy = 1
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.18181818181818182, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Barrier, above its top",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 2", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 3
height = 1
[packet]
energy = 1.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.9934054906777257, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Well",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 2", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 1.7
height = -2
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.7689260993256659, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Barrier of heavier material",
			Source: "D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 3
height = 1
mass = 1.5
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.0024684107508644755, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Saturation of the tunnelling time, thickness 1",
			Source: "T. E. Hartman, J. Appl. Phys. 33, 3427 (1962); M. Buettiker, Phys. Rev. B 27, 6178 (1983)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 1
height = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"group_delay_transmitted", 1.5231883119115297, []Road{PlaneWave}},
				{"dwell", 0.7615941559557649, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Saturation of the tunnelling time, thickness 3",
			Source: "T. E. Hartman, J. Appl. Phys. 33, 3427 (1962); M. Buettiker, Phys. Rev. B 27, 6178 (1983)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 3
height = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"group_delay_transmitted", 1.990109507373461, []Road{PlaneWave}},
				{"dwell", 0.9950547536867305, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Saturation of the tunnelling time, thickness 10",
			Source: "T. E. Hartman, J. Appl. Phys. 33, 3427 (1962); M. Buettiker, Phys. Rev. B 27, 6178 (1983)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 10
height = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 8.244614455767397e-09, []Road{PlaneWave}},
				{"group_delay_transmitted", 1.9999999917553855, []Road{PlaneWave}},
				{"dwell", 0.9999999958776927, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Al0.3Ga0.7As barrier of 5 nm in GaAs",
			Source: "D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966); material: I. Vurgaftman, J. R. Meyer and L. R. Ram-Mohan, J. Appl. Phys. 89, 5815 (2001)", FromMemory: true,
			Scenario: `
tolerance = 1e-12
[particle]
mass = "0.067 m_e"
[[layer]]
thickness = "5 nm"
height = "0.2593062005163511 eV"
mass = "0.0919 m_e"
[packet]
energy = "0.1 eV"
length = "20 nm"
[display]
time = "fs"
`,
			Checks: []Check{
				{"transmitted", 0.008049182453826971, []Road{PlaneWave}},
				{"group_delay_transmitted", 5.324406563506861, []Road{PlaneWave}},
				{"dwell", 2.055699317291919, []Road{PlaneWave}},
			},
		},
	}
}
