package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"fluxtoll/scenarios"
)

// newTrust is the command `trust`.
func newTrust() *cobra.Command {
	ask := scenarios.TrustRequest{}
	within := percentage(1)
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "trust FILE|DEMO|-",
		Short: "Tell how far plane-wave numbers are off, and from which packet length on they hold",
		Long: `trust tells for every plane-wave number of a scenario how far it is off for this
packet, and from which packet length on (below which spread) it stays within a
percentage. The length is searched on stationary averages, from a fiftieth to a
thousand times the packet's own, and confirmed with packet runs there and on
both sides.

Where a plane-wave number is zero the percentage is of the whole packet (for a
probability) or of the time that the packet takes to pass a point, length/v0
(for a time).`,
		Example: `  fluxtoll trust thin-barrier
  fluxtoll trust mine.toml --within 0.1 --of dwell,reflected`,
		Args:              exactly(1, "one argument is wanted, a scenario file, a demo or -"),
		ValidArgsFunction: completeScenario,
		RunE: func(cmd *cobra.Command, args []string) error {
			file, err := openScenario(args[0], cmd.InOrStdin())
			if err != nil {
				return err
			}
			scenario, err := file.Compile()
			if err != nil {
				return err
			}
			ask.Within = float64(within)
			return trustScenario(cmd, scenario, ask, asJSON)
		},
	}
	cmd.Flags().Var(&within, "within", "how close is close enough, in `PERCENT`")
	cmd.Flags().StringSliceVar(&ask.Of, "of", nil, "confirm `QUANTITY`, several with commas between, or all, with packet runs (default transmitted, or reflected where nothing is transmitted)")
	cmd.Flags().BoolVar(&asJSON, "json", false, "print the result as one JSON document")
	return cmd
}

// percentage is a flag that takes a number with or without its sign.
type percentage float64

func (p *percentage) String() string { return short(float64(*p)) }
func (p *percentage) Type() string   { return "percent" }

func (p *percentage) Set(text string) error {
	v, err := strconv.ParseFloat(strings.TrimSpace(strings.TrimSuffix(strings.TrimSpace(text), "%")), 64)
	if err != nil || !(v >= 1e-6 && v <= 100) {
		return errors.New("a number of per cent from 1e-6 to 100 is accepted")
	}
	*p = percentage(v)
	return nil
}

// trustScenario computes and prints the answer, and returns its exit code.
func trustScenario(cmd *cobra.Command, s *scenarios.Scenario, ask scenarios.TrustRequest, asJSON bool) error {
	caught := interruptible(cmd.Context())
	defer caught.end()
	line := newProgressLine(cmd.ErrOrStderr())
	t, err := scenarios.Trustworthy(caught, s, ask, func(p scenarios.TrustProgress) { line.showTrust(p) })
	line.erase()
	var bad *scenarios.NoSuchNumber
	switch {
	case errors.Is(err, context.Canceled):
		fmt.Fprintln(cmd.ErrOrStderr(), "fluxtoll: interrupted before anything was found")
		return exitCode(caught.exitCode())
	case errors.As(err, &bad):
		return fmt.Errorf("--of: %w", err)
	case err != nil:
		return &shortfall{fmt.Errorf("%s: %w", named(s), err)}
	}
	if err := printTrust(cmd.OutOrStdout(), t, asJSON); err != nil {
		return err
	}
	return exitWith(trustCode(t.Verdict, caught.exitCode()))
}

// showTrust replaces the line, once the work has lasted long enough.
func (p *progressLine) showTrust(now scenarios.TrustProgress) {
	if time.Since(p.began) < quiet {
		return
	}
	if now.Fraction == 0 {
		p.write(fmt.Sprintf("searching the length: %d averages", now.Averages))
		return
	}
	p.write(fmt.Sprintf("confirming with packet runs: %3.0f %%, about %s left", 100*now.Fraction, duration(now.Left)))
}

func printTrust(w io.Writer, t *scenarios.Trust, asJSON bool) error {
	if asJSON {
		return writeJSON(w, t)
	}
	_, err := io.WriteString(w, trustReport(t))
	return err
}

// trustCode is the exit code of an outcome.
func trustCode(v scenarios.TrustVerdict, interrupted int) int {
	switch v {
	case scenarios.Confirmed:
		return exitDone
	case scenarios.Contradicted:
		return exitDisagree
	case scenarios.Unfinished:
		return interrupted
	}
	return exitNotReached
}
