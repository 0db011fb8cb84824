package scenarios_test

import (
	"fmt"
	"strings"

	"fluxtoll/scenarios"
)

// Read a scenario, bring it to internal units, and scale a number back.
func ExampleRead() {
	const text = `
		particle.mass = "0.067 m_e"
		exit = {height = "180 meV", mass = "0.08 m_e"}
		packet = {energy = "310 meV", length = "14 nm"}
	`
	f, err := scenarios.Read("step.toml", strings.NewReader(text), nil)
	if err != nil {
		fmt.Println(err)
		return
	}
	s, err := f.Compile()
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("wave length %.2f %s\n", 6.283185307*s.Scale.Length, s.Scale.LengthUnit)
	fmt.Printf("step of %.0f %s\n", s.Structure.Exit.Height*s.Scale.Energy, s.Scale.EnergyUnit)
	// Output:
	// wave length 8.51 nm
	// step of 180 meV
}

// A message names the place and what is accepted there.
func ExampleInputError() {
	const text = `particle.mass = "electron"
packet.energy = "310 nm"
`
	_, err := scenarios.Read("step.toml", strings.NewReader(text), nil)
	fmt.Println(err)
	// Output:
	// step.toml:2:17: packet.energy: "310 nm" is a length; an energy is accepted, in keV, eV, meV, ueV, neV, peV, J, K, mK, uK, nK, Hz, kHz, MHz, GHz, THz
}

// Quantities are changed by their path.
func ExampleFile_Set() {
	f, err := scenarios.OpenDemo("thin-barrier")
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Println(strings.Join(f.Quantities(), " "))
	fmt.Println(f.Set("layer[0].thickness", "40 angstrom"))
	q, err := f.Get("layer[0].thickness")
	fmt.Println(q, err)
	// Output:
	// tolerance particle.mass layer[0].thickness layer[0].height layer[0].mass packet.energy packet.length
	// <nil>
	// 40 angstrom <nil>
}
