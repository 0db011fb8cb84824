package main

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"fluxtoll/propagate"
	"fluxtoll/scenarios"
)

// forcing holds what the command line insists on instead of the plan.
type forcing struct {
	order, edge, pade   wholeNumber
	nodes, steps        wholeNumber
	memory              byteSize
	element, step, stop string
	start, near, far    string
	tolerance           string
	flags               *pflag.FlagSet
}

// add defines the flags on a command.
func (f *forcing) add(cmd *cobra.Command) {
	f.flags = cmd.Flags()
	f.order = wholeNumber{low: 2, high: 24}
	f.edge = wholeNumber{low: 1, high: 1000}
	f.pade = wholeNumber{low: 1, high: propagate.MaxPade}
	f.nodes, f.steps = wholeNumber{low: 1, high: mostCount}, wholeNumber{low: 1, high: mostCount}
	f.flags.StringVar(&f.tolerance, "tolerance", "", "wanted error `X`: absolute on probabilities, relative on times")
	f.flags.StringVar(&f.start, "start", "", "centre of the packet at t = 0, a `LENGTH` such as \"-140 nm\"")
	f.flags.StringVar(&f.near, "near", "", "position of the near plane, a `LENGTH`")
	f.flags.StringVar(&f.far, "far", "", "position of the far plane, a `LENGTH`")
	f.flags.Var(&f.order, "order", "polynomial order `N` of the elements, 2 to 24")
	f.flags.StringVar(&f.element, "element", "", "longest element in the packet's lead, a `LENGTH`")
	f.flags.Var(&f.edge, "edge-elements", "elements `N` in each absorbing edge")
	f.flags.Var(&f.pade, "pade", "member `N` of the time-stepping family, 1 (Crank-Nicolson) to 5")
	f.flags.StringVar(&f.step, "time-step", "", "time step, a `TIME`")
	f.flags.StringVar(&f.stop, "stop", "", "end of the run, settled or not, a `TIME`")
	f.flags.Var(&f.nodes, "max-nodes", "limit `N` of grid nodes")
	f.flags.Var(&f.steps, "max-steps", "limit `N` of time steps")
	f.flags.Var(&f.memory, "max-memory", "limit `BYTES` of memory for the matrices, such as 512MiB or 4GB")
}

// change states in the scenario what belongs there, and checks it there.
func (f *forcing) change(file *scenarios.File) error {
	for _, c := range []struct {
		flag, path, text string
	}{
		{"tolerance", "tolerance", f.tolerance},
		{"start", "packet.start", f.start},
		{"near", "planes.near", f.near},
		{"far", "planes.far", f.far},
	} {
		if !f.flags.Changed(c.flag) {
			continue
		}
		if err := file.Set(c.path, c.text); err != nil {
			return f.named(err)
		}
	}
	return nil
}

// named makes an error about a value that a flag set name the flag.
func (f *forcing) named(err error) error {
	var bad *scenarios.InputError
	if !errors.As(err, &bad) {
		return err
	}
	flag := map[string]string{
		"tolerance": "tolerance", "packet.start": "start", "planes.near": "near", "planes.far": "far",
	}[bad.Key]
	if flag == "" || !f.flags.Changed(flag) {
		return err
	}
	return &scenarios.InputError{File: "--" + flag, Msg: bad.Msg, Accepted: bad.Accepted}
}

// forced is what the plan must obey, in internal units.
func (f *forcing) forced(natural bool, s scenarios.Scale) (scenarios.Forced, error) {
	out := scenarios.Forced{
		Order: f.order.value, Edge: f.edge.value, Pade: f.pade.value,
		Limits: scenarios.Limits{Nodes: f.nodes.value, Steps: f.steps.value, Bytes: f.memory.value},
	}
	for _, q := range []struct {
		flag, text string
		kind       scenarios.Kind
		to         *float64
	}{
		{"element", f.element, scenarios.Length, &out.Element},
		{"time-step", f.step, scenarios.Time, &out.TimeStep},
		{"stop", f.stop, scenarios.Time, &out.StopTime},
	} {
		if !f.flags.Changed(q.flag) {
			continue
		}
		var err error
		if *q.to, err = positive(q.flag, q.text, q.kind, natural, s); err != nil {
			return out, err
		}
	}
	return out, nil
}

// positive reads a quantity greater than zero in internal units.
func positive(flag, text string, kind scenarios.Kind, natural bool, s scenarios.Scale) (float64, error) {
	q, err := scenarios.ParseQuantity(kind, natural, text)
	var bad *scenarios.InputError
	if errors.As(err, &bad) {
		return 0, &scenarios.InputError{File: "--" + flag, Msg: bad.Msg, Accepted: bad.Accepted}
	}
	if !(q.Number > 0) {
		return 0, &scenarios.InputError{
			File: "--" + flag, Msg: fmt.Sprintf("%q is not greater than zero", text),
			Accepted: fmt.Sprintf("a %v greater than zero is accepted", kind),
		}
	}
	return s.Internal(q), nil
}
