package scenarios

import (
	"reflect"
	"strings"
	"testing"
)

func open(t *testing.T, text string) *File {
	t.Helper()
	f, err := Read("two.toml", strings.NewReader(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func TestQuantities(t *testing.T) {
	want := strings.Fields(`tolerance particle.mass entry.height
		layer[0].thickness layer[0].height layer[0].mass layer[1].thickness layer[1].height layer[1].height_end
		exit.height bias.drop packet.energy packet.length packet.start planes.near planes.far`)
	f := open(t, sound)
	if got := f.Quantities(); !reflect.DeepEqual(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
	for _, path := range want {
		q, err := f.Get(path)
		if err != nil || !q.Given {
			t.Errorf("%s: %+v, %v", path, q, err)
			continue
		}
		if err := f.Set(path, q.String()); err != nil {
			t.Errorf("%s set to itself: %v", path, err)
		}
	}
}

func TestSetChangesWhatIsCompiled(t *testing.T) {
	f := open(t, sound)
	copied := f.Clone()
	for path, text := range map[string]string{
		"layer[0].thickness": "40 angstrom", "layer[1].loss": "2 meV", "exit.mass": "0.5 electron", "tolerance": "1e-8", "entry.height": "0",
	} {
		if err := f.Set(path, text); err != nil {
			t.Fatal(err)
		}
	}
	s, err := f.Compile()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "thickness", s.Structure.Layers[0].To*s.Scale.Length, 4, rounding)
	near(t, "loss", s.Structure.Segments[1].Loss*s.Scale.Energy, 2, rounding)
	near(t, "mass", s.Structure.Exit.Mass, 0.5/0.067, rounding)
	near(t, "tolerance", s.Tolerance, 1e-8, 0)
	before, err := copied.Compile()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "thickness of the copy", before.Structure.Layers[0].To*before.Scale.Length, 3, rounding)
}

func TestSetRefuses(t *testing.T) {
	for _, c := range []struct{ path, text, at, key, msg, accepted string }{
		{"layer[0].thickness", "3 meV", "8:13", "layer[0].thickness", "is an energy", lengths},
		{"layer[0].thickness", "-3 nm", "8:13", "layer[0].thickness", "is negative", "greater than zero"},
		{"layer[0].loss", "-3 meV", "7:3", "layer[0].loss", "is negative", "of zero or more"},
		{"layer[0].width", "3 nm", "7:3", "layer[0].width", "is no quantity of layer[0]", "accepted are thickness, height, mass, loss"},
		{"layer[0].thickess", "3 nm", "7:3", "layer[0].thickess", "is no quantity", `did you mean "thickness"?`},
		{"layer[2].thickness", "3 nm", "0:0", "layer[2].thickness", "is no layer", "layer[0] to layer[1]"},
		{"layer[-1].thickness", "3 nm", "0:0", "layer[-1].thickness", "is no layer", "layer[0] to layer[1]"},
		{"layer[00].thickness", "3 nm", "0:0", "layer[00].thickness", "is no layer", "layer[0] to layer[1]"},
		{"layer", "3 nm", "0:0", "layer", "is no quantity", "layer[0].thickness"},
		{"pakcet.energy", "3 meV", "0:0", "pakcet.energy", "is no quantity", `did you mean "packet"?`},
		{"packet", "3 meV", "20:2", "packet", "is no quantity of packet", "energy, length"},
		{"", "3", "0:0", `""`, "is no quantity", "paths such as"},
		{"tolerance", "2", "0:0", "tolerance", "out of range", "1e-13 to 1e-2"},
		{"tolerance", "NaN", "0:0", "tolerance", "not a finite number", "1e-13 to 1e-2"},
		{"\x1b[2J", "3", "0:0", `"\x1b[2J"`, "is no quantity", "paths such as"},
	} {
		f := open(t, sound)
		err := f.Set(c.path, c.text)
		checkInputError(t, err, "two.toml", c.at, c.key, c.msg, c.accepted)
		if want := open(t, sound); !reflect.DeepEqual(f, want) {
			t.Errorf("%s: a refused value changed the file", c.path)
		}
	}
}

func TestGetWhatIsNotGiven(t *testing.T) {
	_, err := open(t, sound).Get("layer[0].loss")
	checkInputError(t, err, "two.toml", "7:3", "layer[0].loss", "is not given", "an energy of zero or more")
}
