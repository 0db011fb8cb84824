package scenarios

// scale returns the sizes of the internal units in the units of the output.
// The packet's passage lasts length/v0, which is length in internal units.
func (c *compiler) scale(length float64) Scale {
	s := Scale{Length: c.length, Energy: c.energy, Time: c.time}
	if c.file.Natural {
		return s
	}
	d := c.file.Display
	s.LengthUnit = firstOf(d.Length, c.file.firstUnit(Length), fitting(Length, length*c.length))
	s.EnergyUnit = firstOf(d.Energy, c.file.firstUnit(Energy), "eV")
	s.TimeUnit = firstOf(d.Time, fitting(Time, length*c.time))
	s.Length /= unitBase(Length, s.LengthUnit)
	s.Energy /= unitBase(Energy, s.EnergyUnit)
	s.Time /= unitBase(Time, s.TimeUnit)
	return s
}

// firstOf returns the first word that is not empty.
func firstOf(words ...string) string {
	for _, w := range words {
		if w != "" {
			return w
		}
	}
	return ""
}

// firstUnit returns the unit the file uses first for a kind, its packet before
// all else.
func (f *File) firstUnit(k Kind) string {
	if u := unitIn(f.Packet.fields(), k); u != "" {
		return u
	}
	for i := range f.Layers {
		if u := unitIn(f.Layers[i].fields(), k); u != "" {
			return u
		}
	}
	for _, s := range f.singles() {
		if u := unitIn(s.fields, k); u != "" {
			return u
		}
	}
	return ""
}

func unitIn(fields []field, k Kind) string {
	for _, fd := range fields {
		if fd.kind == k && fd.q.Unit != "" {
			return fd.q.Unit
		}
	}
	return ""
}

// fitting returns the largest unit in which a size, given in base units, reads
// 1 or more, or the smallest unit.
func fitting(k Kind, size float64) string {
	list := units(k)
	for _, u := range list {
		if size >= u.base {
			return u.name
		}
	}
	return list[len(list)-1].name
}

// Internal returns a quantity in the internal units the scale belongs to. Only
// lengths, energies and times have a scale.
func (s Scale) Internal(q Quantity) float64 {
	size, unit := s.Length, s.LengthUnit
	switch q.Kind {
	case Energy:
		size, unit = s.Energy, s.EnergyUnit
	case Time:
		size, unit = s.Time, s.TimeUnit
	case Plain, Mass, Strength:
		panic("scenarios: no scale for " + q.Kind.article())
	}
	return q.Base() / unitBase(q.Kind, unit) / size
}
