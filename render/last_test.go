package render

import (
	"bytes"
	"context"
	"math"
	"os"
	"path/filepath"
	"testing"
)

// Three notes on chemistry that nothing else in the project uses, written when
// the program was done: a dimerisation, a catalyst, twelve species. They
// publish, their claims hold, and what they compute is held by a golden file
// and, for the dimer, by the closed form.
func TestLastNotes(t *testing.T) {
	src := Source{FS: os.DirFS("testdata/last")}
	out, err := Publish(context.Background(), src, filepath.Join(t.TempDir(), "out"), Options{})
	if err != nil || out.Broken || out.Tally.Open() {
		t.Fatal(err, out.Faults)
	}
	lines, _, err := Results(context.Background(), src, Options{})
	if err != nil {
		t.Fatal(err)
	}
	var all bytes.Buffer
	if err := WriteResults(&all, lines, "text"); err != nil {
		t.Fatal(err)
	}
	golden(t, "testdata/last/results.golden", all.String())

	value := map[string]float64{}
	for _, l := range lines {
		value[l.Result.Key.Canonical()] = l.Result.Value.Value
	}
	// 2 M goes to Z and to E: m + 2 (Kz + Ke) m² = 0.2 mM at 60 °C.
	const R, T = 8.31446261815324, 333.15
	K := math.Exp(-(-66000+T*198)/(R*T)) + math.Exp(-(-71000+T*203)/(R*T))
	c := 0.2e-3
	m := (math.Sqrt(1+8*K*c) - 1) / (4 * K)
	if got := value["cuvette/amount/M@T=333.15"]; !(math.Abs(got-m)/m < 1e-9) {
		t.Errorf("monomer %g M, want %g M", got, m)
	}
}
