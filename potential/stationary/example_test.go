package stationary_test

import (
	"context"
	"fmt"

	"fluxtoll/potential"
	"fluxtoll/potential/stationary"
)

// barrier is a rectangular barrier of height 1 and thickness 3.
func barrier() *potential.Structure {
	lead := potential.Lead{Mass: 1}
	s, err := potential.Build(lead, lead, []potential.Layer{
		{Thickness: 3, Shape: potential.Flat{Height: 1}, Mass: 1},
	}, potential.Options{})
	if err != nil {
		panic(err)
	}
	return s
}

func ExampleSolver_At() {
	solver := stationary.New(barrier(), false)
	var a stationary.Amplitudes
	for _, energy := range []float64{0.5, 1, 1.5} {
		if err := solver.At(energy, &a); err != nil {
			fmt.Println(err)
			return
		}
		fmt.Printf("E = %.1f: T = %.6f, delay %.4f, dwell %.4f\n",
			energy, a.Transmission, a.GroupDelayTransmitted, a.Dwell)
	}
	// Output:
	// E = 0.5: T = 0.009866, delay 1.9901, dwell 0.9951
	// E = 1.0: T = 0.181818, delay 2.8927, dwell 2.6999
	// E = 1.5: T = 0.993405, delay 3.4947, dwell 3.5214
}

func ExampleSolver_Average() {
	// A packet of length 10 (standard deviation of |psi|^2) and mean wave
	// number 1, so of mean energy 0.5.
	packet := stationary.Spectrum{K0: 1, Width: 1.0 / 20}
	a, err := stationary.New(barrier(), false).Average(context.Background(), packet, stationary.Options{})
	if err != nil {
		fmt.Println(err)
		return
	}
	fmt.Printf("transmitted %.8f, known to 1e-10 of it: %v\n",
		a.Transmitted.Value, a.Transmitted.Error < 1e-10*a.Transmitted.Value)
	fmt.Printf("what is transmitted is faster: 1/v = %.4f against %.4f\n",
		a.SlownessInTransmitted.Value, a.SlownessFree.Value)
	// Output:
	// transmitted 0.01037227, known to 1e-10 of it: true
	// what is transmitted is faster: 1/v = 0.9875 against 1.0025
}
