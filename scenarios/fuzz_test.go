package scenarios

import (
	"errors"
	"math"
	"strings"
	"testing"
	"testing/fstest"
)

// FuzzRead feeds the reader with anything, and with any table. Whatever comes
// is an *InputError of one printable line or a scenario of finite numbers,
// which is the same again when it has been written and read.
func FuzzRead(f *testing.F) {
	for _, d := range Demos() {
		f.Add(d.Text, "x [nm], height [meV]\n0, 1\n1, 2\n")
	}
	f.Add(sound, "")
	f.Add(bare, "")
	f.Add(withTable, "x [nm], height [meV], mass [u]\n0, 1, 1\n1, 2, 2\n")
	f.Add(strings.Replace(withTable, "file =", "interpolate = \"smooth\"\nfile =", 1), "x [m], height [K]\n0, 1\n1e-9, -2\n3e-9, 7")
	for _, c := range badInputs() {
		f.Add(strings.Replace(c.base, c.old, c.new, 1), "")
	}
	f.Fuzz(func(t *testing.T, text, csv string) {
		files := fstest.MapFS{"profile.csv": {Data: []byte(csv)}, "blurred-barrier.csv": {Data: []byte(csv)}}
		file, err := Read("fuzz.toml", strings.NewReader(text), Within(files, "."))
		if err != nil {
			checkHarmless(t, err)
			return
		}
		s, err := file.Compile()
		if err != nil {
			checkHarmless(t, err)
			return
		}
		if !finite(s.Structure) || math.IsNaN(s.Packet.Length+s.Packet.Energy+s.Scale.Length+s.Scale.Energy+s.Scale.Time) {
			t.Errorf("not finite: %+v", s)
		}
		checkRoundTrip(t, file, Within(files, "."))
	})
}

// checkHarmless checks that an error is an *InputError of one printable line.
func checkHarmless(t *testing.T, err error) {
	t.Helper()
	var bad *InputError
	if !errors.As(err, &bad) {
		t.Fatalf("%T: %v, want an *InputError", err, err)
	}
	if text := err.Error(); text != printable(text) || len(text) > 1000 {
		t.Errorf("%q is not a short printable line", text)
	}
}
