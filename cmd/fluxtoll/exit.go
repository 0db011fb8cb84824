package main

import (
	"fmt"

	"fluxtoll/scenarios"
)

// The exit codes; doc.go says what they mean.
const (
	exitDone        = 0
	exitDisagree    = 1
	exitBadRequest  = 2
	exitNotReached  = 3
	exitInterrupted = 130
	exitTerminated  = 143
)

// exitCode is the error of a command that has said all there is to say and
// only needs its exit code.
type exitCode int

func (c exitCode) Error() string { return fmt.Sprintf("exit code %d", int(c)) }

// exitWith is the error for an exit code: nil for success.
func exitWith(code int) error {
	if code == exitDone {
		return nil
	}
	return exitCode(code)
}

// shortfall is the error of a request that is right and could not be met.
type shortfall struct{ err error }

func (s *shortfall) Error() string { return s.err.Error() }
func (s *shortfall) Unwrap() error { return s.err }

// verdictCode is the exit code of a verdict; interrupted is the one of the
// signal that stopped the run, if one did.
func verdictCode(v scenarios.Verdict, interrupted int) int {
	switch v {
	case scenarios.Agrees:
		return exitDone
	case scenarios.Disagrees:
		return exitDisagree
	case scenarios.Incomplete:
		return interrupted
	}
	return exitNotReached
}
