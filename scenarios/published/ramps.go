package published

// ramps are linear layers between two leads, which Airy functions solve.
func ramps() []Case {
	return []Case{
		{
			Name:   "Ramp up to a step",
			Source: "NIST Digital Library of Mathematical Functions, chapter 9", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = 1
[[layer]]
shape = "ramp"
thickness = 2
height = 0
height_end = 1
[packet]
energy = 1.4
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.9893347335896839, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Ramp down",
			Source: "NIST Digital Library of Mathematical Functions, chapter 9", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = -2
[[layer]]
shape = "ramp"
thickness = 3
height = 0
height_end = -2
[packet]
energy = 0.5
length = 10
`,
			Checks: []Check{
				{"transmitted", 0.9842951480983962, []Road{PlaneWave}},
			},
		},
		{
			Name:   "Ramp up above the energy",
			Source: "NIST Digital Library of Mathematical Functions, chapter 9", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[exit]
height = 1
[[layer]]
shape = "ramp"
thickness = 2
height = 0
height_end = 1
[packet]
energy = 0.7
length = 10
`,
			Checks: []Check{
				{"group_delay_reflected", 4.6523016956306344, []Road{PlaneWave}},
			},
		},
	}
}
