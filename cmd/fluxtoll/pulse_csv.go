package main

import (
	"encoding/csv"
	"io"
	"strconv"

	"fluxtoll/scenarios"
)

// writeFlow writes the flow through both planes against time, in one column
// for the part that it belongs to: the planes need not have the same times.
func writeFlow(w io.Writer, r *scenarios.PulseReport) error {
	out := csv.NewWriter(w)
	rows := [][]string{{"part", bracketed("time", r.Units.Time), bracketed("flow", per(r.Units.Time)), "error"}}
	for _, p := range r.Pulses {
		for i, t := range p.Series.Time {
			rows = append(rows, []string{p.Part, exact(t), exact(p.Series.Flow[i]), exact(p.Series.Error)})
		}
	}
	return out.WriteAll(rows)
}

// writeEnergies writes the curves against energy.
func writeEnergies(w io.Writer, r *scenarios.PulseReport) error {
	out := csv.NewWriter(w)
	head := []string{bracketed("energy", r.Units.Energy), "weight"}
	if r.OneShot == nil {
		return out.WriteAll([][]string{head})
	}
	for _, c := range r.OneShot.Curves {
		for _, name := range []string{c.Name, c.Name + "_stationary", c.Name + "_error"} {
			head = append(head, bracketed(name, c.Unit))
		}
	}
	rows := [][]string{head}
	for i, e := range r.OneShot.Energy {
		row := []string{exact(e), exact(r.OneShot.Weight[i])}
		for _, c := range r.OneShot.Curves {
			for _, v := range []*float64{c.Packet[i], c.Stationary[i], c.Error[i]} {
				row = append(row, exactOrNone(v))
			}
		}
		rows = append(rows, row)
	}
	return out.WriteAll(rows)
}

// bracketed names a column with its unit.
func bracketed(name, unit string) string {
	if unit == "" {
		return name
	}
	return name + " [" + unit + "]"
}

func per(unit string) string {
	if unit == "" {
		return ""
	}
	return "1/" + unit
}

// exact writes a number so that it reads back as the same.
func exact(v float64) string { return plainExponent(strconv.FormatFloat(v, 'g', -1, 64)) }

func exactOrNone(v *float64) string {
	if v == nil {
		return ""
	}
	return exact(*v)
}
