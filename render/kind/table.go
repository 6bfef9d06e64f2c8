package kind

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

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
	name, reaction, label, source, formula string
	energy                                 float64 // J/mol
	line, reactionCol, formulaCol          int     // where the row, its reaction and its formula stand
}

// read reads the file: a header row, then one row for each state.
func (t *tableSource) read(in Inputs, energies string) ([]tableRow, fault.Problems) {
	path := []string{"table", "file"}
	data, err := in.File(t.File)
	if err != nil {
		fix := "make the file readable"
		var remedy interface{ Remedy() string }
		if errors.As(err, &remedy) {
			fix = remedy.Remedy()
		}
		return nil, fault.Problems{&fault.Problem{Path: path, Severity: fault.Error, Msg: fmt.Sprintf("%q cannot be read: %v", t.File, err), Fix: fix, Err: err}}
	}
	u, err := unit.Lookup(or(t.Unit, or(energies, "kcal/mol")), unit.MolarEnergy)
	if err != nil {
		return nil, fault.Problems{problem([]string{"table", "unit"}, err.Error(), "write \"Eh\"")}
	}
	var problems fault.Problems
	data = bytes.TrimPrefix(data, []byte("\ufeff"))
	lines := bytes.Split(data, []byte("\n"))
	column := func(line, byteCol int) int { // in characters, from 1
		text := lines[line-1]
		return 1 + utf8.RuneCount(text[:min(byteCol-1, len(text))])
	}
	at := func(line, byteCol int, msg, fix string) {
		problems = append(problems, &fault.Problem{Path: path, File: t.File, Line: line, Col: column(line, byteCol), Severity: fault.Error, Msg: msg, Fix: fix})
	}
	quote := func(err error) { // the only other fault of a row: how many cells it has is checked below
		var bad *csv.ParseError
		if errors.As(err, &bad) {
			at(bad.Line, bad.Column, "a double quote is out of place", "close every double quote, and write \"\" for one inside a quoted cell")
		}
	}
	for i, line := range lines {
		if !utf8.Valid(line) {
			bad := 0
			for c, width := utf8.DecodeRune(line); c != utf8.RuneError || width != 1; c, width = utf8.DecodeRune(line[bad:]) {
				bad += width
			}
			at(i+1, bad+1, fmt.Sprintf("the byte 0x%02X is not UTF-8", line[bad]), "save the file as UTF-8")
			return nil, problems
		}
	}
	r := csv.NewReader(bytes.NewReader(data))
	r.TrimLeadingSpace, r.FieldsPerRecord = true, -1
	r.Comment = '#'
	head, err := r.Read()
	if errors.Is(err, io.EOF) {
		at(1, 1, "the table has no header row", "begin it with a row such as name,reaction,E,Gcorr")
		return nil, problems
	}
	if quote(err); err != nil {
		return nil, problems
	}
	line, first := r.FieldPos(0)
	if len(head) == 1 && strings.Contains(head[0], ";") {
		at(line, first, "semicolons stand between the cells", "write commas there, and points in numbers")
		return nil, problems
	}
	if len(head) == 1 && strings.Contains(head[0], "\t") {
		at(line, first, "tabs stand between the cells", "write commas there")
		return nil, problems
	}
	index := map[string]int{}
	var columns []string
	for i, h := range head {
		h = strings.TrimSpace(h)
		if _, twice := index[h]; twice {
			_, col := r.FieldPos(i)
			at(line, col, fmt.Sprintf("the table has two columns %q", h), "rename one of them")
			continue
		}
		index[h] = i
		columns = append(columns, h)
	}
	if _, ok := index["name"]; !ok {
		at(line, first, "the header row has no column \"name\"", "write name over the column of the states")
	}
	for i, need := range t.Sum {
		if _, ok := index[need]; !ok {
			problems = append(problems, problem([]string{"table", "sum", fmt.Sprint(i + 1)}, fmt.Sprintf("%q has no column %q", t.File, need), suggest(need, columns)))
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
		if quote(err); err != nil {
			return nil, problems
		}
		line, _ := r.FieldPos(0)
		if len(cells) != len(head) {
			at(line, 1, fmt.Sprintf("the row has %d cells and the header row has %d", len(cells), len(head)), "give it as many, empty ones too")
			continue
		}
		cell := func(name string) string {
			if i, ok := index[name]; ok {
				return strings.TrimSpace(cells[i])
			}
			return ""
		}
		row := tableRow{name: cell("name"), reaction: cell("reaction"), label: cell("label"), source: cell("source"), formula: cell("formula"), line: line}
		if i, ok := index["reaction"]; ok {
			_, col := r.FieldPos(i)
			row.reactionCol = column(line, col)
		}
		if i, ok := index["formula"]; ok {
			_, col := r.FieldPos(i)
			row.formulaCol = column(line, col)
		}
		switch first := seen[row.name]; {
		case row.name == "":
			at(line, 1, "the row has no name", "write the name of a species or step in column name")
		case first > 0:
			at(line, 1, fmt.Sprintf("state %q stands in line %d too", row.name, first), "keep one of the rows")
		default:
			seen[row.name] = line
		}
		for _, c := range t.Sum {
			q, err := unit.Parse(cell(c), u, unit.MolarEnergy)
			l, col := r.FieldPos(index[c])
			var bad *unit.Error
			switch {
			case cell(c) == "":
				at(l, col, fmt.Sprintf("the cell in column %q is empty", c), "write a number, 0 where there is nothing to add")
			case errors.As(err, &bad):
				why := ": " + bad.Msg
				if tail, ok := strings.CutPrefix(bad.Msg, fmt.Sprintf("%q", cell(c))); ok {
					why = tail
				}
				at(l, col, fmt.Sprintf("%q in column %q%s", cell(c), c, why), bad.Fix)
			case q.SD != 0:
				at(l, col, fmt.Sprintf("%q in column %q has a ±", cell(c), c), "write the number alone, and the ± as error in the block")
			default:
				row.energy += q.SI
			}
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
			steps = append(steps[:len(steps):len(steps)], stepSource{Name: r.name}) // step takes the reaction from the row
		default:
			species = append(species[:len(species):len(species)], speciesSource{Name: r.name})
		}
	}
	return species, steps
}
