package tui

import "testing"

// No digit is written that the error reaches, and never more than four.
func TestCertainDigits(t *testing.T) {
	for _, c := range []struct {
		v, err float64
		want   string
	}{
		{60.5678, 0, "60.57"}, {60.5678, 1e-9, "60.57"}, {60.5678, 0.05, "60.6"}, {60.5678, 0.5, "61"},
		{60.5678, 50, "6e+01"}, {-0.0123456, 1e-5, "-0.0123"},
	} {
		if got := certain(c.v, c.err); got != c.want {
			t.Errorf("%g with error %g: %s, want %s", c.v, c.err, got, c.want)
		}
	}
}
