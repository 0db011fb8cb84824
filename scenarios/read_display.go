package scenarios

import "strings"

// displayKeys lists the keys of [display].
func displayKeys() []string { return []string{"length", "energy", "time"} }

// display reads the units of the output.
func (r *reader) display(root *node) error {
	m := root.find("display")
	if m == nil {
		return nil
	}
	d := &r.file.Display
	for i, unit := range []*string{&d.Length, &d.Energy, &d.Time} {
		kind := []Kind{Length, Energy, Time}[i]
		if m := m.value.find(kind.String()); m != nil {
			name, err := r.displayUnit(kind, m)
			if err != nil {
				return err
			}
			*unit = name
		}
	}
	return nil
}

func (r *reader) displayUnit(kind Kind, m *member) (string, error) {
	key := "display." + kind.String()
	if r.file.Natural {
		return "", &fault{at: m.at, key: key, msg: "is given in a file in natural units", accepted: "leave it out: output is in natural units too"}
	}
	name := canonical(m.value.text)
	if _, ok := unitSize(kind, name); m.value.kind == textNode && ok {
		return name, nil
	}
	names := unitNames(kind)
	return "", &fault{
		at: m.value.at, key: key, msg: excerpt(m.value.text) + " is no unit of " + kind.String(),
		accepted: suggestion(name, names) + "accepted are " + strings.Join(names, ", "),
	}
}
