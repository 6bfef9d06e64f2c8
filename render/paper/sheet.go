// Package paper is the parts of a page that a block makes: words, tables,
// figures, claims, the method and what it assumes. It turns them into HTML.
// Block kinds fill a Sheet and write no HTML themselves.
package paper

import (
	"errors"
	"fmt"

	"saddlebook/diagram"
)

// A Value is a result as a reading prints it, for the cells of tables.
type Value struct {
	Text      string     // with its unit
	Bare      string     // without its unit
	Intervals []Interval // one per sampling
	Widest    string     // the widest of them
	Low, High *float64   // base quantities: the ends of the widest interval
}

// An Interval is the 5 to 95 % interval of a result under one sampling.
type Interval struct{ Case, Text string }

// Sheet collects what a block shows, in order.
type Sheet struct {
	block       Block
	value       func(key string) (Value, bool)
	parts       []part
	methods     []string
	assumptions []string
	cautions    []string
	uncertain   []string
	given       *Table
	figures     []Figure
	data        []Data
	errs        []error
}

// Block names the block a sheet belongs to.
type Block struct {
	ID   string // of the block; "" for a block without one
	Kind string
	Nth  int    // among the blocks of its kind on the page, from 1
	Text string // its source, as the author wrote it
	File string // where it stands, and from which line
	Line int
}

type part interface{ html(*writer) }

// New returns an empty sheet. value looks up a result of the block by its key
// without the block's id, such as "barrier/TSa@25 °C".
func New(b Block, value func(key string) (Value, bool)) *Sheet {
	return &Sheet{block: b, value: value}
}

// Table is a table with a caption. Each row has a cell for every column; the
// first one is its head.
type Table struct {
	Caption string
	Columns []Column
	Rows    [][]Cell
	Notes   []string // small, below it
}

// Column is one column of a table. A head with a unit reads as a quantity over
// its unit.
type Column struct {
	Head, Unit string
	Number     bool // set flush right
}

// Cell is one cell. Key is the result it shows; Beside stands small beside the
// text; Flags are short remarks; Strong marks the cell that matters most.
type Cell struct {
	Text, Key, Beside string
	Flags             []string
	Strong            bool
	verbatim          bool // a key, in which nothing is set as a formula
}

// Figure is a scene with its caption and the same numbers as a table.
type Figure struct {
	Scene   diagram.Scene
	Caption string
	Numbers Table
}

// ClaimRow is one claim with its standing: "holds", "fails" or "undecided".
// Margin, Probability, Asked and Why are "" if there is none.
type ClaimRow struct {
	Says, Reading, Value, Bound, Margin string
	Probability, Asked, Standing, Why   string
	Anchor                              string // of the claim within its block
}

type words string
type claims []ClaimRow

// Text is a cell of plain text.
func Text(s string) Cell { return Cell{Text: s} }

// Words adds a paragraph.
func (s *Sheet) Words(text string) { s.parts = append(s.parts, words(text)) }

// Table adds a table.
func (s *Sheet) Table(t Table) { s.parts = append(s.parts, t) }

// Figure adds a figure with its table of numbers.
func (s *Sheet) Figure(f Figure) {
	s.parts = append(s.parts, f)
	s.figures = append(s.figures, f)
}

// Claims adds claims with their standing.
func (s *Sheet) Claims(rows []ClaimRow) { s.parts = append(s.parts, claims(rows)) }

// Method adds a sentence on how the numbers were made. A sentence said before
// is not said again.
func (s *Sheet) Method(text string) { s.methods = once(s.methods, text) }

// Assumption adds a sentence on what the numbers rest on.
func (s *Sheet) Assumption(text string) { s.assumptions = once(s.assumptions, text) }

// Caution adds a warning that stands in the open, above the method.
func (s *Sheet) Caution(text string) { s.cautions = once(s.cautions, text) }

func once(list []string, text string) []string {
	for _, t := range list {
		if t == text {
			return list
		}
	}
	return append(list, text)
}

// Value is a cell with a result of this block, printed as readings print it.
func (s *Sheet) Value(key string) Cell {
	v := s.look(key)
	return Cell{Text: v.Text, Key: key}
}

// Bare is a cell with a result of this block without its unit, for a column
// that names the unit.
func (s *Sheet) Bare(key string) Cell {
	v := s.look(key)
	return Cell{Text: v.Bare, Key: key}
}

// Ends are the ends of the widest interval of a result, in base quantities;
// nil without one.
func (s *Sheet) Ends(key string) (low, high *float64) {
	v := s.look(key)
	return v.Low, v.High
}

// Interval words the widest 5 to 95 % interval of a result, or "".
func (s *Sheet) Interval(key string) string { return s.look(key).Widest }

// Given keeps a table of what the block was given, folded below it.
func (s *Sheet) Given(t Table) { s.given = &t }

// Intervals lists results whose intervals the block shows, where there are any.
func (s *Sheet) Intervals(keys ...string) { s.uncertain = append(s.uncertain, keys...) }

func (s *Sheet) look(key string) Value {
	v, ok := s.value(key)
	if !ok {
		s.Fail(fmt.Errorf("block %q shows %q, which it does not compute", s.block.ID, key))
	}
	return v
}

// Fail records that a part could not be made.
func (s *Sheet) Fail(err error) { s.errs = append(s.errs, err) }

// Err returns what could not be made, or nil.
func (s *Sheet) Err() error { return errors.Join(s.errs...) }

// Figures returns the figures added so far.
func (s *Sheet) Figures() []Figure { return s.figures }

// Empty tells whether the sheet has nothing to show.
func (s *Sheet) Empty() bool { return len(s.parts) == 0 && len(s.cautions) == 0 }
