package main

import (
	"context"
	"errors"
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"fluxtoll/scenarios"
)

// mostPoints bounds what --points may ask for.
const mostPoints = 1_000_000

// fewLayers is up to how many layers `curve` prints the dwell time in each
// without being asked.
const fewLayers = 100

// newCurve is the command `curve`.
func newCurve() *cobra.Command {
	o := curveOptions{points: wholeNumber{low: 2, high: mostPoints}}
	cmd := &cobra.Command{
		Use:   "curve FILE|DEMO|-",
		Short: "Transmission, delays and dwell times against energy",
		Long: `curve evaluates the structure of a scenario at many energies on the stationary
road: probabilities, group delays, and the dwell time in all and in each layer,
for incidence from the packet's side. Without --points it chooses the energies
so that straight lines between them follow every curve and no resonance is
missed. Without --from and --to it covers the band of the packet.

A terminal gets a plot below the table. The table leaves out what the layers
hold unless --layers asks for it; --csv and --json hold it for up to 100 layers.`,
		Example: `  fluxtoll curve twin-barrier
  fluxtoll curve mine.toml --from "20 meV" --to "200 meV" --points 181 --csv`,
		Args:              exactly(1, "one argument is wanted, a scenario file, a demo or -"),
		ValidArgsFunction: completeScenario,
		RunE: func(cmd *cobra.Command, args []string) error {
			return o.run(cmd, args[0])
		},
	}
	o.band.add(cmd)
	cmd.Flags().Var(&o.points, "points", "`N` evenly spaced energies, both ends included")
	cmd.Flags().BoolVar(&o.layers, "layers", false, "the dwell time in each layer too, or not (--layers=false)")
	cmd.Flags().BoolVar(&o.asCSV, "csv", false, "print comma-separated values")
	cmd.Flags().BoolVar(&o.asJSON, "json", false, "print one JSON document")
	return cmd
}

// curveOptions are the flags of `curve`.
type curveOptions struct {
	band          bandFlags
	points        wholeNumber
	layers        bool
	asCSV, asJSON bool
}

func (o *curveOptions) run(cmd *cobra.Command, name string) error {
	if o.asCSV && o.asJSON {
		return hinted(cmd, "--csv and --json exclude each other")
	}
	scenario, band, err := o.band.open(cmd, name)
	if err != nil {
		return err
	}
	caught := interruptible(cmd.Context())
	defer caught.end()
	curve, err := scenario.Curve(caught, scenarios.CurveRequest{
		Band: band, Points: o.points.value, Layers: o.wantsLayers(cmd, len(scenario.Structure.Layers)),
	})
	if err != nil {
		return stopped(cmd, caught, err)
	}
	if err := o.print(cmd.OutOrStdout(), curve); err != nil {
		return err
	}
	if !curve.Complete {
		return &shortfall{fmt.Errorf("the curve stops short of its fineness at %d energies; a narrower band (--from, --to) needs fewer, and --points takes evenly spaced ones", len(curve.Energy))}
	}
	return nil
}

// wantsLayers decides on the layers where no flag does.
func (o *curveOptions) wantsLayers(cmd *cobra.Command, layers int) bool {
	if cmd.Flags().Changed("layers") {
		return o.layers
	}
	return (o.asCSV || o.asJSON) && layers <= fewLayers
}

func (o *curveOptions) print(w io.Writer, c *scenarios.Curve) error {
	switch {
	case o.asJSON:
		return writeJSON(w, c)
	case o.asCSV:
		_, err := w.Write(curveCSV(c))
		return err
	}
	_, err := io.WriteString(w, curveReport(c))
	if columns := outputColumns(w); err == nil && columns > 0 {
		_, err = io.WriteString(w, "\n"+curvePlot(c, columns, onlyASCII(w)))
	}
	return err
}

// stopped is the error of a computation that ended early, by a signal or else.
func stopped(cmd *cobra.Command, caught *interruption, err error) error {
	if errors.Is(err, context.Canceled) {
		fmt.Fprintln(cmd.ErrOrStderr(), "fluxtoll: interrupted")
		return exitCode(caught.exitCode())
	}
	return err
}

// bandFlags are --from and --to.
type bandFlags struct{ from, to string }

func (b *bandFlags) add(cmd *cobra.Command) {
	cmd.Flags().StringVar(&b.from, "from", "", "lowest energy, an `ENERGY` such as \"20 meV\"")
	cmd.Flags().StringVar(&b.to, "to", "", "highest energy, an `ENERGY`")
}

// open reads and compiles a scenario and reads the flags in its units.
func (b *bandFlags) open(cmd *cobra.Command, name string) (*scenarios.Scenario, scenarios.Band, error) {
	var band scenarios.Band
	file, err := openScenario(name, cmd.InOrStdin())
	if err != nil {
		return nil, band, err
	}
	scenario, err := file.Compile()
	if err != nil {
		return nil, band, err
	}
	for _, f := range []struct {
		flag, text string
		to         **float64
	}{{"from", b.from, &band.From}, {"to", b.to, &band.To}} {
		if !cmd.Flags().Changed(f.flag) {
			continue
		}
		v, err := energyFlag(f.flag, f.text, file.Natural, scenario.Scale)
		if err != nil {
			return nil, band, err
		}
		*f.to = &v
	}
	return scenario, band, nil
}

// energyFlag reads an energy in internal units.
func energyFlag(flag, text string, natural bool, s scenarios.Scale) (float64, error) {
	q, err := scenarios.ParseQuantity(scenarios.Energy, natural, text)
	var bad *scenarios.InputError
	if errors.As(err, &bad) {
		return 0, &scenarios.InputError{File: "--" + flag, Msg: bad.Msg, Accepted: bad.Accepted}
	}
	return s.Internal(q), nil
}
