package kind

import (
	"math"
	"slices"

	"saddlebook/diagram"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// numberRows is how many rows the numbers of a figure have, besides those that
// must be there.
const numberRows = 12

// numbers lists what the lines show: where results are asked for, where a leg or
// a dose begins or ends, where control or a ratio turns, where a yield or the
// heat rate is highest, and between these where the lines change.
func (s *runSource) numbers(v runValue, c diagram.TimeCourse) paper.Table {
	t := paper.Table{Caption: "The lines of the figure", Columns: []paper.Column{{Head: "Time", Number: true}}}
	for _, l := range c.Lines {
		t.Columns = append(t.Columns, paper.Column{Head: l.Label, Unit: c.Unit, Number: true})
	}
	times := c.Lines[0].T
	rows := rowsAt(c.Lines, s.moments(v))
	var at []float64
	for _, k := range rows {
		at = append(at, times[k])
	}
	words := distinctTimes(at)
	for n, k := range rows {
		row := []paper.Cell{paper.Text(words[n])}
		for _, l := range c.Lines {
			text := unit.Digits(l.Y[k], 3)
			if c.Share {
				text = unit.Percent(l.Y[k])
			}
			row = append(row, paper.Text(text))
		}
		t.Rows = append(t.Rows, row)
	}
	return t
}

// moments are the times at which something happens, s.
func (s *runSource) moments(v runValue) []float64 {
	out := []float64{0, v.End}
	put := func(t float64) {
		if t >= 0 && t <= v.End { // and no NaN
			out = append(out, t)
		}
	}
	for _, q := range v.reached() {
		put(q.T)
	}
	end := 0.0
	for _, l := range v.Legs {
		end += l.Lasts
		put(end)
	}
	for _, d := range s.Doses {
		from, lasts, _ := d.when(0, end)
		put(from)
		put(from + lasts)
	}
	for _, r := range s.Removal {
		if how, ps := r.how(0, end); len(ps) == 0 {
			put(how.From)
		}
	}
	for _, p := range v.Pairs {
		put(float64(p.Changeover))
		put(float64(p.Even))
	}
	for _, p := range v.Peaks {
		put(float64(p.T))
	}
	return out
}

// rowsAt chooses points of the lines: the last one at or next to each moment, and
// others so that about the same happens from one to the next.
func rowsAt(lines []diagram.TimeLine, moments []float64) []int {
	times := lines[0].T
	n := len(times)
	chosen := make([]bool, n)
	for _, t := range moments {
		k, _ := slices.BinarySearch(times, t*(1-1e-12))
		k = min(k, n-1)
		if k > 0 && t-times[k-1] < times[k]-t {
			k--
		}
		for k+1 < n && times[k+1] == times[k] {
			k++ // after a jump
		}
		chosen[k] = true
	}
	most := 0.0
	for _, l := range lines {
		most = math.Max(most, slices.Max(l.Y))
	}
	way := make([]float64, n) // how much has changed, over the range of each
	for k := 1; k < n; k++ {
		way[k] = way[k-1] + 0.3*(times[k]-times[k-1])/(times[n-1]-times[0])
		for _, l := range lines {
			if most > 0 {
				way[k] += math.Abs(l.Y[k]-l.Y[k-1]) / most
			}
		}
	}
	step := way[n-1] / numberRows
	gap := func(k int) bool { // no row is within half a step
		for j := k; j >= 0 && way[k]-way[j] < step/2; j-- {
			if chosen[j] {
				return false
			}
		}
		for j := k; j < n && way[j]-way[k] < step/2; j++ {
			if chosen[j] {
				return false
			}
		}
		return true
	}
	var out []int
	for k := range n {
		if !chosen[k] && (k+1 == n || times[k+1] > times[k]) && gap(k) {
			chosen[k] = true
		}
		if chosen[k] {
			out = append(out, k)
		}
	}
	return out
}
