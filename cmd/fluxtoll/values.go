package main

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// mostCount bounds the limits that a user may set.
const mostCount = math.MaxInt32

// wholeNumber is a flag that takes a whole number from low to high; 0 means
// that it was not given.
type wholeNumber struct{ value, low, high int }

func (n *wholeNumber) String() string { return shown(n.value) }
func (n *wholeNumber) Type() string   { return "int" }

func (n *wholeNumber) Set(text string) error {
	v, err := strconv.Atoi(text)
	if err != nil || v < n.low || v > n.high {
		return fmt.Errorf("a whole number from %d to %d is accepted", n.low, n.high)
	}
	n.value = v
	return nil
}

// shown is the default that the help shows: none.
func shown(v int) string {
	if v == 0 {
		return ""
	}
	return strconv.Itoa(v)
}

// byteSize is a flag that takes a number of bytes; 0 means not given.
type byteSize struct{ value int }

func (b *byteSize) String() string { return shown(b.value) }
func (b *byteSize) Type() string   { return "bytes" }

func (b *byteSize) Set(text string) error {
	digits := strings.TrimRight(text, "kKMGTiB ")
	size, known := byteUnits()[strings.TrimSpace(text[len(digits):])]
	v, err := strconv.ParseFloat(digits, 64)
	if bytes := v * size; known && err == nil && bytes >= 1 && bytes <= 1<<50 {
		b.value = int(bytes)
		return nil
	}
	return fmt.Errorf("a number of bytes up to 1024 TiB is accepted, plain or with kB, MB, GB, TB (powers of 1000) or KiB, MiB, GiB, TiB (powers of 1024)")
}

// byteUnits are the suffixes of a number of bytes.
func byteUnits() map[string]float64 {
	return map[string]float64{
		"": 1, "B": 1, "kB": 1e3, "MB": 1e6, "GB": 1e9, "TB": 1e12,
		"KiB": 1 << 10, "MiB": 1 << 20, "GiB": 1 << 30, "TiB": 1 << 40,
	}
}
