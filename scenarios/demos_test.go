package scenarios

import (
	"math"
	"strings"
	"testing"
)

func TestDemos(t *testing.T) {
	demos := Demos()
	if len(demos) < 9 {
		t.Fatalf("%d demos, want at least nine", len(demos))
	}
	for _, d := range demos {
		t.Run(d.Name, func(t *testing.T) {
			if d.Name != strings.ToLower(d.Name) || strings.ContainsAny(d.Name, " _.") {
				t.Errorf("name %q", d.Name)
			}
			if d.Title == "" || !strings.HasPrefix(d.Text, "# ") || !strings.Contains(d.Text, "\n# Expect: ") {
				t.Error("a demo has a title and opens with what it is and what to expect")
			}
			f, err := OpenDemo(d.Name)
			if err != nil {
				t.Fatal(err)
			}
			s, err := f.Compile()
			if err != nil {
				t.Fatal(err)
			}
			checkPacket(t, s)
		})
	}
}

// checkPacket checks that a packet is neither tiny nor endless, and that its
// energy is four spectral widths away from the leads' heights, so that a demo
// shows its own effect and not the threshold's.
func checkPacket(t *testing.T, s *Scenario) {
	t.Helper()
	if k := s.Packet.Length; !(k >= 5 && k <= 40) {
		t.Errorf("k0 length = %g, want 5 to 40", k)
	}
	spread := 1 / (2 * s.Packet.Length)
	for _, height := range []float64{s.Structure.Entry.Height, s.Structure.Exit.Height} {
		if away := math.Abs(s.Packet.Energy-height) / spread; !(away >= 4) {
			t.Errorf("the energy is %.2g widths from a lead's height", away)
		}
	}
}

func TestDemoTables(t *testing.T) {
	count := 0
	for _, d := range Demos() {
		for _, table := range d.Tables {
			count++
			if !strings.Contains(d.Text, table.Name) || !strings.Contains(table.Text, "x [") {
				t.Errorf("%s: table %q", d.Name, table.Name)
			}
		}
	}
	if count == 0 {
		t.Error("no demo has a table")
	}
}

func TestUnknownDemo(t *testing.T) {
	for name, hint := range map[string]string{"colector-step": `did you mean "collector-step"?`, "../go": "accepted are", "\x1b[2J": "accepted are", "": "accepted are"} {
		_, err := OpenDemo(name)
		checkInputError(t, err, line(name), "0:0", "", "is no demo", hint)
	}
}
