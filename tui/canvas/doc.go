// Package canvas is a grid of terminal cells that are drawn on by character or
// by braille dot (two across and four down in a cell), and are written out as
// text with colour codes only where the colour changes, as ASCII, or as SVG.
//
// A cell shows what was drawn on it last: a character, or dots that add up.
// Nothing here asks the terminal anything.
package canvas
