package main

import (
	"bytes"
	"encoding/json"
	"math"
	"os/exec"
	"testing"

	"fluxtoll/scenarios"
)

// runJSON runs the program in this process and reads its document.
func runJSON(t testing.TB, args ...string) (*scenarios.Result, int) {
	t.Helper()
	var out, log bytes.Buffer
	code := run(t.Context(), append([]string{"run", "--json"}, args...), nil, &out, &log)
	var r scenarios.Result
	reader := json.NewDecoder(&out)
	reader.DisallowUnknownFields()
	if err := reader.Decode(&r); err != nil {
		t.Fatalf("exit code %d, %v; standard error: %s", code, err, log.String())
	}
	return &r, code
}

// TestDemosAgree runs every demo at its own tolerance: the roads must agree,
// each difference within its budget and each budget within the tolerance.
func TestDemosAgree(t *testing.T) {
	demos := scenarios.Demos()
	if len(demos) < 9 {
		t.Fatalf("%d demos, want at least nine", len(demos))
	}
	for _, d := range demos {
		t.Run(d.Name, func(t *testing.T) {
			r, code := runJSON(t, d.Name)
			if code != exitDone || r.Verdict != scenarios.Agrees {
				t.Errorf("exit code %d, verdict %q, want 0 and %q", code, r.Verdict, scenarios.Agrees)
			}
			measured := 0
			for _, q := range r.Quantities {
				if q.Packet == nil {
					continue
				}
				measured++
				if !(math.Abs(*q.Difference) <= *q.Budget) || !(*q.Budget <= q.Allowed) {
					t.Errorf("%s: difference %.2g, budget %.2g, allowed %.2g", q.Name, *q.Difference, *q.Budget, q.Allowed)
				}
			}
			if measured < 4 {
				t.Errorf("%d quantities measured on the packet road, want at least four", measured)
			}
		})
	}
}

// BenchmarkDemo times a demo as a whole process on one core; at the default
// tolerance it should stay below 0.3 s.
func BenchmarkDemo(b *testing.B) {
	path := program(b)
	for _, d := range scenarios.Demos() {
		b.Run(d.Name, func(b *testing.B) {
			for b.Loop() {
				cmd := exec.Command(path, "run", d.Name)
				cmd.Env = append(cmd.Environ(), "GOMAXPROCS=1")
				if err := cmd.Run(); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
