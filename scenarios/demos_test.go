package scenarios

import "testing"

func TestEveryDemoCompiles(t *testing.T) {
	demos := Demos()
	if len(demos) < 1 {
		t.Fatalf("%d demos, want at least nine", len(demos))
	}
	for _, d := range demos {
		t.Run(d.Name, func(t *testing.T) {
			f, err := OpenDemo(d.Name)
			if err != nil {
				t.Fatal(err)
			}
			s, err := f.Compile()
			if err != nil {
				t.Fatal(err)
			}
			t.Logf("k0*length %.3g, scale %+v\n%+v", s.Packet.Length, s.Scale, s.Structure)
		})
	}
}
