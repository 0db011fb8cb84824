package main

import (
	"fmt"
	"io"
	"math"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"fluxtoll/scenarios"
)

// newResonances is the command `resonances`.
func newResonances() *cobra.Command {
	var band bandFlags
	var asJSON bool
	cmd := &cobra.Command{
		Use:   "resonances FILE|DEMO|-",
		Short: "Resonances and bound states, with widths and lifetimes",
		Long: `resonances finds the complex poles of the amplitudes in a window of energies, and
the bound states below both leads. Each has its energy, its width and lifetime,
its partial widths to the left and to the right, and its share in each layer.

The argument principle counts the poles of the window, and the nodes of the
wave the bound states; the search is complete if as many were found. Each state that is narrow enough is
found again on the complex-scaled elements of the packet road. Without --from
and --to the window is the band of the packet.`,
		Example: `  fluxtoll resonances twin-barrier
  fluxtoll resonances mine.toml --from "20 meV" --to "500 meV" --json`,
		Args:              exactly(1, "one argument is wanted, a scenario file, a demo or -"),
		ValidArgsFunction: completeScenario,
		RunE: func(cmd *cobra.Command, args []string) error {
			return runResonances(cmd, &band, args[0], asJSON)
		},
	}
	band.add(cmd)
	cmd.Flags().BoolVar(&asJSON, "json", false, "print one JSON document")
	return cmd
}

func runResonances(cmd *cobra.Command, flags *bandFlags, name string, asJSON bool) error {
	scenario, band, err := flags.open(cmd, name)
	if err != nil {
		return err
	}
	caught := interruptible(cmd.Context())
	defer caught.end()
	r, err := scenario.Resonances(caught, band)
	if err != nil {
		return stopped(cmd, caught, err)
	}
	if asJSON {
		err = writeJSON(cmd.OutOrStdout(), r)
	} else {
		_, err = io.WriteString(cmd.OutOrStdout(), resonancesReport(r))
	}
	switch {
	case err != nil:
		return err
	case !r.Agrees:
		return exitCode(exitDisagree)
	case !r.Complete:
		return exitCode(exitNotReached)
	}
	return nil
}

// resonancesReport is the list for a person.
func resonancesReport(r *scenarios.Resonances) string {
	var b strings.Builder
	if r.Title != "" {
		b.WriteString(r.Title + "\n\n")
	}
	if r.Units.Energy != "" {
		fmt.Fprintf(&b, "energies and widths in %s, lifetimes in %s\n", r.Units.Energy, r.Units.Time)
	}
	b.WriteString(resonanceTable(r))
	if len(r.Bound) > 0 {
		b.WriteString("\n" + boundTable(r))
	}
	b.WriteString("\n" + paragraph("window", windowText(r)))
	b.WriteString(paragraph("bound", boundText(r)))
	b.WriteString(paragraph("elements", elementsText(r)))
	return b.String()
}

// roomy is how many characters a number of the tables may take.
const roomy = 12

// resonanceTable has a row for each resonance; the column of losses is left
// out where there are none.
func resonanceTable(r *scenarios.Resonances) string {
	lossy := slices.ContainsFunc(r.Resonances, func(x scenarios.Resonance) bool { return x.WidthLost > 0 })
	t := table{{"resonance", "width", "lifetime", "left", "right", "lost", "layers"}}
	for _, x := range r.Resonances {
		e := x.WidthError
		lifetime := "-"
		if x.Lifetime != nil {
			lifetime = curveCell(*x.Lifetime, *x.Lifetime*e/x.Width)
		}
		t = append(t, []string{
			cell(&x.Energy, math.Max(x.EnergyError, 1e-12*math.Abs(x.Energy)), roomy), curveCell(x.Width, e), lifetime,
			curveCell(x.WidthLeft, e), curveCell(x.WidthRight, e), curveCell(x.WidthLost, e), sharesText(x.Shares),
		})
	}
	if len(t) == 1 {
		return "no resonance\n"
	}
	if !lossy {
		for i := range t {
			t[i] = slices.Delete(t[i], 5, 6)
		}
	}
	return t.String()
}

func boundTable(r *scenarios.Resonances) string {
	t := table{{"bound state", "width", "layers"}}
	for _, x := range r.Bound {
		t = append(t, []string{
			cell(&x.Energy, math.Max(x.EnergyError, 1e-12*math.Abs(x.Energy)), roomy), curveCell(x.Width, 0), sharesText(x.Shares),
		})
	}
	return t.String()
}

// sharesText names the layers, counted from 0, that hold most of a state.
func sharesText(shares scenarios.Series) string {
	const most, least = 2, 0.05
	order := make([]int, len(shares))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch {
		case shares[a] > shares[b]:
			return -1
		case shares[a] < shares[b]:
			return 1
		}
		return 0
	})
	var parts []string
	for _, i := range order[:min(most, len(order))] {
		if shares[i] >= least {
			parts = append(parts, fmt.Sprintf("[%d] %.2f", i, shares[i]))
		}
	}
	if len(parts) == 0 {
		return "spread out"
	}
	return strings.Join(parts, " ")
}

// windowText says what was searched and how many there are.
func windowText(r *scenarios.Resonances) string {
	u := r.Units.Energy
	text := fmt.Sprintf("energies %s to %s, widths up to %s: by the argument principle %d there, and ",
		short(r.From), withUnit(r.To, u), withUnit(r.Widest, u), r.Counted)
	if r.Counted == len(r.Resonances) {
		return text + "all of them are listed"
	}
	return text + fmt.Sprintf("%d are listed; the search is not complete", len(r.Resonances))
}

func boundText(r *scenarios.Resonances) string {
	text := fmt.Sprintf("below both leads %d by count of the nodes, ", r.CountedBound)
	switch {
	case r.CountedBound != len(r.Bound):
		return text + fmt.Sprintf("%d of them found; the search is not complete", len(r.Bound))
	case !r.Complete && r.Counted == len(r.Resonances):
		return text + "and a state that the other side does not confirm: the search is not complete"
	case r.CountedBound == 0:
		return "none below both leads, by count of the nodes"
	}
	return text + "all of them listed"
}

// elementsText says how far the elements of the packet road are off.
func elementsText(r *scenarios.Resonances) string {
	var list []*scenarios.Element
	for _, x := range r.Resonances {
		list = append(list, x.Elements)
	}
	for _, x := range r.Bound {
		list = append(list, x.Elements)
	}
	asked, energy, width := 0, 0.0, 0.0
	for _, e := range list {
		if e != nil {
			asked, energy, width = asked+1, math.Max(energy, e.EnergyOff), math.Max(width, e.WidthOff)
		}
	}
	if asked == 0 {
		return "no state was held against the complex-scaled elements"
	}
	verdict := "the roads agree"
	if !r.Agrees {
		verdict = "the roads DISAGREE"
	}
	return fmt.Sprintf("%d of %d states found again on the complex-scaled elements of the packet road, widths to %s of themselves, energies to %s: %s",
		asked, len(list), brief(width), strings.TrimSpace(brief(energy)+" "+r.Units.Energy), verdict)
}
