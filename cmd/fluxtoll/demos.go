package main

import (
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"fluxtoll/scenarios"
)

// newDemos is the command `demos`.
func newDemos() *cobra.Command {
	var show string
	cmd := &cobra.Command{
		Use:   "demos",
		Short: "List the scenarios that come with the program, or show one",
		Long: `demos lists the scenarios that come with the program. With --show it prints the
file of one, to start your own from; a table that the scenario refers to is
shown by its own name.`,
		Example: `  fluxtoll demos
  fluxtoll demos --show thin-barrier > mine.toml`,
		Args: exactly(0, "no argument is wanted"),
		RunE: func(cmd *cobra.Command, _ []string) error {
			if cmd.Flags().Changed("show") {
				return showDemo(cmd.OutOrStdout(), show)
			}
			return listDemos(cmd.OutOrStdout())
		},
	}
	cmd.Flags().StringVar(&show, "show", "", "print the file of the demo `NAME`")
	must(cmd.RegisterFlagCompletionFunc("show", completeDemo))
	return cmd
}

// must panics on an error that only a mistake in this program can cause.
func must(err error) {
	if err != nil {
		panic("fluxtoll: " + err.Error())
	}
}

// listDemos prints names and titles.
func listDemos(w io.Writer) error {
	demos := scenarios.Demos()
	width := 0
	for _, d := range demos {
		width = max(width, len(d.Name))
	}
	var b strings.Builder
	for _, d := range demos {
		fmt.Fprintf(&b, "%-*s  %s\n", width, d.Name, d.Title)
	}
	_, err := io.WriteString(w, b.String())
	return err
}

// showDemo prints the bytes of a demo's file, or of a table of one.
func showDemo(w io.Writer, name string) error {
	text, err := demoText(name)
	if err != nil {
		return fmt.Errorf("--show: %w", err)
	}
	_, err = io.WriteString(w, text)
	return err
}

// demoText is the file of a demo, or a table of one.
func demoText(name string) (string, error) {
	for _, d := range scenarios.Demos() {
		if d.Name == name {
			return d.Text, nil
		}
		for _, t := range d.Tables {
			if t.Name == name {
				return t.Text, nil
			}
		}
	}
	_, err := scenarios.OpenDemo(name) // which says what there is
	return "", err
}

// completeDemo offers the names of the demos to the shell.
func completeDemo(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
	var names []string
	for _, d := range scenarios.Demos() {
		names = append(names, cobra.CompletionWithDesc(d.Name, d.Title))
	}
	return names, cobra.ShellCompDirectiveNoFileComp
}
