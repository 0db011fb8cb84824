// Command fluxtoll answers, for one quantum packet on one layered structure,
// how much of it is reflected, transmitted and lost, and when, on two
// independent numerical roads, and says whether they agree.
//
// It parses, calls package scenarios, and prints: results on standard output,
// everything else on standard error. It asks the terminal nothing.
//
// # Exit codes
//
//	0    done, and the roads agree (verify: every case passes)
//	1    the roads do not agree (verify: a case fails)
//	2    the request is wrong, or the output could not be written
//	3    the tolerance was not reached within the limits
//	130  interrupted (143 by SIGTERM); what was measured so far is printed
//
// A reader that closes the pipe early ends the program by SIGPIPE (141 in a
// shell), without a word.
package main
