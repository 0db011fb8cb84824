package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"
)

// newRoot builds the command with its subcommands.
func newRoot() *cobra.Command {
	root := &cobra.Command{
		Use:   "fluxtoll",
		Short: "How much of a quantum packet crosses a layered structure, and when",
		Long: `fluxtoll answers, for one quantum packet on one layered structure, how much is
reflected, transmitted and lost, and when each part arrives. It takes two
numerical roads, a packet in time and averages of stationary scattering, and
says whether they agree within an error that is computed.`,
		Example: `  fluxtoll run collector-step
  fluxtoll demos --show collector-step > mine.toml
  fluxtoll run mine.toml --json`,
		Args:          subcommand,
		RunE:          func(cmd *cobra.Command, _ []string) error { return cmd.Help() },
		SilenceErrors: true,
		SilenceUsage:  true,
		Version:       version(),
	}
	root.SuggestionsMinimumDistance = 2
	root.SetVersionTemplate("{{.Version}}\n")
	root.SetFlagErrorFunc(func(cmd *cobra.Command, err error) error { return hinted(cmd, err.Error()) })
	root.AddCommand(newRun(), newCurve(), newResonances(), newPulse(), newWatch(), newDemos(), newTrust(), newVerify())
	refuseUnknownHelp(root)
	return root
}

// refuseUnknownHelp makes `help WORD` an error where WORD is no command.
func refuseUnknownHelp(root *cobra.Command) {
	root.InitDefaultHelpCmd()
	help, _, err := root.Find([]string{"help"})
	must(err)
	help.Args = func(_ *cobra.Command, args []string) error {
		if _, rest, err := root.Find(args); err != nil {
			return err
		} else if len(rest) > 0 {
			return subcommand(root, rest)
		}
		return nil
	}
}

// subcommand refuses words that are no command of the program.
func subcommand(cmd *cobra.Command, args []string) error {
	if len(args) == 0 {
		return nil
	}
	msg := fmt.Sprintf("%q is no command", args[0])
	if near := cmd.SuggestionsFor(args[0]); len(near) > 0 {
		msg += fmt.Sprintf("; did you mean %q?", near[0])
	}
	return hinted(cmd, msg)
}

// hinted is an error of usage with the way to what is accepted.
func hinted(cmd *cobra.Command, msg string) error {
	return fmt.Errorf("%s; '%s --help' says what is accepted", strings.TrimSpace(msg), cmd.CommandPath())
}

// exactly refuses any other number of arguments; wanted says what is wanted.
func exactly(n int, wanted string) cobra.PositionalArgs {
	return func(cmd *cobra.Command, args []string) error {
		if len(args) == n {
			return nil
		}
		return hinted(cmd, fmt.Sprintf("%s, and %d were given", wanted, len(args)))
	}
}
