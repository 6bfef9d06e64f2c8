package paper

import (
	"math"
	"strings"
	"testing"
)

func TestDataAsCSV(t *testing.T) {
	d := Data{
		Name:    "course",
		Notes:   []string{"Not a safety\nassessment."},
		Columns: []string{"t / s", "A, kept / M"},
		Rows:    [][]float64{{0, 0.2}, {7200, 1.0 / 3}, {math.Inf(1), math.NaN()}},
	}
	var b strings.Builder
	if err := d.CSV(&b); err != nil {
		t.Fatal(err)
	}
	want := "# Not a safety assessment.\nt / s,\"A, kept / M\"\n0,0.2\n7200,0.3333333333\n,\n"
	if b.String() != want {
		t.Errorf("got\n%swant\n%s", b.String(), want)
	}
}

func TestSheetKeepsData(t *testing.T) {
	s := New(Block{ID: "cold", Kind: "run"}, nil)
	s.Data(Data{Name: "course"})
	if f := s.Files(); len(f) != 1 || f[0].Name != "course" {
		t.Errorf("files %v", f)
	}
	if !s.Empty() {
		t.Error("a file beside the page is no part of the page")
	}
}
