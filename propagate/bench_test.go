package propagate

import (
	"testing"
	"time"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/cblas128"
)

// dense is the interior elimination done the plain way: one dense complex
// matrix for each element and factor, order-1 columns and order+1 rows (the
// interior and what it passes to the two faces).
type dense struct {
	matrix cblas128.General
	x, y   cblas128.Vector
}

func newDense(order int) dense {
	n := order - 1
	data := make([]complex128, (n+2)*n)
	for i := range data {
		data[i] = complex(1/float64(i+1), 0.5)
	}
	return dense{
		matrix: cblas128.General{Rows: n + 2, Cols: n, Stride: n, Data: data},
		x:      cblas128.Vector{N: n, Inc: 1, Data: make([]complex128, n)},
		y:      cblas128.Vector{N: n + 2, Inc: 1, Data: make([]complex128, n+2)},
	}
}

func (d dense) apply() { cblas128.Gemv(blas.NoTrans, 1, d.matrix, d.x, 0, d.y) }

// BenchmarkStep times a step of member 5 and, in the same loop, the dense
// complex kernel (gonum's Gemv) of the same sizes alone. Reported are
// nanoseconds for each node and solve, the best of all rounds since other
// work on the machine only ever adds time, and their ratio.
func BenchmarkStep(b *testing.B) {
	for _, c := range []struct {
		name  string
		setup setup
		order int
	}{
		{"step/order=8", stepSetup(), 8},
		{"step/order=12", stepSetup(), 12},
		{"step/order=16", stepSetup(), 16},
		{"mixed/order=12", mixedSetup(), 12},
	} {
		b.Run(c.name, func(b *testing.B) { benchmarkStep(b, c.setup, c.order) })
	}
}

func benchmarkStep(b *testing.B, s setup, order int) {
	s.order, s.phase = order, 0.6*float64(order)
	stepper := s.stepper(b)
	kernel, elements := newDense(order), stepper.Mesh.Elements()
	start, steps := stepper.Save(), 0
	best, bestDense := time.Hour, time.Hour
	b.ReportAllocs()
	for b.Loop() {
		began := time.Now()
		stepper.Advance()
		stepped := time.Now()
		for range s.pade * elements {
			kernel.apply()
		}
		best, bestDense = min(best, stepped.Sub(began)), min(bestDense, time.Since(stepped))
		// A packet that has left would make the arithmetic a special case.
		if steps++; steps%50 == 0 {
			rewind(stepper, start)
		}
	}
	solves := float64(s.pade * stepper.Mesh.Nodes())
	b.ReportMetric(float64(best.Nanoseconds())/solves, "ns/node/solve")
	b.ReportMetric(float64(bestDense.Nanoseconds())/solves, "dense-ns/node/solve")
	b.ReportMetric(float64(best)/float64(bestDense), "step/dense")
}

// rewind restores a state without allocating.
func rewind(s *Stepper, at State) {
	copy(s.psi.all, at.psi)
	s.ledger.Steps, s.ledger.Time = 0, 0
}

// BenchmarkSetUp times what a run costs before its first step.
func BenchmarkSetUp(b *testing.B) {
	for name, s := range map[string]setup{"step": stepSetup(), "mixed": mixedSetup()} {
		b.Run("mesh/"+name, func(b *testing.B) {
			for b.Loop() {
				s.mesh(b)
			}
		})
		b.Run("stepper/"+name, func(b *testing.B) {
			m := s.mesh(b)
			pade, _ := NewPade(s.pade)
			for b.Loop() {
				if _, err := NewStepper(m, pade, s.dt, s.origin, s.packet); err != nil {
					b.Fatal(err)
				}
			}
		})
		b.Run("scatter/"+name, func(b *testing.B) {
			scatterer := NewScatterer(s.mesh(b))
			for b.Loop() {
				scatterer.At(2, false)
			}
		})
	}
	b.Run("edge", func(b *testing.B) {
		s := stepSetup()
		goals := bandGoals(s, 300)
		for b.Loop() {
			ChooseEdge(s.entry, s.order, goals, 1e-8)
		}
	})
}

// bandGoals spreads n goals evenly over the band of a set-up.
func bandGoals(s setup, n int) []EdgeGoal {
	goals := make([]EdgeGoal, n)
	for i := range goals {
		goals[i] = EdgeGoal{s.low + (s.high-s.low)*float64(i)/float64(n-1), 1 / float64(n)}
	}
	return goals
}
