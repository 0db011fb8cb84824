package scenarios

// complete refuses a file that lacks what it needs.
func (f *File) complete() error {
	if !tolerable(f.Tolerance) {
		return &fault{key: "tolerance", msg: shortest(f.Tolerance) + " is out of range", accepted: toleranceAccepted}
	}
	for _, s := range f.singles() {
		if err := f.needs(s); err != nil {
			return err
		}
	}
	for i := range f.Layers {
		if err := f.needs(f.layer(i)); err != nil {
			return err
		}
	}
	return f.one()
}

// needs refuses a section that lacks a key.
func (f *File) needs(s section) error {
	for _, fd := range s.fields {
		if !fd.need || fd.q.Given {
			continue
		}
		at := *s.at
		if at == 0 {
			at = f.end()
		}
		return &fault{at: at, key: s.key(fd.key), msg: "is missing", accepted: accepts(fd.kind, f.Natural, fd.rule)}
	}
	return nil
}

// one refuses both and neither of length and spread.
func (f *File) one() error {
	const accepted = "give one of them: length is the standard deviation in x, spread the one in energy"
	p := &f.Packet
	switch {
	case p.Length.Given && p.Spread.Given:
		return &fault{at: max(p.Length.at, p.Spread.at), key: "packet", msg: "length and spread are both given", accepted: accepted}
	case !p.Length.Given && !p.Spread.Given:
		return &fault{at: p.at, key: "packet.length", msg: "neither length nor spread is given", accepted: accepted}
	}
	return nil
}
