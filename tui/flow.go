package tui

import "fluxtoll/tui/canvas"

// Parts of the flow that the density would carry at the packet's speed, from
// which it counts as going somewhere, and as going there altogether.
const (
	someFlow = 0.08
	fullFlow = 0.55
)

// flowStyle is the style of a flow in [-1, 1].
func flowStyle(f float64) canvas.Style {
	switch {
	case f >= fullFlow:
		return canvas.Right
	case f >= someFlow:
		return canvas.RightSoft
	case f <= -fullFlow:
		return canvas.Left
	case f <= -someFlow:
		return canvas.LeftSoft
	}
	return canvas.Still
}

// flowSign is the same as a character, for eyes and terminals without colour.
func flowSign(f float64) rune {
	switch {
	case f >= fullFlow:
		return '»'
	case f >= someFlow:
		return '›'
	case f <= -fullFlow:
		return '«'
	case f <= -someFlow:
		return '‹'
	}
	return '·'
}
