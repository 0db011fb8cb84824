package scenarios

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"
	"time"
	"unicode"
)

// sound is a scenario that reads and compiles; the cases below break it.
const sound = `title = "Two layers"
tolerance = 1e-6
[particle]
mass = "0.067 m_e"
[entry]
height = "0 meV"
[[layer]]
thickness = "3 nm"
height = "250 meV"
mass = "0.092 m_e"
[[layer]]
shape = "ramp"
thickness = "6 nm"
height = "100 meV"
height_end = "50 meV"
[exit]
height = "20 meV"
[bias]
drop = "10 meV"
[packet]
energy = "310 meV"
length = "14 nm"
from = "left"
start = "-140 nm"
[planes]
near = "-280 nm"
far = "80 nm"
[display]
length = "nm"
energy = "meV"
time = "fs"
`

// bare is a scenario in natural units that reads and compiles.
const bare = `units = "natural"
[exit]
height = 0.5
[[layer]]
thickness = 2
height = 0.7
[packet]
energy = 1.2
length = 10
`

const lengths = "in m, mm, um, nm, angstrom, pm"
const energies = "in keV, eV, meV, ueV, neV, peV, J, K, mK, uK, nK, Hz, kHz, MHz, GHz, THz"

// badInput is a sound scenario with one passage replaced, and what the message
// says then.
type badInput struct {
	name, base    string
	old, new      string
	at            string // line:column
	key           string
	msg, accepted string // parts of the message
}

func badInputs() []badInput {
	return []badInput{
		// Keys.
		{"unknown key", sound, "[packet]", "[packet]\ncolour = 3", "21:1", "packet.colour", "no key known here", "accepted are energy, length, spread, start, from"},
		{"misspelt key", sound, "energy = \"310", "enegry = \"310", "21:1", "packet.enegry", "no key known here", `did you mean "energy"?`},
		{"misspelt section", sound, "[packet]", "[paket]", "20:2", "paket", "no key known here", `did you mean "packet"?`},
		{"wrong case", sound, "length = \"14", "Length = \"14", "22:1", "packet.Length", "no key known here", `did you mean "length"?`},
		{"wrong case of a section", sound, "[planes]", "[Planes]", "25:2", "Planes", "no key known here", `did you mean "planes"?`},
		{"misspelt layer key", sound, "thickness = \"6", "thicknes = \"6", "13:1", "layer[1].thicknes", "no key known here", `did you mean "thickness"?`},
		{"key with an escape", sound, "from =", "\"\\u001b[31mfrom\" =", "23:1", `packet."\x1b[31mfrom"`, "no key known here", "accepted are"},
		{"key given twice", sound, "height = \"250 meV\"", "height = \"250 meV\"\nheight = \"1 meV\"", "10:1", "height", "given twice", "once"},
		{"section given twice", sound, "[display]", "[exit]", "28:2", "exit", "given twice", "once"},
		{"layer as a table", sound, "[[layer]]\nshape", "[layer]\nshape", "11:2", "layer", "given twice", "[[layer]]"},
		{"one layer as a table", bare, "[[layer]]", "[layer]", "4:2", "layer", "is a table", "[[layer]]"},
		{"layers as numbers", bare, "units = \"natural\"\n[exit]\nheight = 0.5\n[[layer]]\nthickness = 2\nheight = 0.7\n", "units = \"natural\"\nlayer = [1, 2]\n", "2:10", "layer[0]", "is a number", "[[layer]]"},
		{"section as a number", bare, "units = \"natural\"", "units = \"natural\"\nbias = 3", "2:1", "bias", "is a number", "[bias]"},
		{"key of another shape", sound, "mass = \"0.092 m_e\"", "height_end = \"3 meV\"", "10:1", "layer[0].height_end", "no key of the shape flat", "takes shape, thickness, height, mass, loss"},
		{"thickness of a delta", bare, "thickness = 2\nheight = 0.7", "shape = \"delta\"\nstrength = 1\nthickness = 1", "7:1", "layer[0].thickness", "no key of the shape delta", "takes shape, strength"},
		{"display in natural units", bare, "[exit]", "[display]\ntime = \"fs\"\n[exit]", "3:1", "display.time", "natural units", "leave it out"},

		// What is missing.
		{"no packet", bare, "[packet]\nenergy = 1.2\nlength = 10\n", "", "7:1", "packet.energy", "is missing", "an energy is accepted"},
		{"no energy", bare, "energy = 1.2\n", "", "7:2", "packet.energy", "is missing", "plain number"},
		{"no particle", sound, "[particle]\nmass = \"0.067 m_e\"\n", "", "30:1", "particle.mass", "is missing", "m_e, or a name: electron, neutron"},
		{"no thickness", sound, "thickness = \"3 nm\"\n", "", "7:3", "layer[0].thickness", "is missing", lengths},
		{"no height_end", sound, "height_end = \"50 meV\"\n", "", "11:3", "layer[1].height_end", "is missing", energies},
		{"no width", bare, "thickness = 2", "shape = \"gauss\"", "4:3", "layer[0].width", "is missing", "a length greater than zero"},
		{"neither length nor spread", sound, "length = \"14 nm\"\n", "", "20:2", "packet.length", "neither", "give one of them"},
		{"both length and spread", sound, "from = \"left\"", "spread = \"9 meV\"", "23:10", "packet", "both", "give one of them"},

		// Words.
		{"unknown units", bare, "\"natural\"", "\"atomic\"", "1:9", "units", `"atomic" is not known`, `accepted are "natural"`},
		{"unknown side", sound, "\"left\"", "\"lift\"", "23:8", "packet.from", `"lift" is not known`, `did you mean "left"? accepted are "left", "right"`},
		{"side as a number", sound, "\"left\"", "1", "23:8", "packet.from", "is a number", `accepted are "left", "right"`},
		{"unknown shape", sound, "\"ramp\"", "\"rampe\"", "12:9", "layer[1].shape", `"rampe" is not known`, `did you mean "ramp"? accepted are "flat", "ramp", "delta", "sech2", "gauss", "smooth-step", "table"`},
		{"unknown unit of display", sound, "time = \"fs\"", "time = \"sf\"", "31:8", "display.time", `"sf" is no unit of time`, `s, ms, us, ns, ps, fs, as`},
		{"title as a number", sound, "title = \"Two layers\"", "title = 2", "1:9", "title", "is a number", "a text is accepted"},

		// Units and numbers.
		{"wrong kind of unit", sound, "\"3 nm\"", "\"3 meV\"", "8:13", "layer[0].thickness", `"3 meV" is an energy`, "a length greater than zero is accepted, " + lengths},
		{"length for an energy", sound, "\"310 meV\"", "\"310 nm\"", "21:10", "packet.energy", `"310 nm" is a length`, "an energy is accepted, " + energies},
		{"unknown unit", sound, "\"3 nm\"", "\"3 nmm\"", "8:13", "layer[0].thickness", `"nmm"; did you mean "mm"?`, lengths},
		{"unit in the wrong case", sound, "\"310 meV\"", "\"310 mev\"", "21:10", "packet.energy", `did you mean "meV"?`, energies},
		{"no unit", sound, "\"3 nm\"", "\"3\"", "8:13", "layer[0].thickness", `"3" has no unit`, lengths},
		{"plain number", sound, "\"3 nm\"", "3", "8:13", "layer[0].thickness", `"3" has no unit`, lengths},
		{"unit in natural units", bare, "thickness = 2", "thickness = \"2 nm\"", "5:13", "layer[0].thickness", "is a text", "plain number"},
		{"unit alone", sound, "\"3 nm\"", "\"nm\"", "8:13", "layer[0].thickness", `"nm" does not start with a number`, lengths},
		{"empty text", sound, "\"3 nm\"", "\"\"", "8:13", "layer[0].thickness", "is empty", lengths},
		{"two numbers", sound, "\"3 nm\"", "\"3 4 nm\"", "8:13", "layer[0].thickness", "no unit known here", lengths},
		{"two points", sound, "\"3 nm\"", "\"3.0.1 nm\"", "8:13", "layer[0].thickness", "is not a number", lengths},
		{"comma", sound, "\"3 nm\"", "\"3,5 nm\"", "8:13", "layer[0].thickness", "no unit known here", lengths},
		{"hexadecimal", sound, "\"3 nm\"", "\"0x3p1 nm\"", "8:13", "layer[0].thickness", "not a decimal number", lengths},
		{"underscore", sound, "\"3 nm\"", "\"1_000 nm\"", "8:13", "layer[0].thickness", "underscore", lengths},
		{"truth value", sound, "\"3 nm\"", "true", "8:13", "layer[0].thickness", "is a truth value or a date", lengths},
		{"array", sound, "\"3 nm\"", "[\"3 nm\"]", "8:1", "layer[0].thickness", "is an array", lengths},
		{"NaN in a text", sound, "\"3 nm\"", "\"NaN nm\"", "8:13", "layer[0].thickness", "not a finite number", lengths},
		{"Inf in a text", sound, "\"310 meV\"", "\"-Inf meV\"", "21:10", "packet.energy", "not a finite number", energies},
		{"NaN", bare, "energy = 1.2", "energy = nan", "8:10", "packet.energy", "not a finite number", "plain number"},
		{"Inf", bare, "height = 0.7", "height = +inf", "6:10", "layer[0].height", "not a finite number", "plain number"},
		{"1e400", bare, "height = 0.7", "height = 1e400", "6:10", "layer[0].height", "larger than a number can be", "plain number"},
		{"1e400 in a text", sound, "\"310 meV\"", "\"1e400 meV\"", "21:10", "packet.energy", "larger than a number can be", energies},
		{"1e-400", sound, "\"3 nm\"", "\"1e-400 nm\"", "8:13", "layer[0].thickness", "smaller than a number can be", lengths},
		{"beyond reach", sound, "\"3 nm\"", "\"1e200 nm\"", "8:13", "layer[0].thickness", "out of reach", lengths},
		{"unknown particle", sound, "\"0.067 m_e\"", "\"Rb-78\"", "4:8", "particle.mass", `"Rb-78" is no particle known here; did you mean "Rb-87"?`, "K-39, Rb-87, Cs-133"},

		// Signs and ranges.
		{"negative thickness", sound, "\"6 nm\"", "\"-6 nm\"", "13:13", "layer[1].thickness", `"-6 nm" is negative`, "a length greater than zero is accepted, " + lengths},
		{"no extent", sound, "\"6 nm\"", "\"0 nm\"", "13:13", "layer[1].thickness", `"0 nm" is zero`, "greater than zero"},
		{"zero mass", sound, "\"0.092 m_e\"", "0", "10:8", "layer[0].mass", `"0" is zero`, "a mass greater than zero"},
		{"negative mass", sound, "\"0.067 m_e\"", "\"-1 u\"", "4:8", "particle.mass", "is negative", "a mass greater than zero"},
		{"negative loss", sound, "mass = \"0.092 m_e\"", "loss = \"-1 meV\"", "10:8", "layer[0].loss", "is negative", "an energy of zero or more"},
		{"zero length", sound, "\"14 nm\"", "\"0 nm\"", "22:10", "packet.length", "is zero", "greater than zero"},
		{"loose tolerance", sound, "1e-6", "0.5", "2:13", "tolerance", `"0.5" is out of range`, "from 1e-13 to 1e-2"},
		{"zero tolerance", sound, "1e-6", "0", "2:13", "tolerance", "out of range", "from 1e-13 to 1e-2"},
		{"tolerance as a text", sound, "1e-6", "\"1e-6\"", "2:13", "tolerance", "is a text", "plain number from 1e-13 to 1e-2"},

		// What does not go together.
		{"energy below the entry", sound, "\"0 meV\"", "\"320 meV\"", "21:10", "packet.energy", `"310 meV" is not above the height of the entry, 320 meV`, "greater than 320 meV"},
		{"energy at the entry", sound, "\"310 meV\"", "\"0 meV\"", "21:10", "packet.energy", "could not move", "greater than 0 meV"},
		{"energy below the exit it comes from", bare, "energy = 1.2", "from = \"right\"\nenergy = 0.4", "9:10", "packet.energy", `"0.4" is not above the height of the exit, 0.5`, "greater than 0.5"},
		{"start inside", sound, "\"-140 nm\"", "\"4 nm\"", "24:9", "packet.start", `"4 nm" leaves the packet less than 4 lengths clear`, "-56 nm or less is accepted"},
		{"packet overlaps", sound, "\"-140 nm\"", "\"-30 nm\"", "24:9", "packet.start", `"-30 nm" leaves`, "-56 nm or less is accepted"},
		{"packet overlaps from the right", sound, "from = \"left\"\nstart = \"-140 nm\"", "from = \"right\"\nstart = \"30 nm\"", "24:9", "packet.start", `"30 nm" leaves`, "65 nm or more is accepted"},
		{"near plane before the start", sound, "\"-280 nm\"", "\"-150 nm\"", "26:8", "planes.near", `"-150 nm" does not lie 4 lengths of the packet behind its start`, "-196 nm or less is accepted"},
		{"near plane too near for a start", sound, "start = \"-140 nm\"\n[planes]\nnear = \"-280 nm\"", "[planes]\nnear = \"-0.1 um\"", "25:8", "planes.near", "leaves no room", "-0.112 um or less is accepted"},
		{"near plane on the wrong side", sound, "from = \"left\"\nstart = \"-140 nm\"", "from = \"right\"\nstart = \"0.2 um\"", "26:8", "planes.near", "behind its start", "256 nm or more is accepted"},
		{"far plane inside", sound, "\"80 nm\"", "\"8 nm\"", "27:7", "planes.far", `"8 nm" does not lie past the far face`, "9 nm or more is accepted"},
		{"layer lost in rounding", sound, "\"6 nm\"", "\"1e-20 nm\"", "13:13", "layer[1].thickness", "lost in rounding", lengths},
		{"height beyond reach", bare, "height = 0.7", "height = 1e60", "6:10", "layer[0].height", "times what the packet's wave number", "1e50"},

		// TOML itself.
		{"no value", sound, "\"310 meV\"", "", "21:10", "", "", "TOML"},
		{"open text", sound, "\"310 meV\"", "\"310 meV", "21:18", "", "new lines", "TOML"},
		{"open header", sound, "[packet]", "[packet", "20:8", "", "']'", "TOML"},
		{"control character", sound, "Two", "T\x1bo", "1:11", "", "control characters", "TOML"},
		{"no table", sound, "[[layer]]\nshape = \"ramp\"\nthickness = \"6 nm\"\nheight = \"100 meV\"\nheight_end = \"50 meV\"", "[[layer]]\nshape = \"table\"", "11:3", "layer[1].file", "is missing", "CSV"},
	}
}

func TestBadInput(t *testing.T) {
	cases := badInputs()
	if len(cases) < 60 {
		t.Fatalf("%d cases, want at least 60", len(cases))
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if !strings.Contains(c.base, c.old) {
				t.Fatalf("the sound scenario does not contain %q", c.old)
			}
			err := readAndCompile("twin.toml", strings.Replace(c.base, c.old, c.new, 1))
			checkInputError(t, err, "twin.toml", c.at, c.key, c.msg, c.accepted)
		})
	}
}

func TestSoundInput(t *testing.T) {
	for _, text := range []string{sound, bare} {
		if err := readAndCompile("twin.toml", text); err != nil {
			t.Error(err)
		}
	}
}

func readAndCompile(name, text string) error {
	f, err := Read(name, strings.NewReader(text), nil)
	if err == nil {
		_, err = f.Compile()
	}
	return err
}

// checkInputError checks place, key and parts of the message, and that the
// whole is one printable line.
func checkInputError(t *testing.T, err error, file, at, key, msg, accepted string) {
	t.Helper()
	var bad *InputError
	if !errors.As(err, &bad) {
		t.Fatalf("got %v, want an *InputError", err)
	}
	if bad.File != file {
		t.Errorf("%v: file is %q, want %q", err, bad.File, file)
	}
	if got := fmt.Sprintf("%d:%d", bad.Line, bad.Column); got != at {
		t.Errorf("%v: at %s, want %s", err, got, at)
	}
	if bad.Key != key {
		t.Errorf("%v: key %q, want %q", err, bad.Key, key)
	}
	if !strings.Contains(bad.Msg, msg) || !strings.Contains(bad.Accepted, accepted) || bad.Accepted == "" {
		t.Errorf("%v: want %q; %q", err, msg, accepted)
	}
	if strings.ContainsFunc(err.Error(), func(r rune) bool { return !unicode.IsPrint(r) }) {
		t.Errorf("%q is not one printable line", err.Error())
	}
}

// withTable is a scenario whose only layer is a table.
const withTable = `[particle]
mass = "1 m_e"
[[layer]]
shape = "table"
file = "profile.csv"
[packet]
energy = "310 meV"
length = "14 nm"
`

func TestBadTable(t *testing.T) {
	cases := []struct {
		name, csv     string
		at            string
		msg, accepted string
	}{
		{"empty", "", "1:1", "is empty", "a first line such as"},
		{"only comments", "# x\n# height\n", "1:1", "is empty", "a first line such as"},
		{"no units", "x, height\n0, 1\n1, 2\n", "1:1", `column "x" has no unit`, lengths},
		{"wrong unit", "x [nm], height [nm]\n0, 1\n1, 2\n", "1:9", `column "height [nm]" has no unit of energy`, energies},
		{"unknown column", "x [nm], hieght [meV]\n0, 1\n", "1:9", "is not known here", `did you mean "height"?`},
		{"column twice", "x [nm], x [nm]\n0, 1\n", "1:9", "given twice", "once"},
		{"no height", "x [nm], mass [u]\n0, 1\n1, 1\n", "1:1", "the column height is missing", "a first line such as"},
		{"no header", "0, 1\n1, 2\n", "1:1", `column "0" is not known`, "x, height and mass"},
		{"text", "x [nm], height [meV]\n0, 1\n1, high\n", "3:4", `"high" does not start with a number`, "plain number"},
		{"unit in a row", "x [nm], height [meV]\n0, 1 meV\n1, 2\n", "2:4", "has text after its number", "first line"},
		{"NaN", "x [nm], height [meV]\n0, NaN\n1, 2\n", "2:4", "not a finite number", "plain number"},
		{"unsorted", "x [nm], height [meV]\n0, 1\n2, 2\n1, 3\n", "4:1", `"1" is not above the x before it`, lengths},
		{"same x twice", "x [nm], height [meV]\n0, 1\n0, 2\n", "3:1", "x must rise", lengths},
		{"one row", "x [nm], height [meV]\n0, 1\n", "2:1", "has 1 rows", "at least two lines"},
		{"no row", "x [nm], height [meV]\n", "1:1", "has 0 rows", "at least two lines"},
		{"short row", "x [nm], height [meV]\n0, 1\n1\n", "3:1", "has 1 columns, the first line 2", "one number for each column"},
		{"zero mass", "x [nm], height [meV], mass [u]\n0, 1, 1\n1, 1, 0\n", "3:7", "is no mass", "a mass"},
		{"open quote", "x [nm], height [meV]\n0, \"1\n", "2:7", "", "a first line such as"},
		{"binary", "x [nm]\x00", "1:7", "not UTF-8", "UTF-8"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			files := fstest.MapFS{"lab/profile.csv": {Data: []byte(c.csv)}}
			_, err := Read("lab/one.toml", strings.NewReader(withTable), Within(files, "lab"))
			checkInputError(t, err, "lab/profile.csv", c.at, "", c.msg, c.accepted)
		})
	}
}

func TestTableNotReadable(t *testing.T) {
	const accepted = "the name of a CSV file beside the scenario is accepted"
	deny := func(string) (io.ReadCloser, error) {
		return nil, &fs.PathError{Op: "open", Path: "profile.csv", Err: fs.ErrPermission}
	}
	dir := t.TempDir()
	if err := os.Mkdir(filepath.Join(dir, "profile.csv"), 0o700); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name          string
		open          OpenFunc
		msg, accepted string
	}{
		{"not there", Within(fstest.MapFS{}, "."), `"profile.csv" does not exist`, accepted},
		{"not permitted", deny, `"profile.csv" may not be read`, accepted},
		{"directory", Beside(dir), `"profile.csv" is a directory`, accepted},
		{"no way to open", nil, "no table can be opened", "read the scenario from a file"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := Read("one.toml", strings.NewReader(withTable), c.open)
			checkInputError(t, err, "one.toml", "5:8", "layer[0].file", c.msg, c.accepted)
		})
	}
}

func TestMassOfTableGivenTwice(t *testing.T) {
	files := fstest.MapFS{"profile.csv": {Data: []byte("x [nm], height [meV], mass [u]\n0, 1, 1\n1, 1, 1\n")}}
	text := strings.Replace(withTable, "file =", "mass = \"1 u\"\nfile =", 1)
	_, err := Read("one.toml", strings.NewReader(text), Within(files, "."))
	checkInputError(t, err, "one.toml", "5:8", "layer[0].mass", "by the table", "once")
}

func TestUnreadableFiles(t *testing.T) {
	dir := t.TempDir()
	path := func(name string) string { return filepath.Join(dir, name) }
	write := func(name string, data string) {
		if err := os.WriteFile(path(name), []byte(data), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	write("empty.toml", "")
	write("binary.toml", "\x7fELF\x02\x01\x00\x00")
	write("latin1.toml", "title = \"caf\xe9\"\n")
	write("huge.toml", "")
	if err := os.Truncate(path("huge.toml"), 100<<20); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ file, at, key, msg, accepted string }{
		{"empty.toml", "1:1", "", "is empty", "a scenario (TOML) is accepted"},
		{"binary.toml", "1:7", "", "is not UTF-8 text", "UTF-8"},
		{"latin1.toml", "1:13", "", "is not UTF-8 text", "UTF-8"},
		{"huge.toml", "0:0", "", "is larger than 16 MiB", "a scenario file"},
		{"missing.toml", "0:0", "", "does not exist", "a scenario file"},
		{".", "0:0", "", "is a directory", "a scenario file"},
	} {
		t.Run(c.file, func(t *testing.T) {
			_, err := ReadFile(path(c.file))
			checkInputError(t, err, path(c.file), c.at, c.key, c.msg, c.accepted)
		})
	}
}

// endless is a source that never ends.
type endless struct{ read int }

func (e *endless) Read(p []byte) (int, error) {
	for i := range p {
		p[i] = '#'
	}
	e.read += len(p)
	return len(p), nil
}

func TestEndlessInputIsRefused(t *testing.T) {
	src := &endless{}
	_, err := Read("pipe", src, nil)
	checkInputError(t, err, "pipe", "0:0", "", "is larger than 16 MiB", "up to 16 MiB")
	if src.read > 40<<20 { // io.ReadAll grows its buffer by a quarter at a time
		t.Errorf("read %d bytes before refusing", src.read)
	}
}

// layered is a scenario with n flat layers.
func layered(n int) string {
	return "[particle]\nmass = \"electron\"\n[packet]\nenergy = \"310 meV\"\nlength = \"14 nm\"\n" +
		strings.Repeat("[[layer]]\nthickness = \"1 nm\"\nheight = \"5 meV\"\n", n)
}

func TestManyLayers(t *testing.T) {
	text := layered(20_000)
	began := time.Now()
	f, err := Read("many.toml", strings.NewReader(text), nil)
	if err != nil {
		t.Fatal(err)
	}
	s, err := f.Compile()
	if err != nil {
		t.Fatal(err)
	}
	if took := time.Since(began); took > 5*time.Second { // 0.5 s on an idle machine
		t.Errorf("took %v", took)
	}
	if len(s.Structure.Segments) != 20_000 {
		t.Errorf("%d segments", len(s.Structure.Segments))
	}
	err = readAndCompile("many.toml", layered(100_000))
	checkInputError(t, err, "many.toml", "60006:3", "layer", "there are 100000 of them", "up to 20000 layers")
}

func TestInlineLayersInOneLine(t *testing.T) {
	const n = 20_000 // places on a long line must not take the square of its length
	text := bare[:strings.Index(bare, "[exit]")] + "layer = [" + strings.Repeat("{thickness = 1, height = 2}, ", n) + "]\n[packet]\nenergy = 3\nlength = 4\n"
	began := time.Now()
	f, err := Read("long.toml", strings.NewReader(text), nil)
	if err != nil || len(f.Layers) != n {
		t.Fatalf("%v, %d layers", err, len(f.Layers))
	}
	if took := time.Since(began); took > 5*time.Second { // 0.1 s on an idle machine
		t.Errorf("took %v", took)
	}
}

func TestTooManyRows(t *testing.T) {
	var csv strings.Builder
	csv.WriteString("x [nm], height [meV]\n")
	for i := range 12_000 {
		fmt.Fprintf(&csv, "%d, 1\n", i)
	}
	files := fstest.MapFS{"profile.csv": {Data: []byte(csv.String())}}
	text := withTable + "[[layer]]\nshape = \"table\"\nfile = \"profile.csv\"\n"
	_, err := Read("one.toml", strings.NewReader(text), Within(files, "."))
	checkInputError(t, err, "one.toml", "11:8", "layer[1].file", "above the limit", "up to 20000 rows")
}
