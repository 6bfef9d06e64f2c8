package render

import (
	"context"
	"encoding/csv"
	"fmt"
	"io"
	"strconv"

	"saddlebook/content/fault"
	"saddlebook/render/kind"
	"saddlebook/render/study"
)

// A Line is one result with its place.
type Line struct {
	Note   string
	Result kind.Result
	File   string
	Line   int
}

// Results lists every result of a notebook, or of one note of it, in the
// order of the notes and of the blocks in them.
func Results(ctx context.Context, src Source, o Options) ([]Line, fault.List, error) {
	s, faults, err := open(ctx, src, o)
	if err != nil {
		return nil, faults, err
	}
	var out []Line
	for _, b := range s.Blocks {
		if src.Only != "" && b.Source.Note.Path != src.Only {
			continue
		}
		for _, r := range b.Results {
			r.Key.Note = b.Source.Note.Name
			out = append(out, Line{b.Source.Note.Name, r, b.Source.At.File, b.Source.At.Line})
		}
	}
	return out, faults, nil
}

// WriteResults writes the lines as text, csv or json.
func WriteResults(w io.Writer, lines []Line, format string) error {
	switch format {
	case "text":
		for _, l := range lines {
			if _, err := fmt.Fprintln(w, l.text()); err != nil {
				return err
			}
		}
		return nil
	case "csv":
		out := csv.NewWriter(w)
		if err := out.Write([]string{"key", "value", "unit", "low", "high", "file", "line"}); err != nil {
			return err
		}
		for _, l := range lines {
			low, high := l.ends()
			if err := out.Write([]string{l.Result.Key.String(), l.value(), l.Result.Unit.Symbol, low, high, l.File, strconv.Itoa(l.Line)}); err != nil {
				return err
			}
		}
		out.Flush()
		return out.Error()
	case "json":
		list := make([]jsonLine, 0, len(lines))
		for _, l := range lines {
			list = append(list, l.json())
		}
		return writeJSON(w, list)
	}
	return fmt.Errorf("%q is not a format; write text, csv or json", format)
}

// six prints six significant digits: the numbers of a solver run at 1e-9 do
// not flicker in a diff.
func (l Line) six(base float64) string {
	return strconv.FormatFloat(l.Result.InUnit(base), 'g', 6, 64)
}

func (l Line) value() string {
	if l.Result.Value.Kind == kind.Real {
		return l.six(l.Result.Value.Value)
	}
	return l.Result.Value.Text
}

func (l Line) ends() (low, high string) {
	if l.Result.Low == nil || l.Result.High == nil {
		return "", ""
	}
	return l.six(*l.Result.Low), l.six(*l.Result.High)
}

func (l Line) text() string {
	s := l.Result.Key.String() + " = " + l.value()
	if l.Result.Value.Kind == kind.Real && l.Result.Unit.Symbol != "" {
		s += " " + l.Result.Unit.Symbol
	}
	if low, high := l.ends(); low != "" {
		s += " (5 to 95 %: " + low + " to " + high + ")"
	}
	return s
}

// jsonLine is one object of `results --format json`: the value a number at
// full precision, words, or null where there is no number.
type jsonLine struct {
	Key   string   `json:"key"`
	Value any      `json:"value"`
	Unit  string   `json:"unit"`
	Low   *float64 `json:"low"`
	High  *float64 `json:"high"`
	File  string   `json:"file"`
	Line  int      `json:"line"`
}

func (l Line) json() jsonLine {
	r := l.Result
	j := jsonLine{Key: r.Key.String(), Unit: r.Unit.Symbol, File: l.File, Line: l.Line}
	switch r.Value.Kind {
	case kind.Real:
		j.Value = r.InUnit(r.Value.Value)
	case kind.Words:
		j.Value = r.Value.Text
	}
	if r.Low != nil && r.High != nil {
		low, high := r.InUnit(*r.Low), r.InUnit(*r.High)
		j.Low, j.High = &low, &high
	}
	return j
}

// resultsOf lists the results of one block, for its downloads.
func resultsOf(b *study.Block) []Line {
	var out []Line
	for _, r := range b.Results {
		r.Key.Note = b.Source.Note.Name
		out = append(out, Line{b.Source.Note.Name, r, b.Source.Note.Path, b.Source.At.Line})
	}
	return out
}
