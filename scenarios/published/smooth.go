package published

// smooth are sech2 and smooth-step layers. Their tolerance lets the windows end
// where the tails are 1e-15 of the energy.
func smooth() []Case {
	return []Case{
		{
			Name:   "sech2 barrier",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 4; G. Poeschl and E. Teller, Z. Phys. 83, 143 (1933)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
shape = "sech2"
height = 1
width = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.11578993102457105, []Road{PlaneWave}},
			},
		},
		{
			Name:   "sech2 well that reflects",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 4; G. Poeschl and E. Teller, Z. Phys. 83, 143 (1933)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
shape = "sech2"
height = -2
width = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.992830908414381, []Road{PlaneWave}},
			},
		},
		{
			Name:   "sech2 well without reflection, one bound state",
			Source: "G. Poeschl and E. Teller, Z. Phys. 83, 143 (1933); S. Fluegge, Practical Quantum Mechanics, problem 39", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
shape = "sech2"
height = -1
width = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 1, []Road{PlaneWave}},
				{phaseDelayTransmitted, -1.0, []Road{PlaneWave}},
			},
		},
		{
			Name:   "sech2 well without reflection, two bound states",
			Source: "G. Poeschl and E. Teller, Z. Phys. 83, 143 (1933); S. Fluegge, Practical Quantum Mechanics, problem 39", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
shape = "sech2"
height = -3
width = 1
[packet]
energy = 0.7
length = 10
`,
			Checks: []Check{
				{"transmitted", 1, []Road{PlaneWave}},
				{phaseDelayTransmitted, -1.3303354009615538, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Smooth step",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 3", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = 1
[[layer]]
shape = "smooth-step"
width = 0.7
[packet]
energy = 1.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.9998605801086119, []Road{PlaneWave}},
				{phaseDelayTransmitted, -0.22138043416362732, []Road{PlaneWave}},
				{phaseDelayReflected, -0.21700118877724608, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Smooth step above the energy",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 25, problem 3", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = 1
[[layer]]
shape = "smooth-step"
width = 0.7
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{phaseDelayReflected, 3.5478729252675847, []Road{PlaneWave}},
			},
		},
	}
}
