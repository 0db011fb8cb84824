package canvas

import "fmt"

// Style is the role of what is drawn. Only the roles of flow have a hue: one
// for what goes right, one for what goes left (blue and orange, which every
// kind of colour vision tells apart: M. Okabe and K. Ito, Color Universal
// Design (2002)). What they say stands in characters, too.
type Style uint8

// The styles.
const (
	Plain     Style = iota
	Faint           // captions and scales
	Strong          // what matters most
	Right           // flows to the right
	RightSoft       // mostly to the right
	Still           // stands
	LeftSoft
	Left
	Body  // the structure
	Band  // the packet's energies
	Ghost // the free packet
	Picked
	styles
)

// Depth is how many colours there are.
type Depth uint8

// The depths.
const (
	NoColor Depth = iota // no code at all
	Colors16
	Colors256
	TrueColor
)

// codes lists the parameters of the SGR sequence of every style, by depth.
func codes(d Depth) [styles]string {
	switch d {
	case Colors16:
		return [styles]string{
			Faint: "2", Strong: "1", Right: "36", RightSoft: "36", Still: "", LeftSoft: "33", Left: "33",
			Body: "37", Band: "2", Ghost: "2", Picked: "7",
		}
	case Colors256:
		return [styles]string{
			Faint: "38;5;244", Strong: "1", Right: "38;5;32", RightSoft: "38;5;67", Still: "38;5;246",
			LeftSoft: "38;5;137", Left: "38;5;172", Body: "38;5;102", Band: "38;5;246", Ghost: "38;5;244", Picked: "7",
		}
	case TrueColor:
		return [styles]string{
			Faint: rgb(Faint), Strong: "1", Right: rgb(Right), RightSoft: rgb(RightSoft), Still: rgb(Still),
			LeftSoft: rgb(LeftSoft), Left: rgb(Left), Body: rgb(Body), Band: rgb(Band), Ghost: rgb(Ghost), Picked: "7",
		}
	}
	return [styles]string{}
}

// hex is the colour of a style for true colour and SVG. All have a middle
// luminance: they read on a dark and on a light ground.
func hex(s Style) string {
	switch s {
	case Right:
		return "2f8fd0"
	case RightSoft:
		return "6589ac"
	case Left:
		return "d98200"
	case LeftSoft:
		return "ac8455"
	case Still, Band:
		return "909090"
	case Body:
		return "85918a"
	case Faint, Ghost:
		return "808080"
	}
	return ""
}

// rgb is the SGR parameter of a style's colour.
func rgb(s Style) string {
	var r, g, b int
	if _, err := fmt.Sscanf(hex(s), "%02x%02x%02x", &r, &g, &b); err != nil {
		panic("canvas: a style has no colour")
	}
	return fmt.Sprintf("38;2;%d;%d;%d", r, g, b)
}
