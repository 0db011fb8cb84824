package published

// states are resonances and bound states. The poles of twin barriers were computed
// with mpmath from the closed form of a resonator between two barriers and
// confirmed by matching layer by layer (Muller's method, 30 digits); the
// others with mpmath (30 digits) from the transcendental equation of the source.
func states() []Case {
	return []Case{
		{
			Name:   "Twin barrier, broad level",
			Source: "B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
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
energy = 0.3
length = 10
`,
			Checks: []Check{
				{"resonance[0].energy", 0.2820018425927141696667, []Road{States, Elements}},
				{"resonance[0].width", 0.04273846440057261070685, []Road{States, Elements}},
			},
		},
		{
			Name:   "Unequal twin barrier, its level",
			Source: "B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 0.6
height = 2
[[layer]]
thickness = 3
height = 0
[[layer]]
thickness = 1.0
height = 2
[packet]
energy = 0.3
length = 10
`,
			Checks: []Check{
				{"resonance[0].energy", 0.2908979936181422867943, []Road{States, Elements}},
				{"resonance[0].width", 0.02706894273787923509684, []Road{States, Elements}},
			},
		},
		{
			Name:   "Twin barrier, narrow level",
			Source: "B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984)", FromMemory: true,
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
energy = 0.3
length = 10
`,
			Checks: []Check{
				{"resonance[0].energy", 0.3035004537561623070014, []Road{States, Elements}},
				{"resonance[0].width", 0.001567980042021825236262, []Road{States, Elements}},
			},
		},
		{
			Name:   "Two levels of a thin-walled resonator",
			Source: "R. Tsu and L. Esaki, Appl. Phys. Lett. 22, 562 (1973)", FromMemory: true,
			Scenario: `
tolerance = 1e-12
[particle]
mass = "0.067 m_e"
[[layer]]
thickness = "2.0 nm"
height = "0.5 eV"
mass = "0.067 m_e"
[[layer]]
thickness = "5.0 nm"
height = "0 eV"
[[layer]]
thickness = "2.0 nm"
height = "0.5 eV"
mass = "0.067 m_e"
[packet]
energy = "0.25 eV"
length = "5 nm"
`,
			Checks: []Check{
				{"resonance[0].energy", 0.1053721883303677108296, []Road{States, Elements}},
				{"resonance[0].width", 0.006432131284153800011366, []Road{States, Elements}},
				{"resonance[1].energy", 0.4007087677166158241208, []Road{States, Elements}},
				{"resonance[1].width", 0.06679410609327478094344, []Road{States, Elements}},
			},
		},
		{
			Name:   "Resonator of equal masses",
			Source: "G. Garcia-Calderon, A. Rubio, R. Romo and J. Villavicencio, quant-ph/0011032", FromMemory: true,
			Scenario: `
tolerance = 1e-12
[particle]
mass = "0.067 m_e"
[[layer]]
thickness = "5.0 nm"
height = "0.23 eV"
mass = "0.067 m_e"
[[layer]]
thickness = "5.0 nm"
height = "0 eV"
[[layer]]
thickness = "5.0 nm"
height = "0.23 eV"
mass = "0.067 m_e"
[packet]
energy = "0.08 eV"
length = "40 nm"
`,
			Checks: []Check{
				{"resonance[0].energy", 0.08005426019449141985668, []Road{States, Elements}},
				{"resonance[0].width", 0.001027893701762965132419, []Road{States, Elements}},
			},
		},
		{
			Name:   "Resonator with heavier barriers",
			Source: "D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966); B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984)", FromMemory: true,
			Scenario: `
tolerance = 1e-12
[particle]
mass = "0.067 m_e"
[[layer]]
thickness = "3.0 nm"
height = "0.25929 eV"
mass = "0.0919 m_e"
[[layer]]
thickness = "6.0 nm"
height = "0 eV"
[[layer]]
thickness = "3.0 nm"
height = "0.25929 eV"
mass = "0.0919 m_e"
[packet]
energy = "0.06 eV"
length = "40 nm"
`,
			Checks: []Check{
				{"resonance[0].energy", 0.06146839793535682940376, []Road{States, Elements}},
				{"resonance[0].width", 0.002076769061095399853801, []Road{States, Elements}},
			},
		},
		{
			Name:   "Square well, its three states",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 22, problem 1", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
thickness = 3
height = -4
[packet]
energy = 1
length = 10
`,
			Checks: []Check{
				{"bound[0].energy", -3.64302769666466389771455286877, []Road{States, Elements}},
				{"bound[1].energy", -2.60124211573185501910455861541, []Road{States, Elements}},
				{"bound[2].energy", -1.01003592982623372932223591544, []Road{States, Elements}},
			},
		},
		{
			Name:   "Light well between heavy leads, its three states",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 22, problem 1; D. J. BenDaniel and C. B. Duke, Phys. Rev. 152, 683 (1966)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[entry]
mass = 1.3
[exit]
mass = 1.3
[[layer]]
thickness = 3
height = -4
mass = 0.7
[packet]
energy = 1
length = 10
`,
			Checks: []Check{
				{"bound[0].energy", -3.58854237859561218265157706689, []Road{States, Elements}},
				{"bound[1].energy", -2.33916854601229896263509836169, []Road{States, Elements}},
				{"bound[2].energy", -0.382302749217523754999787621156, []Road{States, Elements}},
			},
		},
		{
			Name:   "Well between unequal leads, its three states",
			Source: "L. D. Landau and E. M. Lifshitz, Quantum Mechanics, 3rd ed., sec. 22, problem 2", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[entry]
height = 5
[exit]
height = 3
[[layer]]
thickness = 4
height = 0
[packet]
energy = 6
length = 10
`,
			Checks: []Check{
				{"bound[0].energy", 0.220382467696296490652265034478, []Road{States, Elements}},
				{"bound[1].energy", 0.872146446230812661997834755768, []Road{States, Elements}},
				{"bound[2].energy", 1.91644847516590758227287876538, []Road{States, Elements}},
			},
		},
		{
			Name:   "Two attractive deltas, their two states",
			Source: "D. J. Griffiths, Introduction to Quantum Mechanics, 2nd ed., problem 2.27", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
shape = "delta"
strength = -1
[[layer]]
thickness = 2
height = 0
[[layer]]
shape = "delta"
strength = -1
[packet]
energy = 1
length = 10
`,
			Checks: []Check{
				{"bound[0].energy", -0.614782536287897671835562941124, []Road{States, Elements}},
				{"bound[1].energy", -0.317454785273520665624860223722, []Road{States, Elements}},
			},
		},
		{
			Name:   "Two repulsive deltas, two levels",
			Source: "D. J. Griffiths, Introduction to Quantum Mechanics, sec. 2.5; B. Ricco and M. Ya. Azbel, Phys. Rev. B 29, 1970 (1984)", FromMemory: true,
			Scenario: `
units = "natural"
tolerance = 1e-12
[[layer]]
shape = "delta"
strength = 5
[[layer]]
thickness = 3
height = 0
[[layer]]
shape = "delta"
strength = 5
[packet]
energy = 1
length = 2
`,
			Checks: []Check{
				{"resonance[0].energy", 0.48258628992115834534991359539, []Road{States, Elements}},
				{"resonance[0].width", 0.011656955825863445866453728622, []Road{States, Elements}},
				{"resonance[1].energy", 1.93790028339211288269566639829, []Road{States, Elements}},
				{"resonance[1].width", 0.089429673737533069576105486231, []Road{States, Elements}},
			},
		},
	}
}
