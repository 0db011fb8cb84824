package main

import (
	"math"
	"strconv"
	"strings"
)

// known writes v with the digits that an error of size e supports, and at most
// so many: the last digit shown is not larger than e. A value that e swamps
// keeps two digits. Small and large values are written with an exponent.
func known(v, e float64, most int) string {
	size := math.Abs(v)
	if v == 0 || size < 10*e {
		return brief(v)
	}
	digits := most
	if e > 0 {
		digits = min(most, exponentOf(size)+1+int(math.Ceil(-math.Log10(e))))
	}
	if size < 1e-3 || size >= 1e7 {
		return plainExponent(strconv.FormatFloat(v, 'e', digits-1, 64))
	}
	return strconv.FormatFloat(v, 'f', max(0, digits-1-exponentOf(size)), 64)
}

// exponentOf is the decimal exponent of a positive number.
func exponentOf(size float64) int { return int(math.Floor(math.Log10(size))) }

// brief writes a number with two digits, with an exponent where it is below
// 1e-3 or 1000 and more.
func brief(v float64) string {
	size := math.Abs(v)
	switch {
	case v == 0:
		return "0"
	case size >= 9.95e-4 && size < 999.5:
		return strconv.FormatFloat(v, 'f', max(0, 1-exponentOf(size)), 64)
	}
	return plainExponent(strconv.FormatFloat(v, 'e', 1, 64))
}

// short writes a setting with at most four digits, none of them superfluous.
func short(v float64) string { return plainExponent(strconv.FormatFloat(v, 'g', 4, 64)) }

// plainExponent writes e-9 for e-09 and e6 for e+06.
func plainExponent(s string) string {
	mantissa, exponent, ok := strings.Cut(s, "e")
	if !ok {
		return s
	}
	n, err := strconv.Atoi(exponent)
	if err != nil {
		return s
	}
	return mantissa + "e" + strconv.Itoa(n)
}
