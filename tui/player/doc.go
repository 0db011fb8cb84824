// Package player runs a trial in a goroutine of its own, at the pace that the
// viewer chose, and leaves the newest frame in a mailbox.
//
// The viewer never waits for the player and the player never waits for the
// viewer: a frame that nobody took is replaced. Every frame carries the number
// of the scenario it belongs to, so that one that was under way when the
// scenario changed is recognised.
//
// The player changes nothing in the numbers: it only decides when the next
// tick of a scenarios.Live is taken.
package player
