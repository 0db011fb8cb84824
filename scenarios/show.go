package scenarios

import (
	"math"
	"strconv"
)

// inUnitOf states a size, which is in base units, in the unit of a quantity of
// the file.
func (f *File) inUnitOf(like Quantity, base float64) Quantity {
	if like.Unit == "" && !f.Natural {
		like.Unit = like.Kind.base(false)
	}
	like.Number = base / unitBase(like.Kind, like.Unit)
	return like
}

// digits rounds to six digits: to the nearest for toward 0, and otherwise so
// that the result is not below (toward > 0) or not above (toward < 0) v by
// more than rounding.
func digits(v float64, toward int) float64 {
	if v == 0 || math.IsInf(v, 0) {
		return v
	}
	near, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'g', 6, 64), 64)
	side := float64(toward) * (v - near)
	if side <= 1e-12*math.Abs(v) {
		return near
	}
	step := math.Pow(10, math.Floor(math.Log10(math.Abs(v)))-5)
	near, _ = strconv.ParseFloat(strconv.FormatFloat(near+float64(toward)*step, 'g', 6, 64), 64)
	return near
}

// round returns the quantity with its number rounded by digits.
func (q Quantity) round(toward int) Quantity {
	q.Number = digits(q.Number, toward)
	return q
}
