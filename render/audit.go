package render

import (
	"context"
	"fmt"
	"io"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/render/kind"
	"saddlebook/render/study"
)

// A Tally counts what a notebook holds and how its claims stand.
type Tally struct {
	Notes     int `json:"notes"`
	Blocks    int `json:"blocks"`
	Results   int `json:"results"`
	Holds     int `json:"holds"`
	Fails     int `json:"fails"`
	Undecided int `json:"undecided"`
}

// Open tells whether any claim does not hold: it fails, or is undecided, which
// is not shown to hold either.
func (t Tally) Open() bool { return t.Fails+t.Undecided > 0 }

func (t Tally) String() string {
	parts := []string{count(t.Notes, "note"), count(t.Blocks, "block"), count(t.Results, "result")}
	claims := t.Holds + t.Fails + t.Undecided
	if claims == 0 {
		return strings.Join(parts, ", ") + ", no claims"
	}
	return fmt.Sprintf("%s; %s: %d held, %d failed, %d undecided", strings.Join(parts, ", "), count(claims, "claim"), t.Holds, t.Fails, t.Undecided)
}

func count(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// Audited is the outcome of an audit.
type Audited struct {
	Tally  Tally
	Faults fault.List // sources, links and claims
	Broken bool       // a source is wrong
}

// Summary words the outcome on one line.
func (a Audited) Summary() string {
	if !a.Broken {
		return a.Tally.String()
	}
	errs := 0
	for _, d := range a.Faults {
		if d.Severity == fault.Error {
			errs++
		}
	}
	return count(errs, "error")
}

// Audit checks sources, links and claims, and writes nothing.
func Audit(ctx context.Context, src Source, o Options) (Audited, error) {
	s, faults, err := open(ctx, src, o)
	if err != nil {
		return Audited{}, err
	}
	a := Audited{Faults: faults, Broken: faults.Failed(), Tally: tally(s)}
	a.Faults = append(a.Faults, claimFaults(s)...)
	a.Faults.Sort()
	return a, nil
}

// WriteJSON writes the outcome as one object: the tally, and the faults with
// file, line, column, severity, block, key, message and remedy.
func (a Audited) WriteJSON(w io.Writer) error {
	type line struct {
		File     string `json:"file"`
		Line     int    `json:"line"`
		Column   int    `json:"column"`
		Severity string `json:"severity"`
		Block    string `json:"block"`
		Key      string `json:"key"`
		Message  string `json:"message"`
		Remedy   string `json:"remedy"`
	}
	lines := make([]line, 0, len(a.Faults))
	for _, d := range a.Faults {
		lines = append(lines, line{d.At.File, d.At.Line, d.At.Col, d.Severity.String(), d.Block, d.Key, d.Msg, d.Fix})
	}
	return writeJSON(w, struct {
		Tally  Tally  `json:"tally"`
		Faults []line `json:"faults"`
	}{a.Tally, lines})
}

func tally(s *study.Study) Tally {
	t := Tally{Notes: len(s.Book.Notes), Blocks: len(s.Blocks)}
	for _, b := range s.Blocks {
		t.Results += len(b.Results)
		for _, f := range b.Findings() {
			switch f.Standing {
			case kind.Holds:
				t.Holds++
			case kind.Fails:
				t.Fails++
			default:
				t.Undecided++
			}
		}
	}
	return t
}

// claimFaults words every claim that does not hold, at its place.
func claimFaults(s *study.Study) fault.List {
	var out fault.List
	for _, b := range s.Blocks {
		for _, f := range b.Findings() {
			if f.Standing != kind.Holds {
				out = append(out, b.FindingFault(f))
			}
		}
	}
	return out
}
