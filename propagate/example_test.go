package propagate_test

import (
	"context"
	"fmt"
	"log"
	"math"

	"fluxtoll/potential"
	"fluxtoll/propagate"
)

// exampleMesh is a grid around a step of height 1, fine enough for waves of
// energies up to 5.
func exampleMesh() *propagate.Mesh {
	structure, err := potential.Build(
		potential.Lead{Mass: 1}, potential.Lead{Height: 1, Mass: 1}, nil, potential.Options{})
	if err != nil {
		log.Fatal(err)
	}
	goals := []propagate.EdgeGoal{{Energy: 1.2, Weight: 0.2}, {Energy: 2, Weight: 0.6}, {Energy: 4, Weight: 0.2}}
	layout, err := propagate.NewLayout(structure,
		propagate.Resolution{Order: 12, Phase: 7, Low: 0.5, High: 5, Height: 1e-8, MaxNodes: 10000},
		propagate.Extent{Left: -90, PlaneLeft: -90, PlaneRight: 15, Right: 15},
		propagate.ChooseEdge(structure.Entry, 12, goals, 1e-7),
		propagate.ChooseEdge(structure.Exit, 12, goals, 1e-7))
	if err != nil {
		log.Fatal(err)
	}
	return propagate.NewMesh(layout)
}

// A packet of mean energy 2 meets a step of height 1. Its transmission is that
// of the plane wave, 0.9706, averaged over its spectrum.
func Example() {
	pade, err := propagate.NewPade(4)
	if err != nil {
		log.Fatal(err)
	}
	packet := propagate.Packet{Centre: -40, Length: 5, K0: 2}
	stepper, err := propagate.NewStepper(exampleMesh(), pade, 0.5, 2, packet)
	if err != nil {
		log.Fatal(err)
	}
	run := propagate.NewRun(stepper, propagate.Ending{
		Steps: 10000, Time: math.Inf(1),
		Settled: func(_ *propagate.Ledger, remaining, _ float64) bool { return remaining < 1e-8 },
	})
	status := run.Finish(context.Background())
	ledger := run.Ledger()
	fmt.Println(status)
	fmt.Printf("transmitted %.6f at %.3f\n", ledger.Right.Probability, ledger.Right.MeanTime())
	fmt.Printf("reflected   %.6f at %.2f\n", ledger.Left.Probability, ledger.Left.MeanTime())
	// Output:
	// settled
	// transmitted 0.968829 at 30.778
	// reflected   0.031171 at 66.15
}

// A run can be taken back to an earlier moment.
func ExampleStepper_Restore() {
	pade, err := propagate.NewPade(4)
	if err != nil {
		log.Fatal(err)
	}
	stepper, err := propagate.NewStepper(exampleMesh(), pade, 0.5, 2, propagate.Packet{Centre: -40, Length: 5, K0: 2})
	if err != nil {
		log.Fatal(err)
	}
	start := stepper.Save()
	for range 20 {
		stepper.Advance()
	}
	fmt.Println(stepper.Ledger().Time)
	stepper.Restore(start)
	fmt.Println(stepper.Ledger().Time)
	// Output:
	// 10
	// 0
}

// What the grid makes of the step at one energy, to be held against
// T = 4 k1 k2/(k1+k2)^2.
func ExampleScatterer() {
	exact, edged := propagate.NewScatterer(exampleMesh()).At(2, false)
	k1, k2 := 2.0, math.Sqrt2
	fmt.Printf("elements      %.8f\n", exact.Transmission)
	fmt.Printf("and edges     %.8f\n", edged.Transmission)
	fmt.Printf("closed form   %.8f\n", 4*k1*k2/((k1+k2)*(k1+k2)))
	// Output:
	// elements      0.97056275
	// and edges     0.97056275
	// closed form   0.97056275
}

// The first member of the family is the Crank-Nicolson step: it delays a wave
// of energy E by the factor 1 + (E dt)^2/4, the fifth member hardly at all.
func ExamplePade_SlopeError() {
	for _, member := range []int{1, 2, 5} {
		pade, err := propagate.NewPade(member)
		if err != nil {
			log.Fatal(err)
		}
		fmt.Printf("member %d: %.1e\n", member, pade.SlopeError(0.5))
	}
	// Output:
	// member 1: -5.9e-02
	// member 2: -4.2e-04
	// member 5: -1.1e-12
}

// A layout that would be too large is refused before it is built.
func ExampleSizeError() {
	structure, err := potential.Build(
		potential.Lead{Mass: 1}, potential.Lead{Mass: 1}, nil, potential.Options{})
	if err != nil {
		log.Fatal(err)
	}
	_, err = propagate.NewLayout(structure,
		propagate.Resolution{Order: 12, Phase: 8, Low: 0.5, High: 2, Height: 1e-8, MaxNodes: 100000},
		propagate.Extent{Left: -1e9, PlaneLeft: -1e9, PlaneRight: 10, Right: 10},
		propagate.Edge{}, propagate.Edge{})
	fmt.Println(err)
	// Output:
	// the packet road would need about 3e+09 grid nodes; the limit is 100000
}
