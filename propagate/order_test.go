package propagate

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// refinementRun is one line of a table of errors.
type refinementRun struct{ dt, err float64 }

// checkOrder requires that the errors fall as dt^order: the slope between any
// two neighbours, on the true ratio of the steps, lies within tol of it on
// both sides. The table is printed on failure.
func checkOrder(t *testing.T, what string, runs []refinementRun, order int, tol float64) {
	t.Helper()
	var table strings.Builder
	bad := len(runs) < 4
	for i, r := range runs {
		fmt.Fprintf(&table, "dt %8.5f  error %.3e", r.dt, r.err)
		if i > 0 {
			slope := math.Log(r.err/runs[i-1].err) / math.Log(r.dt/runs[i-1].dt)
			fmt.Fprintf(&table, "  slope %.3f", slope)
			bad = bad || !(math.Abs(slope-float64(order)) <= tol)
		}
		table.WriteByte('\n')
	}
	if bad {
		t.Errorf("%s: slopes are not %d within %g\n%s", what, order, tol, &table)
	}
}

// Phases are counted from 0 in these tests, so that E dt of the packet, about
// 2 dt, rules the error; each member's steps keep it well above rounding and
// the next term of the error, of relative size (E dt)^2/10, small.

func TestOrderInTimeOfPsi(t *testing.T) {
	const time = 24 // the packet stands on the barrier
	base := barrierSetup().closed()
	// The cut tail of a nearer packet would meet the jumps and make waves of
	// high energy, whose phases are wrong for any step.
	base.origin, base.packet.Centre, base.packet.Length = 0, -50, 3.5
	wave := func(member, steps int) (*Mesh, wave) {
		s := base
		s.pade, s.dt = member, float64(time)/float64(steps)
		stepper := s.stepper(t)
		advance(stepper, time)
		return stepper.Mesh, stepper.psi
	}
	mesh, exact := wave(MaxPade, 480)
	for member, counts := range map[int][]int{
		1: {960, 1360, 1920, 2880},
		2: {170, 240, 340, 480},
		3: {60, 85, 120, 170},
		4: {40, 57, 80, 113},
		5: {36, 44, 54, 66},
	} {
		var runs []refinementRun
		for _, n := range counts {
			_, psi := wave(member, n)
			runs = append(runs, refinementRun{float64(time) / float64(n), gap(mesh, psi, exact)})
		}
		checkOrder(t, fmt.Sprintf("member %d: psi", member), runs, 2*member, 0.2)
	}
}

func TestOrderInTimeOfWhatIsMeasured(t *testing.T) {
	base := barrierSetup()
	base.origin = 0
	base.pade, base.dt = MaxPade, 0.1
	exact := base.finished(t, 500).Ledger().Clone()
	for member, steps := range map[int][]float64{
		1: {0.06, 0.04, 0.03, 0.02},
		2: {0.14, 0.1, 0.07, 0.05},
		3: {0.3, 0.25, 0.2, 0.15},
		4: {0.6, 0.5, 0.4, 0.35},
		5: {0.8, 0.7, 0.6, 0.5},
	} {
		var right, left, dwell []refinementRun
		for _, dt := range steps {
			s := base
			s.pade, s.dt = member, dt
			l := s.finished(t, 500).Ledger()
			right = append(right, refinementRun{dt, math.Abs(l.Right.MeanTime() - exact.Right.MeanTime())})
			left = append(left, refinementRun{dt, math.Abs(l.Left.MeanTime() - exact.Left.MeanTime())})
			dwell = append(dwell, refinementRun{dt, math.Abs(l.TotalDwell() - exact.TotalDwell())})
		}
		what := fmt.Sprintf("member %d: ", member)
		checkOrder(t, what+"arrival of what is transmitted", right, 2*member, 0.3)
		checkOrder(t, what+"arrival of what is reflected", left, 2*member, 0.3)
		checkOrder(t, what+"dwell", dwell, 2*member, 0.3)
	}
}
