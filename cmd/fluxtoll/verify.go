package main

import (
	"context"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"fluxtoll/scenarios/published"
)

// newVerify is the command `verify`.
func newVerify() *cobra.Command {
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "verify",
		Short: "Compute published cases on this machine and compare",
		Long: `verify computes scattering problems with published answers on this machine and
prints, for each, the source, the number expected, the number found and the
error. It exits 1 if one fails.`,
		Args: exactly(0, "no argument is wanted"),
		RunE: func(cmd *cobra.Command, _ []string) error {
			v, err := verify(cmd.Context())
			if err != nil {
				return &shortfall{err}
			}
			if asJSON {
				err = writeJSON(cmd.OutOrStdout(), v)
			} else {
				_, err = io.WriteString(cmd.OutOrStdout(), v.text())
			}
			if err == nil && v.Failed > 0 {
				err = exitCode(exitDisagree)
			}
			return err
		},
	}
	cmd.Flags().BoolVar(&asJSON, "json", false, "print the table as one JSON document")
	return cmd
}

// verification is the table that verify prints.
type verification struct {
	Format  string              `json:"format"`
	Version string              `json:"version"`
	Passed  int                 `json:"passed"`
	Failed  int                 `json:"failed"`
	Cases   []published.Outcome `json:"cases"`
}

// verify computes every case.
func verify(ctx context.Context) (*verification, error) {
	v := &verification{Format: "fluxtoll.verify/1", Version: version()}
	for _, c := range published.Cases() {
		list, err := c.Run(ctx)
		if err != nil {
			return nil, err
		}
		for _, o := range list {
			if o.Pass {
				v.Passed++
			} else {
				v.Failed++
			}
		}
		v.Cases = append(v.Cases, list...)
	}
	return v, nil
}

// text is the table for a person: under each case its source, and a line for
// each number.
func (v *verification) text() string {
	var b strings.Builder
	for i, rows := 0, 0; i < len(v.Cases); i += rows {
		rows = sameCase(v.Cases[i:])
		b.WriteString(caseText(v.Cases[i : i+rows]))
	}
	fmt.Fprintf(&b, "%d numbers, %d passed, %d failed\n", v.Passed+v.Failed, v.Passed, v.Failed)
	return b.String()
}

// sameCase counts the outcomes of the first case of a list.
func sameCase(list []published.Outcome) int {
	n := 1
	for n < len(list) && list[n].Case == list[0].Case {
		n++
	}
	return n
}

// caseText is one case.
func caseText(list []published.Outcome) string {
	source := list[0].Source
	if list[0].FromMemory {
		source += " (from memory)"
	}
	t := table{{unitHeading(list), "", "expected", "found", "error", "allowed", ""}}
	for _, o := range list {
		t = append(t, outcomeRow(o))
	}
	return list[0].Case + "\n" + paragraph("source", source) + t.String() + "\n"
}

// unitHeading names the unit of the times or energies among the outcomes, if
// there is one; no case has both.
func unitHeading(list []published.Outcome) string {
	for _, o := range list {
		switch {
		case o.Unit == "":
		case o.Road == published.States || o.Road == published.Elements:
			return "energies in " + o.Unit
		default:
			return timesIn(o.Unit)
		}
	}
	return ""
}

func outcomeRow(o published.Outcome) []string {
	const room = 11
	row := []string{
		o.Quantity, fmt.Sprintf("%-10s", o.Road), cell(&o.Expected, o.Allowed, room), cell(o.Found, o.Allowed, room),
		"-", brief(o.Allowed), "FAIL",
	}
	if o.Error != nil {
		row[4] = brief(*o.Error)
	}
	if o.Pass {
		row[6] = "pass"
	}
	return row
}
