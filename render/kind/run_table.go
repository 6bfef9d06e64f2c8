package kind

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"

	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// reached are the points within the run, in the order of time.
func (v *runValue) reached() []runPoint {
	var out []runPoint
	for _, q := range v.At {
		if q.Reached {
			out = append(out, q)
		}
	}
	slices.SortStableFunc(out, func(a, b runPoint) int { return cmp.Compare(a.T, b.T) })
	return out
}

// timeCell heads a row.
func (q runPoint) timeCell() paper.Cell {
	text := timeWords(q.T)
	if q.Condition != "end" {
		return paper.Text(spanTextWords(q.Condition, text))
	}
	c := paper.Text(text)
	c.Beside = "end"
	return c
}

// spanTextWords is a time as the author writes it, for the page.
func spanTextWords(condition, otherwise string) string {
	q, err := unit.Parse(condition, unit.Unit{}, unit.Time)
	if err != nil {
		return otherwise
	}
	return spanWords(q)
}

// table is the run table: what there is at each time.
func (s *runSource) table(v runValue, sheet *paper.Sheet) paper.Table {
	t := paper.Table{Caption: or(s.Caption, "The run at the times asked for"), Columns: []paper.Column{{Head: "Time", Number: true}, {Head: "T", Number: true}}}
	var keys []string // of the columns from the third on
	column := func(head, key string) {
		t.Columns = append(t.Columns, paper.Column{Head: head, Number: true})
		keys = append(keys, key)
	}
	for _, i := range v.dosed(s) {
		column(v.Labels[i]+" present", "amount/"+v.Names[i])
	}
	if v.Basis >= 0 {
		column("conversion of "+v.basisLabel(), "conversion")
	}
	for g, group := range s.Products {
		switch {
		case v.Basis >= 0:
			column("yield of "+v.Products[g], "yield/"+group.Name)
		default:
			column("share of "+v.Products[g], "share/"+group.Name)
		}
	}
	if len(s.Products) == 0 && v.Basis < 0 {
		for _, i := range v.main(6) {
			column(v.Labels[i], "amount/"+v.Names[i])
		}
	}
	if len(v.Pairs) == 1 {
		item := s.pairName(v.Pairs[0])
		column(v.Products[0]+" : "+v.Products[1], "ratio/"+item)
	}
	if len(s.Enantiomers) == 2 {
		column("ee", "ee")
	}
	if len(v.Pairs) == 1 && v.Pairs[0].noControl() == "" {
		column("control", "control/"+s.pairName(v.Pairs[0]))
	}
	if v.Basis >= 0 && len(s.Products) > 0 {
		column("mass balance", "mass-balance")
	}
	if v.Heat.Shown && len(v.Heat.Unknown) == 0 {
		head := "heat left"
		if len(s.Doses) > 0 {
			head = "heat left in the pot"
		}
		column(head, "heat-left")
	}
	for _, q := range v.reached() {
		at := "@" + q.Condition
		row := []paper.Cell{q.timeCell(), sheet.Value("temperature" + at)}
		for _, key := range keys {
			c := sheet.Value(key + at)
			if strings.HasPrefix(key, "ratio/") || key == "ee" {
				c = withDistinctInterval(sheet, key+at)
			}
			if v.wordy(q, key) {
				c.Text = "–"
			}
			if key == "heat-left" && !q.HeatRise.none() {
				c.Beside = unit.Print(float64(q.HeatRise), kelvinUnit, unit.FormRise)
			}
			row = append(row, c)
		}
		t.Rows = append(t.Rows, row)
	}
	if v.Basis >= 0 && len(s.Products) > 0 {
		t.Notes = append(t.Notes, fmt.Sprintf("Mass balance: %s left and in the listed products; what is missing is in species that are not listed, or was removed.", v.basisLabel()))
	}
	if s.dosesBasis() {
		t.Notes = append(t.Notes, fmt.Sprintf("While %s is still added, conversion and yields are of what was added by then; the figure shows concentrations.", v.basisLabel()))
	}
	if v.Heat.PerRise && len(v.Heat.Unknown) == 0 {
		t.Notes = append(t.Notes, "Heat left: the most that the listed steps can still give from what is in the pot; beside it the adiabatic rise, if all of it came at once.")
	}
	return t
}

// dosed are the species that are dosed, each once.
func (v *runValue) dosed(s *runSource) []int {
	var out []int
	for _, d := range s.Doses {
		if i := slices.Index(v.Names, d.Species); i >= 0 && !slices.Contains(out, i) {
			out = append(out, i)
		}
	}
	return out
}

// wordy tells that a result has words in place of a number, which stand below
// the table.
func (v *runValue) wordy(q runPoint, key string) bool {
	quantity, _, _ := strings.Cut(key, "/")
	switch quantity {
	case "control":
		return q.Control[0].none()
	case "ratio":
		return v.ratio(0, 1, q).Kind == Nothing
	case "ee":
		return v.unformed(q)
	}
	return false
}

// pairTable compares the products two by two, where there are more of them.
func (s *runSource) pairTable(v runValue, sheet *paper.Sheet) paper.Table {
	t := paper.Table{Caption: "Products two by two", Columns: []paper.Column{{Head: "Time", Number: true}, {Head: "Products"}, {Head: "ratio", Number: true}}}
	controlled := slices.ContainsFunc(v.Pairs, func(p runPair) bool { return p.noControl() == "" })
	if controlled {
		t.Columns = append(t.Columns, paper.Column{Head: "control", Number: true})
	}
	for _, q := range v.reached() {
		for i, p := range v.Pairs {
			item := s.pairName(p) + "@" + q.Condition
			ratio, control := withDistinctInterval(sheet, "ratio/"+item), sheet.Value("control/"+item)
			if v.ratio(p.A, p.B, q).Kind == Nothing {
				ratio.Text = "–"
			}
			if q.Control[i].none() {
				control.Text = "–"
			}
			row := []paper.Cell{q.timeCell(), paper.Text(v.Products[p.A] + " : " + v.Products[p.B]), ratio}
			if controlled {
				row = append(row, control)
			}
			t.Rows = append(t.Rows, row)
		}
	}
	return t
}

// main are the species of which there is most at some time, most first, at most
// n of them.
func (v *runValue) main(n int) []int {
	most := make([]float64, len(v.Names))
	for _, list := range [][]runPoint{v.Trace, v.At} {
		for _, q := range list {
			for i, c := range q.C {
				most[i] = math.Max(most[i], c)
			}
		}
	}
	order := make([]int, len(most))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(most[b], most[a]) })
	var out []int
	for _, i := range order {
		if len(out) < n && most[i] > 0.02*most[order[0]] {
			out = append(out, i)
		}
	}
	slices.Sort(out)
	return out
}

// withDistinctInterval is withInterval where the interval says more than the value.
func withDistinctInterval(sheet *paper.Sheet, key string) paper.Cell {
	if i := sheet.Interval(key); i != "" && !telling(sheet.Value(key).Text, i) {
		return sheet.Value(key)
	}
	return withInterval(sheet, key)
}
