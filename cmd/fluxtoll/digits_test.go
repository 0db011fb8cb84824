package main

import (
	"math"
	"strconv"
	"testing"
)

func TestKnown(t *testing.T) {
	for _, c := range []struct {
		v, e float64
		most int
		want string
	}{
		{0.0223421004, 4e-9, 15, "0.022342100"},
		{0.977657899, 4e-9, 15, "0.977657899"},
		{-120.829331, 1.7e-5, 15, "-120.82933"},
		{120.829331, 1.7e-5, 6, "120.829"},
		{6.33567e-6, 5e-11, 15, "6.33567e-6"},
		{123456789, 30, 15, "1.2345679e8"},
		{123.4, 30, 15, "123"},
		{1e-20, 1e-9, 15, "1.0e-20"},
		{0, 1e-9, 15, "0"},
		{0.1, 0, 15, "0.100000000000000"},
		{1, 1e-3, 15, "1.000"},
	} {
		if got := known(c.v, c.e, c.most); got != c.want {
			t.Errorf("known(%v, %v, %d) = %q, want %q", c.v, c.e, c.most, got, c.want)
		}
	}
}

// TestKnownRounds checks for many sizes that what is shown is as close as
// promised: not further than the error from the value, or, where the error
// swamps the value, than two digits of it.
func TestKnownRounds(t *testing.T) {
	for v := 1e-12; v < 1e9; v *= 1.37 {
		for e := 1e-14; e < 1e3; e *= 3.1 {
			text := known(v, e, 15)
			shown, err := strconv.ParseFloat(text, 64)
			if err != nil {
				t.Fatal(err)
			}
			limit := e
			if v < 10*e {
				limit = 0.051 * v // two digits: half of a tenth, and rounding
			}
			if !(math.Abs(shown-v) <= limit+1e-14*v) { // 15 digits at most
				t.Errorf("known(%v, %v) = %s is off by %.1e", v, e, text, math.Abs(shown-v))
			}
		}
	}
}

func TestBrief(t *testing.T) {
	for v, want := range map[float64]string{
		0: "0", 1: "1.0", -13.2: "-13", 998: "998", 1700: "1.7e3", 0.069: "0.069",
		9.94e-4: "9.9e-4", 4e-9: "4.0e-9", -1.26e-10: "-1.3e-10",
	} {
		if got := brief(v); got != want {
			t.Errorf("brief(%v) = %q, want %q", v, got, want)
		}
	}
}
