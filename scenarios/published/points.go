package published

// points are delta layers.
func points() []Case {
	return []Case{
		{
			Name:   "Delta barrier",
			Source: "D. J. Griffiths, Introduction to Quantum Mechanics, sec. 2.5; E. H. Hauge and J. A. Stovneng, Rev. Mod. Phys. 61, 917 (1989)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
shape = "delta"
strength = 1
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.5, []Road{PlaneWave}},
				{"group_delay_transmitted", 0.5, []Road{PlaneWave}},
				{"group_delay_reflected", 0.5, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Delta well",
			Source: "D. J. Griffiths, Introduction to Quantum Mechanics, sec. 2.5; E. H. Hauge and J. A. Stovneng, Rev. Mod. Phys. 61, 917 (1989)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
shape = "delta"
strength = -2
[packet]
energy = 0.8
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.2857142857142857, []Road{PlaneWave}},
				{"group_delay_transmitted", -0.28234621965789103, []Road{PlaneWave}},
			},
		},
	}
}
