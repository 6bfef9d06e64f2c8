package main

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"testing"
)

// TestLines runs A -> B to 1 s and checks the lines that are compared.
func TestLines(t *testing.T) {
	path := filepath.Join(t.TempDir(), "problems.json")
	const problems = `{"monte_carlo": {"problem": "decay", "count": 3, "rtol": 1e-6, "sigma_kcal": 1, "seed": 1,
 "constants": {"kB": 1.380649e-23, "h": 6.62607015e-34, "R_kcal": 0.0019872042586408316, "T": 298.15}},
"problems": [{"name": "decay", "species": ["A", "B"], "y0": [1, 0], "t_end": 1, "atol_factor": 1e-8, "floor": 1e-20,
 "reference": [0.36787944117144233, 0.6321205588285577],
 "reactions": [{"k": 1, "barrier": 17.45, "lhs": [0], "rhs": [1]}, {"k": 0, "barrier": 30, "lhs": [1], "rhs": [0]}]}]}`
	if err := os.WriteFile(path, []byte(problems), 0o644); err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	if err := run(&out, path, 0, "1e-8", true, 1e-6, 0, 0, 0, nil); err != nil {
		t.Fatal(err)
	}
	lines := bytes.Split(bytes.TrimSpace(out.Bytes()), []byte("\n"))
	if len(lines) != 3 {
		t.Fatalf("%d lines, want one for the problem and two for the samples:\n%s", len(lines), out.Bytes())
	}
	var first struct {
		Problem, Status string
		US, Err         float64
		Steps           int
	}
	if err := json.Unmarshal(lines[0], &first); err != nil {
		t.Fatal(err)
	}
	if first.Problem != "decay" || first.Status != "ok" || !(first.US > 0) || !(first.Err < 1e-7) || first.Steps == 0 {
		t.Errorf("line %s", lines[0])
	}
	var mc struct {
		Variant string
		Count   int
		Failed  int
		Mean    []float64
	}
	for i, want := range []string{"setup", "nosetup"} {
		if err := json.Unmarshal(lines[1+i], &mc); err != nil {
			t.Fatal(err)
		}
		if mc.Variant != want || mc.Count != 3 || mc.Failed != 0 || len(mc.Mean) != 2 {
			t.Errorf("line %s", lines[1+i])
		}
	}
}

// TestMap writes the map, runs three temperatures of it at one tolerance and
// reads each at sixty times.
func TestMap(t *testing.T) {
	names := []string{"map 250 K", "map 298 K", "map 368 K"}
	path := filepath.Join(t.TempDir(), "problems.json")
	if err := writeMap(path); err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	if err := run(&out, path, 0, "1e-6", true, 1e-6, 0, 0, 60, names); err != nil {
		t.Fatal(err)
	}
	lines := bytes.Split(bytes.TrimSpace(out.Bytes()), []byte("\n"))
	if len(lines) != len(names) {
		t.Fatalf("%d lines, want %d", len(lines), len(names))
	}
	for _, l := range lines {
		var d struct {
			Problem, Status string
			N               int
			Err             float64
		}
		if err := json.Unmarshal(l, &d); err != nil {
			t.Fatal(err)
		}
		if d.Status != "ok" || d.N != 10 || !(d.Err < 1e-4) {
			t.Errorf("line %s", l)
		}
	}
}
