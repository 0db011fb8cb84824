package scenarios

import (
	"fmt"
	"math"
	"testing"
)

// bells is a flow of three bells at 20, 50 and 80, in bins of a tenth up to an
// end.
func bells(end float64, heights [3]float64) (ends, flow []float64) {
	for i := range int(math.Round(end * 10)) {
		x, sum := (float64(i)+0.5)/10, 0.0
		for j, h := range heights {
			d := (x - 20 - 30*float64(j)) / 3
			sum += h * math.Exp(-d*d/2)
		}
		ends, flow = append(ends, float64(i+1)/10), append(flow, sum)
	}
	return ends, flow
}

// The bells are found where they were put, once their tops have passed; what
// is too low is left out and keeps its number, and one alone is no echo.
func TestEchoesAreTheBells(t *testing.T) {
	for _, c := range []struct {
		end      float64
		heights  [3]float64
		expected float64
		want     []int
	}{
		{100, [3]float64{1, 0.1, 0.01}, 1, []int{1, 2, 3}},
		{78, [3]float64{1, 0.1, 0.01}, 1, []int{1, 2}},
		{100, [3]float64{1, 1e-4, 0.01}, 1, []int{1, 3}},
		{100, [3]float64{1, 1e-4, 1e-4}, 1, nil},
		{100, [3]float64{1e-9, 1e-9, 1e-9}, 1, nil},
		{48, [3]float64{1, 0.1, 0.01}, 1, nil},
		{0, [3]float64{1, 1, 1}, 1, nil},
	} {
		ends, flow := bells(c.end, c.heights)
		got := echoes(ends, flow, c.expected)
		if len(got) != len(c.want) {
			t.Errorf("%v to %g: %+v, want %v", c.heights, c.end, got, c.want)
			continue
		}
		for i, e := range got {
			at, height := 30*float64(c.want[i])-10, c.heights[c.want[i]-1]
			// The top lies within the bin; it is a sixtieth of a bell's width off.
			if e.Number != c.want[i] || !(math.Abs(e.Time-at) < 0.1) || !(math.Abs(e.Height-height) < 1e-3*height) {
				t.Errorf("%v to %g: %+v, want %d at %g of %g", c.heights, c.end, e, c.want[i], at, height)
			}
		}
	}
}

// Between two thin walls the packet goes to and fro: what leaves through the
// near plane comes a round trip 2d/k0 after what the first wall reflects (mass
// 1; mechanics).
func TestLiveEchoBetweenTwoWalls(t *testing.T) {
	const d, k0 = 120.0, 2.0
	wall := "[[layer]]\nthickness = 0.4\nheight = 8\n"
	l := liveText(t, fmt.Sprintf("units = \"natural\"\n%s[[layer]]\nthickness = %g\nheight = 0\n%s[packet]\nenergy = %g\nlength = 12\n", wall, d, wall, k0*k0/2))
	for l.Tick() {
	}
	list := l.Moment(Window{-1, 1, 2}).First.NearEchoes
	if len(list) < 2 || list[0].Number != 1 || list[1].Number != 2 {
		t.Fatalf("echoes %+v, want two at least", list)
	}
	// The walls are 0.4 thick each, 0.8 of the way there and back, and the
	// packet spreads meanwhile: off by a sixth of its passage at a point,
	// length/k0 = 6, at most.
	if got, want := list[1].Time-list[0].Time, 2*d/k0; !(math.Abs(got-want) < 1) {
		t.Errorf("echo after %g, want %g", got, want)
	}
}
