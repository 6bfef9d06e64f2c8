package paper

import (
	"encoding/csv"
	"io"
	"math"
	"strconv"
	"strings"
)

// Data is a set of numbers for another program, kept as a CSV file beside the
// page: more of them than a table should show.
type Data struct {
	Name    string   // of the file, without its ending; follows the name of the block
	Notes   []string // lines that open the file, each behind a #
	Columns []string // with their units, such as "A / M"
	Rows    [][]float64
}

// Data adds a file of numbers beside the page.
func (s *Sheet) Data(d Data) { s.data = append(s.data, d) }

// Files returns the files of numbers added so far.
func (s *Sheet) Files() []Data { return s.data }

// CSV writes the data: the notes, a row of heads, then the numbers in full. A
// NaN or an infinity is an empty cell.
func (d Data) CSV(w io.Writer) error {
	for _, n := range d.Notes {
		if _, err := io.WriteString(w, "# "+strings.Join(strings.Fields(n), " ")+"\n"); err != nil {
			return err
		}
	}
	out := csv.NewWriter(w)
	if err := out.Write(d.Columns); err != nil {
		return err
	}
	for _, row := range d.Rows {
		cells := make([]string, len(row))
		for i, x := range row {
			if !math.IsNaN(x) && !math.IsInf(x, 0) {
				cells[i] = strconv.FormatFloat(x, 'g', 10, 64)
			}
		}
		if err := out.Write(cells); err != nil {
			return err
		}
	}
	out.Flush()
	return out.Error()
}
