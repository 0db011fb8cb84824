// Package tui is the live view of a trial in the terminal: it shows a packet
// while it moves, and lets the user stop it, turn time back and change the
// scenario. It computes no physics; package scenarios says what there is to
// see, package player when.
//
// # The parts
//
// A player (tui/player) owns the trial in a goroutine of its own and leaves
// the newest frame in a mailbox. A Model keeps that frame and how to look at
// it; Update obeys keys by the key map (keys.go), which is also the source of
// the help, and View draws the frame on a canvas (tui/canvas).
//
// # The screen
//
// From top to bottom: a header; the stage, with the density over the course
// of the height; the tally, where the probability is; and a row with arrivals,
// spectrum and numbers. What does not fit gives way in this order: spectrum,
// arrivals, numbers, tally. Below 24 x 6 characters one line is left.
//
// # Colour
//
// Colour says which way probability flows and nothing else: blue to the right,
// orange to the left, grey where it stands. The same stands in characters
// below the density. How many colours there are is read from the environment;
// the terminal is never asked anything.
//
// # What is promised
//
// The numbers shown at the end are those of the run command, bit for bit,
// however the run was watched. A frame costs less than 1.5 ms and 12 kB at
// 200x60 (BenchmarkFrame200x60, TestBytesOfAFrame). A slow terminal misses
// frames and holds nothing up. The memory for going back is bounded
// (scenarios.MostKept, scenarios.MostKeptBytes). The terminal is left as it
// was found after a signal, a panic and the end of the terminal itself.
package tui
