package scenarios

import "fmt"

// field is one quantity of a section: its key, where it is kept, and what it
// may be.
type field struct {
	key  string
	q    *Quantity
	kind Kind
	rule rule
	need bool
}

// section is one table of a scenario file.
type section struct {
	path   string
	at     *place
	fields []field
}

// key returns the path of one of the section's keys.
func (s section) key(name string) string {
	if s.path == "" {
		return name
	}
	return s.path + "." + name
}

// singles lists the sections that occur once, in the order of the file. The
// layers stand between the third and the fourth.
func (f *File) singles() []section {
	return []section{
		{"particle", &f.Particle.at, []field{{"mass", &f.Particle.Mass, Mass, positive, !f.Natural}}},
		{"entry", &f.Entry.at, f.Entry.fields()},
		{"exit", &f.Exit.at, f.Exit.fields()},
		{"bias", &f.Bias.at, []field{{"drop", &f.Bias.Drop, Energy, anySign, false}}},
		{"packet", &f.Packet.at, f.Packet.fields()},
		{"planes", &f.Planes.at, []field{
			{"near", &f.Planes.Near, Length, anySign, false},
			{"far", &f.Planes.Far, Length, anySign, false},
		}},
	}
}

// layer returns the section of layer i.
func (f *File) layer(i int) section {
	return section{layerPath(i), &f.Layers[i].at, f.Layers[i].fields()}
}

func layerPath(i int) string { return fmt.Sprintf("layer[%d]", i) }

func (l *LeadSpec) fields() []field {
	return []field{
		{"height", &l.Height, Energy, anySign, false},
		{"mass", &l.Mass, Mass, positive, false},
	}
}

func (p *PacketSpec) fields() []field {
	return []field{
		{"energy", &p.Energy, Energy, anySign, true},
		{"length", &p.Length, Length, positive, false},
		{"spread", &p.Spread, Energy, positive, false},
		{"start", &p.Start, Length, anySign, false},
	}
}

// fields lists what the layer's shape takes, in the order in which it is
// written.
func (l *LayerSpec) fields() []field {
	thickness := field{"thickness", &l.Thickness, Length, positive, true}
	window := field{"thickness", &l.Thickness, Length, positive, false}
	height := field{"height", &l.Height, Energy, anySign, true}
	heightEnd := field{"height_end", &l.HeightEnd, Energy, anySign, true}
	width := field{"width", &l.Width, Length, positive, true}
	mass := field{"mass", &l.Mass, Mass, positive, false}
	loss := field{"loss", &l.Loss, Energy, notNegative, false}
	switch l.Shape {
	case ShapeFlat:
		return []field{thickness, height, mass, loss}
	case ShapeRamp:
		return []field{thickness, height, heightEnd, mass, loss}
	case ShapeDelta:
		return []field{{"strength", &l.Strength, Strength, anySign, true}}
	case ShapeSech2, ShapeGauss:
		return []field{height, width, window, mass, loss}
	case ShapeSmoothStep:
		height.need, heightEnd.need = false, false
		return []field{height, heightEnd, width, window, mass, loss}
	case ShapeTable:
		if l.Table != nil && l.Table.Mass.Values != nil {
			return []field{loss}
		}
		return []field{mass, loss}
	}
	return nil
}

// shapes lists the names of the shapes.
func shapes() []string {
	return []string{
		string(ShapeFlat), string(ShapeRamp), string(ShapeDelta), string(ShapeSech2),
		string(ShapeGauss), string(ShapeSmoothStep), string(ShapeTable),
	}
}

// words lists the keys of a layer's shape that are no quantities.
func (l *LayerSpec) words() []string {
	if l.Shape == ShapeTable {
		return []string{"shape", "file", "interpolate"}
	}
	return []string{"shape"}
}

// layerKeys lists every key that some shape takes.
func layerKeys() []string {
	var keys []string
	seen := map[string]bool{}
	for _, name := range shapes() {
		for _, key := range (&LayerSpec{Shape: ShapeName(name)}).keys() {
			if !seen[key] {
				keys, seen[key] = append(keys, key), true
			}
		}
	}
	return keys
}

// keys lists what the layer's shape takes.
func (l *LayerSpec) keys() []string { return append(l.words(), fieldKeys(l.fields())...) }

func fieldKeys(fields []field) []string {
	var keys []string
	for _, f := range fields {
		keys = append(keys, f.key)
	}
	return keys
}

// read turns a text into the field's quantity and checks its sign.
func (fd field) read(text string, natural bool, key string, at place) (Quantity, *fault) {
	q, bad := parseQuantity(fd.kind, natural, text)
	if bad == nil {
		if msg := fd.rule.breaks(q.Number); msg != "" {
			bad = &fault{msg: excerpt(text) + " " + msg}
		}
	}
	if bad != nil {
		return q, fd.refuse(bad.msg, natural, key, at)
	}
	q.at = at
	return q, nil
}

// refuse is the fault of a value, with what is accepted for the field.
func (fd field) refuse(msg string, natural bool, key string, at place) *fault {
	return &fault{at: at, key: key, msg: msg, accepted: accepts(fd.kind, natural, fd.rule)}
}
