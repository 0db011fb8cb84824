package published

// stacks are several layers.
func stacks() []Case {
	return []Case{
		{
			Name:   "Three layers and two leads, five masses",
			Source: "F. T. Smith, Phys. Rev. 118, 349 (1960); H. G. Winful, Phys. Rev. Lett. 91, 260401 (2003)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = 0.6
mass = 1.1
[[layer]]
thickness = 1
height = 2
mass = 1.2
[[layer]]
thickness = 0.8
height = -0.5
mass = 1
[[layer]]
thickness = 0.6
height = 1.7
mass = 0.9
[packet]
energy = 1.3
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.19996738627948088, []Road{PlaneWave}},
				{"reflected", 0.8000326137205191, []Road{PlaneWave}},
				{"group_delay_transmitted", 1.4485430124694343, []Road{PlaneWave}},
				{"group_delay_reflected", 0.9310280743607685, []Road{PlaneWave}},
				{"dwell", 0.6953517879676374, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Twin barrier on a narrow resonance",
			Source: "B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984); E. P. Wigner, Phys. Rev. 98, 145 (1955)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 1.5
height = 2
[[layer]]
thickness = 3
height = 0
[[layer]]
thickness = 1.5
height = 2
[packet]
energy = 0.3035004537561623
length = 10
`,
			Checks: []Check{
				{"group_delay_transmitted", 1276.9281141533904, []Road{PlaneWave}},
				{"dwell", 1276.923512904558, []Road{PlaneWave}},
			},
		},
	}
}
