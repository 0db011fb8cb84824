package scenarios

import (
	"errors"
	"fmt"
	"math"

	"fluxtoll/potential"
)

// Compile brings the scenario to internal units, in which hbar = 1 and the
// packet's lead has mass 1 and the packet mean wave number 1. The error is an
// *InputError that names the place at fault.
func (f *File) Compile() (*Scenario, error) {
	s, err := f.compile()
	if err != nil {
		return nil, f.locate(err)
	}
	return s, nil
}

func (f *File) compile() (*Scenario, error) {
	if err := f.complete(); err != nil {
		return nil, err
	}
	c, err := f.compiler()
	if err != nil {
		return nil, err
	}
	s := &Scenario{Title: line(f.Title), Tolerance: f.Tolerance}
	if s.Structure, err = c.structure(); err != nil {
		return nil, err
	}
	if s.Packet, err = c.packet(s.Structure.Width()); err != nil {
		return nil, err
	}
	if s.Planes, err = c.planes(s.Packet, s.Structure.Width()); err != nil {
		return nil, err
	}
	s.Scale = c.scale(s.Packet.Length)
	s.Notes = c.notes()
	return s, nil
}

// compiler knows the internal units: one internal unit is that many base
// units.
type compiler struct {
	file        *File
	length      float64 // 1/k0
	energy      float64 // hbar^2 k0^2/m, twice the mean kinetic energy
	time        float64 // hbar/energy
	mass        float64 // the source lead's
	entry, exit potential.Lead
}

// lead is a lead in base units.
func (f *File) lead(l LeadSpec) potential.Lead {
	return potential.Lead{Height: l.Height.Base(), Mass: f.massOr(l.Mass, f.particle())}
}

// particle is the particle's mass in base units.
func (f *File) particle() float64 { return f.massOr(f.Particle.Mass, 1) }

func (f *File) massOr(q Quantity, otherwise float64) float64 {
	if q.Given {
		return q.Base()
	}
	return otherwise
}

// compiler fixes the internal units from the packet's lead and energy:
// k0 = sqrt(2 m (E-V))/hbar.
func (f *File) compiler() (*compiler, error) {
	c := &compiler{file: f, entry: f.lead(f.Entry), exit: f.lead(f.Exit)}
	source, name := c.entry, "entry"
	if f.Packet.From == FromRight {
		source, name = c.exit, "exit"
		source.Height -= f.Bias.Drop.Base()
	}
	kinetic := f.Packet.Energy.Base() - source.Height
	if !(kinetic > 0) {
		at := f.inUnitOf(f.Packet.Energy, source.Height).round(0).String()
		return nil, &fault{
			at: f.Packet.Energy.at, key: "packet.energy",
			msg:      fmt.Sprintf("%q is not above the height of the %s, %s: the packet could not move there", f.Packet.Energy, name, at),
			accepted: "an energy greater than " + at + " is accepted",
		}
	}
	h := hbar(f.Natural)
	c.mass, c.energy = source.Mass, 2*kinetic
	c.length = h / (math.Sqrt(source.Mass) * math.Sqrt(c.energy))
	c.time = h / c.energy
	return c, nil
}

// span bounds the sizes of what enters the equations, in internal units.
const span = 1e50

// inside converts a size from base units and refuses what is out of reach.
func inside(base, unit float64, key string, at place) (float64, error) {
	v := base / unit
	if size := math.Abs(v); base != 0 && !(size >= 1/span && size <= span) {
		return 0, &fault{
			at: at, key: key, msg: fmt.Sprintf("is %.3g times what the packet's wave number sets as the scale", v),
			accepted: "sizes from 1e-50 to 1e50 times that are accepted",
		}
	}
	return v, nil
}

// of converts a quantity of the file.
func (c *compiler) of(q Quantity, key string) (float64, error) {
	return inside(q.Base(), c.unit(q.Kind), key, q.at)
}

// unit is the internal unit of a kind in base units.
func (c *compiler) unit(k Kind) float64 {
	return [...]float64{1, c.length, c.energy, c.time, c.mass, c.energy * c.length}[k]
}

// structure builds what the packet meets.
func (c *compiler) structure() (*potential.Structure, error) {
	entry, err := c.internalLead(c.entry, "entry", c.file.Entry)
	if err != nil {
		return nil, err
	}
	exit, err := c.internalLead(c.exit, "exit", c.file.Exit)
	if err != nil {
		return nil, err
	}
	drop, err := c.of(c.file.Bias.Drop, "bias.drop")
	if err != nil {
		return nil, err
	}
	layers := make([]potential.Layer, len(c.file.Layers))
	for i := range layers {
		if layers[i], err = c.layer(i); err != nil {
			return nil, err
		}
	}
	s, err := potential.Build(entry, exit, layers, potential.Options{Cut: c.cut(), Drop: drop})
	return s, c.file.blame(err)
}

// cut is the height at which the tails of a shape end: a thousandth of the
// tolerance on the scale of the kinetic energy, which is 1/2.
func (c *compiler) cut() float64 { return c.file.Tolerance * 1e-3 / 2 }

func (c *compiler) internalLead(l potential.Lead, name string, spec LeadSpec) (potential.Lead, error) {
	height, err := inside(l.Height, c.energy, name+".height", spec.Height.at)
	if err != nil {
		return l, err
	}
	at, key := spec.Mass.at, name+".mass"
	if !spec.Mass.Given {
		at, key = c.file.Particle.Mass.at, "particle.mass"
	}
	mass, err := inside(l.Mass, c.mass, key, at)
	return potential.Lead{Height: height, Mass: mass}, err
}

// blame turns an error of the structure into a fault of the file.
func (f *File) blame(err error) error {
	var bad *potential.LayerError
	if err == nil || !errors.As(err, &bad) {
		return err
	}
	s := f.layer(bad.Layer)
	out := &fault{at: *s.at, key: s.key(bad.Field), msg: bad.Msg, accepted: f.Layers[bad.Layer].takes()}
	for _, fd := range s.fields {
		if fd.key == bad.Field && fd.q.Given {
			out.at, out.accepted = fd.q.at, accepts(fd.kind, f.Natural, fd.rule)
		}
	}
	return out
}

// notes remarks on a packet so fast that the model does not hold.
func (c *compiler) notes() []string {
	const noticed = 0.1
	if c.file.Natural {
		return nil
	}
	if fraction := c.length / c.time / lightSpeed; fraction > noticed {
		return []string{fmt.Sprintf("the packet moves at %.2g of the speed of light; the model is not relativistic", fraction)}
	}
	return nil
}
