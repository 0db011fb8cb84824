package scenarios

import (
	"bytes"
	"fmt"
	"reflect"
	"strings"
	"testing"
	"testing/fstest"

	"pgregory.net/rapid"
)

// checkRoundTrip writes a file, reads it again, and compares what it compiles
// to: the same numbers to the last bit.
func checkRoundTrip(t rapid.TB, f *File, open OpenFunc) {
	t.Helper()
	var text bytes.Buffer
	if err := f.Encode(&text); err != nil {
		t.Fatal(err)
	}
	back, err := Read(f.Name, bytes.NewReader(text.Bytes()), open)
	if err != nil {
		t.Fatalf("%v in\n%s", err, text.String())
	}
	want, err := f.Compile()
	if err != nil {
		t.Fatal(err)
	}
	got, err := back.Compile()
	if err != nil {
		t.Fatalf("%v in\n%s", err, text.String())
	}
	if !reflect.DeepEqual(got, want) {
		t.Errorf("got %+v\nwant %+v\nby\n%s", got, want, text.String())
	}
	if a, b := f.Quantities(), back.Quantities(); !reflect.DeepEqual(a, b) {
		t.Errorf("quantities %v, want %v", b, a)
	}
}

func TestDemosRoundTrip(t *testing.T) {
	for _, name := range demoNames() {
		f, err := OpenDemo(name)
		if err != nil {
			t.Fatal(err)
		}
		checkRoundTrip(t, f, Within(demoFiles, "demos"))
	}
}

// drawQuantity draws a positive quantity of a kind, as a TOML value.
func drawQuantity(t *rapid.T, kind Kind, unitsOf ...string) string {
	size := rapid.Float64Range(0.01, 100).Draw(t, kind.String())
	return fmt.Sprintf("%q", fmt.Sprintf("%v %s", size, rapid.SampledFrom(unitsOf).Draw(t, "unit")))
}

// drawLayer draws the text of a layer of any shape.
func drawLayer(t *rapid.T) string {
	length := func() string { return drawQuantity(t, Length, "nm", "angstrom", "\u00b5m") }
	energy := func() string { return drawQuantity(t, Energy, "meV", "THz", "K") }
	var b strings.Builder
	shape := rapid.SampledFrom(shapes()).Draw(t, "shape")
	if shape == string(ShapeTable) {
		fmt.Fprintf(&b, "[[layer]]\nshape = %q\nfile = \"t\\u0031.csv\"\n", shape)
		if rapid.Bool().Draw(t, "smooth") {
			b.WriteString("interpolate = \"smooth\"\n")
		}
		return b.String()
	}
	fmt.Fprintf(&b, "[[layer]]\nshape = %q\n", shape)
	for _, fd := range (&LayerSpec{Shape: ShapeName(shape)}).fields() {
		if !fd.need && rapid.Bool().Draw(t, "leave out "+fd.key) {
			continue
		}
		value := map[Kind]func() string{
			Length: length, Energy: energy,
			Mass:     func() string { return drawQuantity(t, Mass, "m_e", "electron") },
			Strength: func() string { return drawQuantity(t, Strength, "meV nm", "meV*um") },
		}[fd.kind]()
		fmt.Fprintf(&b, "%s = %s\n", fd.key, value)
	}
	return b.String()
}

func TestRoundTrip(t *testing.T) {
	files := fstest.MapFS{"t1.csv": {Data: []byte("x [nm], height [meV], mass [m_e]\n-1, 2, 1\n1, 3, 2\n2, 3, 2.5\n")}}
	rapid.Check(t, func(t *rapid.T) {
		var b strings.Builder
		fmt.Fprintf(&b, "title = %q\n", rapid.StringMatching(`[a-z"\\\p{L} ]{0,20}`).Draw(t, "title"))
		b.WriteString("particle.mass = \"0.067 m_e\"\n")
		fmt.Fprintf(&b, "packet = {energy = \"20 eV\", from = %q, ", rapid.SampledFrom([]string{"left", "right"}).Draw(t, "from"))
		b.WriteString(rapid.SampledFrom([]string{`length = "14 nm"}`, `spread = "8 meV"}`}).Draw(t, "length or spread") + "\n")
		fmt.Fprintf(&b, "bias = {drop = %s}\n", drawQuantity(t, Energy, "meV", "ueV"))
		fmt.Fprintf(&b, "tolerance = %g\n", rapid.Float64Range(1e-13, 1e-2).Draw(t, "tolerance"))
		b.WriteString(rapid.SampledFrom([]string{"", "display.time = \"ps\"\n"}).Draw(t, "display"))
		for range rapid.IntRange(0, 4).Draw(t, "layers") {
			b.WriteString(drawLayer(t))
		}
		f, err := Read("drawn.toml", strings.NewReader(b.String()), Within(files, "."))
		if err != nil {
			t.Fatalf("%v in\n%s", err, b.String())
		}
		checkRoundTrip(t, f, Within(files, "."))
	})
}

// quote writes what TOML reads back, whatever the text.
func TestQuote(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.String().Draw(t, "text")
		root, err := parseTree([]byte("a = " + quote(text)))
		if err != nil {
			t.Fatal(err)
		}
		if got := root.find("a").value.text; got != text {
			t.Errorf("%q came back as %q", text, got)
		}
	})
}
