package kind

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/kinetics/unit"
)

// tableSource is a CSV file that gives energies as calculations leave them.
type tableSource struct {
	File string   `key:"file"`
	Sum  []string `key:"sum"`
	Unit string   `key:"unit"`
}

type tableRow struct {
	name, reaction, label, source string
	energy                        float64 // J/mol
	line                          int
}

// read reads the file: a header row, then one row for each state.
func (t *tableSource) read(in Inputs, energies string) ([]tableRow, fault.Problems) {
	path := []string{"table", "file"}
	data, err := in.File(t.File)
	if err != nil {
		return nil, fault.Problems{&fault.Problem{Path: path, Severity: fault.Error, Msg: fmt.Sprintf("%q cannot be read: %v", t.File, err), Fix: "put the file beside the note", Err: err}}
	}
	u, err := unit.Lookup(or(t.Unit, or(energies, "kcal/mol")), unit.MolarEnergy)
	if err != nil {
		return nil, fault.Problems{problem([]string{"table", "unit"}, err.Error(), "write \"Eh\"")}
	}
	var problems fault.Problems
	at := func(line, col int, msg, fix string) {
		problems = append(problems, &fault.Problem{Path: path, File: t.File, Line: line, Col: col, Severity: fault.Error, Msg: msg, Fix: fix})
	}
	r := csv.NewReader(bytes.NewReader(bytes.TrimPrefix(data, []byte("\ufeff"))))
	r.TrimLeadingSpace = true
	r.Comment = '#'
	head, err := r.Read()
	if err != nil {
		at(1, 1, "the table has no header row", "begin it with a row such as name,reaction,E,Gcorr")
		return nil, problems
	}
	column := map[string]int{}
	for i, h := range head {
		column[strings.TrimSpace(h)] = i
	}
	for _, need := range append([]string{"name"}, t.Sum...) {
		if _, ok := column[need]; !ok {
			at(1, 1, fmt.Sprintf("the table has no column %q", need), suggest(need, head))
		}
	}
	if len(problems) > 0 {
		return nil, problems
	}
	var rows []tableRow
	seen := map[string]int{}
	for {
		cells, err := r.Read()
		if errors.Is(err, io.EOF) {
			return rows, problems
		}
		var bad *csv.ParseError
		if errors.As(err, &bad) {
			at(bad.Line, bad.Column, bad.Err.Error(), "give every row as many cells as the header row and close every quote")
			return nil, problems
		}
		cell := func(name string) string {
			if i, ok := column[name]; ok {
				return strings.TrimSpace(cells[i])
			}
			return ""
		}
		line, _ := r.FieldPos(0)
		row := tableRow{name: cell("name"), reaction: cell("reaction"), label: cell("label"), source: cell("source"), line: line}
		if first := seen[row.name]; first > 0 {
			at(line, 1, fmt.Sprintf("state %q stands in row %d too", row.name, first), "keep one of the rows")
		}
		seen[row.name] = line
		if row.name == "" {
			at(line, 1, "the row has no name", "write the name of a species or step in column name")
		}
		for _, c := range t.Sum {
			q, err := unit.Parse(cell(c), u, unit.MolarEnergy)
			if err != nil || q.SD != 0 {
				l, col := r.FieldPos(column[c])
				at(l, col, fmt.Sprintf("%q in column %q is not a plain number", cell(c), c), "write a number such as -12.4")
				continue
			}
			row.energy += q.SI
		}
		rows = append(rows, row)
	}
}

// merge adds the states that only the table declares.
func merge(species []speciesSource, steps []stepSource, rows []tableRow) ([]speciesSource, []stepSource) {
	have := map[string]bool{}
	for _, s := range species {
		have[s.Name] = true
	}
	for _, s := range steps {
		have[s.Name] = true
	}
	for _, r := range rows {
		switch {
		case have[r.name]:
		case r.reaction != "":
			steps = append(steps[:len(steps):len(steps)], stepSource{Name: r.name, Reaction: r.reaction})
		default:
			species = append(species[:len(species):len(species)], speciesSource{Name: r.name})
		}
	}
	return species, steps
}
