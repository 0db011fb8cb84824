package main

import (
	"context"
	"errors"
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"fluxtoll/scenarios"
)

// pulseFlags are the flags that only `pulse` has.
type pulseFlags struct {
	asJSON bool
	csv    csvTable
	points wholeNumber
}

// newPulse is the command `pulse`.
func newPulse() *cobra.Command {
	var force forcing
	f := pulseFlags{points: wholeNumber{value: 201, low: 2, high: 20001}}
	cmd := &cobra.Command{
		Use:   "pulse FILE|DEMO|-",
		Short: "Show the outgoing pulses, and scattering against energy from one packet",
		Long: `pulse steps the packet of a scenario once and reads off it what passes both
planes: the pulse against time with its parts, width and energies, why it comes
early or late, and transmission, reflection and delays at every energy of its
band, held against the stationary ones.

Where the scenario leaves start and near plane open they are placed farther off
than run places them, so that single energies can be told.`,
		Example: `  fluxtoll pulse thin-barrier
  fluxtoll pulse mine.toml --csv > flow.csv
  fluxtoll pulse mine.toml --csv=energy --points 500`,
		Args:              exactly(1, "one argument is wanted, a scenario file, a demo or -"),
		ValidArgsFunction: completeScenario,
		RunE: func(cmd *cobra.Command, args []string) error {
			if f.asJSON && f.csv != "" {
				return hinted(cmd, "--csv and --json exclude each other")
			}
			scenario, forced, err := prepare(args[0], cmd.InOrStdin(), &force)
			if err != nil {
				return err
			}
			return runPulse(cmd, scenario, forced, f)
		},
	}
	cmd.Flags().BoolVar(&f.asJSON, "json", false, "print the result as one JSON document")
	cmd.Flags().Var(&f.csv, "csv", "print a `TABLE` as CSV: flow (against time) or energy")
	cmd.Flags().Lookup("csv").NoOptDefVal = string(csvFlow)
	cmd.Flags().Var(&f.points, "points", "number `N` of energies")
	force.add(cmd)
	return cmd
}

// csvTable is a flag that names a table.
type csvTable string

// The tables.
const (
	csvFlow   csvTable = "flow"
	csvEnergy csvTable = "energy"
)

func (c *csvTable) String() string { return string(*c) }
func (c *csvTable) Type() string   { return "table" }

func (c *csvTable) Set(text string) error {
	switch v := csvTable(text); v {
	case csvFlow, csvEnergy:
		*c = v
		return nil
	}
	return fmt.Errorf("flow or energy is accepted")
}

// runPulse steps the packet, prints what it says and returns the verdict as an
// exit code.
func runPulse(cmd *cobra.Command, s *scenarios.Scenario, forced scenarios.Forced, f pulseFlags) error {
	caught := interruptible(cmd.Context())
	defer caught.end()
	r, err := computePulse(caught, s, forced, f.points.value, cmd.ErrOrStderr())
	switch {
	case errors.Is(err, context.Canceled):
		fmt.Fprintln(cmd.ErrOrStderr(), "fluxtoll: interrupted before the packet started")
		return exitCode(caught.exitCode())
	case err != nil:
		return &shortfall{fmt.Errorf("%s: %w", named(s), err)}
	}
	if err := printPulse(cmd.OutOrStdout(), r, f); err != nil {
		return err
	}
	return exitWith(verdictCode(r.Verdict, caught.exitCode()))
}

// computePulse takes both roads and shows progress meanwhile.
func computePulse(ctx context.Context, s *scenarios.Scenario, forced scenarios.Forced, points int, stderr io.Writer) (*scenarios.PulseReport, error) {
	line := newProgressLine(stderr)
	defer line.erase()
	trial, err := scenarios.PreparePulse(ctx, s, forced)
	if err != nil {
		return nil, err
	}
	return trial.FinishPulses(ctx, line.show, points)
}

func printPulse(w io.Writer, r *scenarios.PulseReport, f pulseFlags) error {
	switch {
	case f.asJSON:
		return writeJSON(w, r)
	case f.csv == csvFlow:
		return writeFlow(w, r)
	case f.csv == csvEnergy:
		return writeEnergies(w, r)
	}
	_, err := io.WriteString(w, pulseReport(r))
	return err
}
