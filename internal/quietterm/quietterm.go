// Package quietterm keeps the terminal from being asked for its background
// colour before main runs.
//
// The screen library does that in its package initialisation, and a terminal
// that does not answer costs five seconds and swallows keys. Go initialises
// the packages that are ready in the order of their import paths, and this
// path sorts before that library's, so the answer is given first: import this
// package wherever the library is imported.
package quietterm

import "github.com/charmbracelet/lipgloss"

func init() { lipgloss.SetHasDarkBackground(true) }
