package published

import (
	"context"
	"strings"
	"testing"
)

// TestCases runs every case; each must state a source, and both roads must
// have been asked.
func TestCases(t *testing.T) {
	seen := map[Road]int{}
	for _, c := range Cases() {
		t.Run(c.Name, func(t *testing.T) {
			if c.Source == "" || len(c.Checks) == 0 {
				t.Fatalf("source %q, %d checks", c.Source, len(c.Checks))
			}
			for _, o := range outcomes(t, c) {
				seen[o.Road]++
				if !o.Pass {
					t.Errorf("%s, %s: found %v, expected %v, error %v, allowed %v",
						o.Quantity, o.Road, show(o.Found), o.Expected, show(o.Error), o.Allowed)
				}
			}
		})
	}
	for _, road := range []Road{PlaneWave, Average, Packet, States, Elements} {
		if seen[road] < 10 {
			t.Errorf("%d numbers checked on the road %q, want at least 10", seen[road], road)
		}
	}
}

// TestNamesDiffer keeps the cases apart in what is printed.
func TestNamesDiffer(t *testing.T) {
	seen := map[string]bool{}
	for _, c := range Cases() {
		if seen[c.Name] || len(c.Name) > 60 {
			t.Errorf("%q occurs twice or is longer than 60 characters", c.Name)
		}
		seen[c.Name] = true
	}
	if len(seen) < 30 {
		t.Errorf("%d cases, want at least 30", len(seen))
	}
}

// TestWrongNumbersFail shows that a case can fail, on each road: a number that
// is off by twice what is allowed does not pass.
func TestWrongNumbersFail(t *testing.T) {
	for _, name := range []string{"Step to a heavier material", "Packet tunnelling through a barrier"} {
		c := find(t, name)
		before := outcomes(t, c)
		for i := range c.Checks {
			c.Checks[i].Expected += 2 * before[len(before)-1].Allowed
		}
		failed := 0
		for _, o := range outcomes(t, c) {
			if !o.Pass {
				failed++
			}
		}
		if failed == 0 {
			t.Errorf("%s: every number passes although the expected ones are wrong", name)
		}
	}
}

// TestUnknownQuantityFails shows that a number that no road has does not pass.
func TestUnknownQuantityFails(t *testing.T) {
	c := find(t, "Step to a heavier material")
	c.Checks = []Check{{"colour", 0, []Road{PlaneWave, Average, Packet}}}
	list := outcomes(t, c)
	if len(list) != 3 {
		t.Fatalf("%d outcomes, want 3", len(list))
	}
	for _, o := range list {
		if o.Pass || o.Found != nil {
			t.Errorf("%s: found %v, pass %v", o.Road, show(o.Found), o.Pass)
		}
	}
}

func TestBrokenScenario(t *testing.T) {
	c := Case{Name: "broken", Scenario: "[packet]\n", Checks: []Check{{"transmitted", 1, []Road{PlaneWave}}}}
	if _, err := c.Run(context.Background()); err == nil || !strings.HasPrefix(err.Error(), "broken: ") {
		t.Errorf("error %v, want one that starts with the name of the case", err)
	}
}

func outcomes(t *testing.T, c Case) []Outcome {
	t.Helper()
	list, err := c.Run(context.Background())
	if err != nil {
		t.Fatal(err)
	}
	return list
}

func find(t *testing.T, name string) Case {
	t.Helper()
	for _, c := range Cases() {
		if c.Name == name {
			return c
		}
	}
	t.Fatalf("no case %q", name)
	return Case{}
}

func show(v *float64) any {
	if v == nil {
		return "nothing"
	}
	return *v
}
