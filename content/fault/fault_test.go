package fault

import (
	"errors"
	"io"
	"slices"
	"strings"
	"testing"
)

var (
	_ error = Diagnostic{}
	_ error = (*Problem)(nil)
	_ error = Problems(nil)
)

func TestDiagnosticError(t *testing.T) {
	full := Diagnostic{
		At:    Place{"notes/aldol.md", 14, 11},
		Block: `mechanism "aldol"`,
		Key:   "step.TS2.barrier",
		Msg:   `unit "kcal" is not known`,
		Fix:   `write "kcal/mol" or "kJ/mol"`,
	}
	for _, tt := range []struct {
		name   string
		change func(*Diagnostic)
		want   string
	}{
		{"full", func(*Diagnostic) {},
			`notes/aldol.md:14:11: error: mechanism "aldol", step.TS2.barrier: unit "kcal" is not known; write "kcal/mol" or "kJ/mol"`},
		{"key as given", func(d *Diagnostic) { d.Key = "step TS2, barrier" },
			`notes/aldol.md:14:11: error: mechanism "aldol", step TS2, barrier: unit "kcal" is not known; write "kcal/mol" or "kJ/mol"`},
		{"warning", func(d *Diagnostic) { d.Severity = Warning },
			`notes/aldol.md:14:11: warning: mechanism "aldol", step.TS2.barrier: unit "kcal" is not known; write "kcal/mol" or "kJ/mol"`},
		{"no key", func(d *Diagnostic) { d.Key = "" },
			`notes/aldol.md:14:11: error: mechanism "aldol": unit "kcal" is not known; write "kcal/mol" or "kJ/mol"`},
		{"no block", func(d *Diagnostic) { d.Block = "" },
			`notes/aldol.md:14:11: error: step.TS2.barrier: unit "kcal" is not known; write "kcal/mol" or "kJ/mol"`},
		{"neither", func(d *Diagnostic) { d.Block, d.Key = "", "" },
			`notes/aldol.md:14:11: error: unit "kcal" is not known; write "kcal/mol" or "kJ/mol"`},
		{"no remedy", func(d *Diagnostic) { d.Block, d.Key, d.Fix = "", "", "" },
			`notes/aldol.md:14:11: error: unit "kcal" is not known`},
		{"no column", func(d *Diagnostic) { d.At.Col, d.Block, d.Key, d.Fix = 0, "", "", "" },
			`notes/aldol.md:14: error: unit "kcal" is not known`},
		{"whole file", func(d *Diagnostic) { d.At.Line, d.Block, d.Key, d.Fix = 0, "", "", "" },
			`notes/aldol.md: error: unit "kcal" is not known`},
		{"no file", func(d *Diagnostic) { d.At, d.Block, d.Key, d.Fix = Place{}, "", "", "" },
			`error: unit "kcal" is not known`},
		{"one line", func(d *Diagnostic) { d.Block, d.Key, d.Msg = "", "", "two\nlines\x1b[31m" },
			`notes/aldol.md:14:11: error: two lines [31m; write "kcal/mol" or "kJ/mol"`},
	} {
		t.Run(tt.name, func(t *testing.T) {
			d := full
			tt.change(&d)
			if got := d.Error(); got != tt.want {
				t.Errorf("got  %s\nwant %s", got, tt.want)
			}
		})
	}
}

func TestSort(t *testing.T) {
	at := func(file string, line, col int, s Severity, msg string) Diagnostic {
		return Diagnostic{At: Place{file, line, col}, Severity: s, Msg: msg, Fix: "f"}
	}
	odd := at("b.md", 1, 1, Error, "same")
	odd.Fix = "other remedy"
	causes := at("b.md", 1, 1, Error, "same")
	causes.Err = uncomparable{nil}
	l := List{
		at("b.md", 1, 1, Error, "same"), odd, causes, // odd stays, causes goes
		at("b.md", 1, 1, Warning, "a"),
		at("b.md", 1, 1, Error, "z"),
		at("b.md", 0, 0, Error, "file"),
		at("a.md", 10, 1, Error, "x"),
		at("a.md", 9, 2, Error, "x"),
		at("a.md", 9, 1, Error, "x"),
	}
	want := List{
		at("a.md", 9, 1, Error, "x"),
		at("a.md", 9, 2, Error, "x"),
		at("a.md", 10, 1, Error, "x"),
		at("b.md", 0, 0, Error, "file"),
		at("b.md", 1, 1, Error, "same"), odd,
		at("b.md", 1, 1, Error, "z"),
		at("b.md", 1, 1, Warning, "a"),
	}
	l.Sort()
	if !slices.Equal(l, want) {
		t.Errorf("got  %v\nwant %v", l, want)
	}
	var none List
	none.Sort()
	if none != nil {
		t.Errorf("sorting nothing gave %v", none)
	}
}

type uncomparable struct{ list []int }

func (uncomparable) Error() string { return "odd" }

func TestListFailedAndWrite(t *testing.T) {
	warn := Diagnostic{At: Place{"a.md", 1, 2}, Severity: Warning, Msg: "m", Fix: "f"}
	fail := Diagnostic{At: Place{"a.md", 2, 1}, Msg: "n", Fix: "g"}
	if (List{warn}).Failed() || (List{}).Failed() || !(List{warn, fail}).Failed() {
		t.Error("Failed does not follow the errors in the list")
	}
	var b strings.Builder
	if err := (List{warn, fail}).Write(&b); err != nil {
		t.Fatal(err)
	}
	if want := "a.md:1:2: warning: m; f\na.md:2:1: error: n; g\n"; b.String() != want {
		t.Errorf("got  %q\nwant %q", b.String(), want)
	}
	r, w := io.Pipe()
	r.Close()
	if err := (List{warn}).Write(w); !errors.Is(err, io.ErrClosedPipe) {
		t.Errorf("write to a closed pipe gave %v", err)
	}
}

func TestProblem(t *testing.T) {
	p := &Problem{Path: []string{"step", "TS 2.1", "reaction"}, Msg: `"R + Q" names no species`, Fix: `write "R + X"`, Err: io.EOF}
	if want := `step."TS 2.1".reaction: "R + Q" names no species; write "R + X"`; p.Error() != want {
		t.Errorf("got  %s\nwant %s", p, want)
	}
	whole := &Problem{Severity: Warning, Msg: "m", Fix: "f"}
	all := Problems{p, whole}
	if want := p.Error() + "\nm; f"; all.Error() != want {
		t.Errorf("got  %s\nwant %s", all, want)
	}
	if !errors.Is(all, io.EOF) || !all.Failed() || (Problems{whole}).Failed() {
		t.Error("causes or severities are lost in the list")
	}
	if (Problems{}).Err() != nil || all.Err() == nil {
		t.Error("Err is nil for an empty list only")
	}
	d := p.In(`mechanism "m"`, Place{"a.md", 3, 4})
	if want := `a.md:3:4: error: mechanism "m", step."TS 2.1".reaction: "R + Q" names no species; write "R + X"`; d.Error() != want {
		t.Errorf("got  %s\nwant %s", d, want)
	}
	if !errors.Is(d, io.EOF) {
		t.Error("the cause is lost on joining the place")
	}
}
