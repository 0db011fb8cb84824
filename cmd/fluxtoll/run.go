package main

import (
	"context"
	"errors"
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"fluxtoll/scenarios"
)

// newRun is the command `run`.
func newRun() *cobra.Command {
	var force forcing
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "run FILE|DEMO|-",
		Short: "Compute one scenario on both roads and compare them",
		Long: `run computes one scenario on both roads and says whether they agree.

The scenario is a file, a demo ('fluxtoll demos' lists them), or - for standard
input. A file is taken before a demo of the same name. Every numerical setting
is chosen from the tolerance and reported; the flags below force it, for study.
Quantities are written as in a scenario file: with a unit, or as plain numbers
where the scenario is in natural units.`,
		Example: `  fluxtoll run collector-step
  fluxtoll run mine.toml --json
  fluxtoll run thin-barrier --pade 1 --time-step "0.2 fs"`,
		Args:              exactly(1, "one argument is wanted, a scenario file, a demo or -"),
		ValidArgsFunction: completeScenario,
		RunE: func(cmd *cobra.Command, args []string) error {
			scenario, forced, err := prepare(args[0], cmd.InOrStdin(), &force)
			if err != nil {
				return err
			}
			return runScenario(cmd, scenario, forced, asJSON)
		},
	}
	cmd.Flags().BoolVar(&asJSON, "json", false, "print the result as one JSON document")
	force.add(cmd)
	return cmd
}

// prepare opens a scenario, applies the flags and compiles it.
func prepare(name string, stdin io.Reader, force *forcing) (*scenarios.Scenario, scenarios.Forced, error) {
	file, err := openScenario(name, stdin)
	if err != nil {
		return nil, scenarios.Forced{}, err
	}
	if err := force.change(file); err != nil {
		return nil, scenarios.Forced{}, err
	}
	scenario, err := file.Compile()
	if err != nil {
		return nil, scenarios.Forced{}, force.named(err)
	}
	forced, err := force.forced(file.Natural, scenario.Scale)
	return scenario, forced, err
}

// runScenario takes both roads, prints the result and returns the verdict as
// an exit code.
func runScenario(cmd *cobra.Command, s *scenarios.Scenario, forced scenarios.Forced, asJSON bool) error {
	caught := interruptible(cmd.Context())
	defer caught.end()
	result, err := compute(caught, s, forced, cmd.ErrOrStderr())
	switch {
	case errors.Is(err, context.Canceled):
		fmt.Fprintln(cmd.ErrOrStderr(), "fluxtoll: interrupted before the packet started")
		return exitCode(caught.exitCode())
	case err != nil:
		return &shortfall{fmt.Errorf("%s: %w", named(s), err)}
	}
	if err := printResult(cmd.OutOrStdout(), result, asJSON); err != nil {
		return err
	}
	return exitWith(verdictCode(result.Verdict, caught.exitCode()))
}

// named is what a message calls a scenario.
func named(s *scenarios.Scenario) string {
	if s.Title == "" {
		return "the scenario"
	}
	return s.Title
}

// compute takes both roads and shows progress meanwhile.
func compute(ctx context.Context, s *scenarios.Scenario, forced scenarios.Forced, stderr io.Writer) (*scenarios.Result, error) {
	line := newProgressLine(stderr)
	defer line.erase()
	ready := line.waiting("averaging over the packet's spectrum, planning the grid")
	trial, err := scenarios.Prepare(ctx, s, forced)
	ready()
	if err != nil {
		return nil, err
	}
	return trial.Finish(ctx, line.show), nil
}

func printResult(w io.Writer, r *scenarios.Result, asJSON bool) error {
	if asJSON {
		return writeJSON(w, r)
	}
	_, err := io.WriteString(w, report(r))
	return err
}

// completeScenario offers demos and files to the shell.
func completeScenario(cmd *cobra.Command, args []string, word string) ([]string, cobra.ShellCompDirective) {
	if len(args) > 0 {
		return nil, cobra.ShellCompDirectiveNoFileComp
	}
	demos, _ := completeDemo(cmd, args, word)
	return demos, cobra.ShellCompDirectiveDefault
}
