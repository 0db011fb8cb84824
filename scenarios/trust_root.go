package scenarios

import "math"

// point is a point of a curve.
type point struct{ x, y float64 }

// isHump reports whether the middle one of three neighbours is the highest.
func isHump(p [3]point) bool { return p[1].y >= p[0].y && p[1].y >= p[2].y }

// vertex is the top of the parabola through three points that are a hump, not
// all of one height.
func vertex(p [3]point) point {
	a, b := (p[1].y-p[0].y)/(p[1].x-p[0].x), (p[2].y-p[1].y)/(p[2].x-p[1].x)
	c := (b - a) / (p[2].x - p[0].x)
	x := (p[0].x + p[1].x - a/c) / 2
	return point{x, p[0].y + (x-p[0].x)*(a+c*(x-p[1].x))}
}

// summit is the highest point found on a hump that may reach above zero: by
// successive parabolas.
func (t *trustSearch) summit(number int, p [3]point) (point, error) {
	const (
		most = 8
		near = 0.05 // of what is allowed: lower humps than that stay below
	)
	for range most {
		top := vertex(p)
		if !(top.y > -near*t.within) || p[1].y > 0 || math.Abs(top.x-p[1].x) < 1e-6 {
			break
		}
		var err error
		if top.y, err = t.excess(number, top.x); err != nil {
			return p[1], err
		}
		p = around(p, top)
	}
	return p[1], nil
}

// around keeps of three points and one between them the highest and its
// neighbours; x falls from the first to the last.
func around(p [3]point, q point) [3]point {
	four := [4]point{p[0], p[1], q, p[2]}
	if q.x > p[1].x {
		four[1], four[2] = q, p[1]
	}
	if four[1].y >= four[2].y {
		return [3]point{four[0], four[1], four[2]}
	}
	return [3]point{four[1], four[2], four[3]}
}

// illinois finds the zero of f between a and b, where f has opposite signs, by
// the false position with halved weights (M. Dowell and P. Jarratt, BIT 11,
// 168 (1971)), to a billionth of what f is at first.
func illinois(f func(float64) (float64, error), a, b float64) (float64, error) {
	const most, small = 60, 1e-9
	fa, err := f(a)
	if err != nil {
		return 0, err
	}
	fb, err := f(b)
	if err != nil {
		return 0, err
	}
	least := small * (math.Abs(fa) + math.Abs(fb))
	for range most {
		c := b - fb*(b-a)/(fb-fa)
		fc, err := f(c)
		if err != nil || math.Abs(fc) <= least {
			return c, err
		}
		if (fc > 0) != (fb > 0) {
			a, fa = b, fb
		} else {
			fa /= 2
		}
		b, fb = c, fc
	}
	return b, nil
}
