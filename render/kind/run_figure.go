package kind

import (
	"fmt"
	"math"
	"slices"

	"saddlebook/diagram"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// figure draws the run over time.
func (s *runSource) figure(v runValue, sheet *paper.Sheet) {
	if len(v.Trace) == 0 {
		return
	}
	c := diagram.TimeCourse{ID: s.ID, Title: or(s.Caption, ""), Programme: v.nodes(), Events: s.events(v)}
	if lines, ok := s.shareLines(v, sheet); ok {
		c.Share, c.Axis, c.Lines = true, "share of "+v.basisLabel()+" charged", lines
	} else {
		c.Lines, c.Unit = s.amountLines(v, sheet)
	}
	c.Log = v.early()
	scene, err := c.Scene()
	if err != nil {
		sheet.Fail(err)
		return
	}
	scene.Desc += " " + caution // it goes where the figure goes
	sheet.Figure(paper.Figure{Scene: scene, Caption: or(s.Caption, "The run over time") + ".", Numbers: numbersOf(c)})
}

// numbersOf lists what the lines show at some of their times, evenly spread.
func numbersOf(c diagram.TimeCourse) paper.Table {
	t := paper.Table{Caption: "The lines of the figure", Columns: []paper.Column{{Head: "Time", Number: true}}}
	for _, l := range c.Lines {
		t.Columns = append(t.Columns, paper.Column{Head: l.Label, Unit: c.Unit, Number: true})
	}
	times := c.Lines[0].T
	const rows = 16
	end, next := times[len(times)-1], 0.0
	for k, at := range times {
		if at < next && k < len(times)-1 {
			continue
		}
		for next <= at {
			next += end / rows
		}
		row := []paper.Cell{paper.Text(unit.Span(at))}
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

// mostLines is how many lines one figure has.
const mostLines = 8

// minor is how much of a species there must be, against the largest, for a line.
const minor = 0.02

// line is a line of the trace.
func (v *runValue) line(name, label, text string, y func(runPoint) float64) diagram.TimeLine {
	l := diagram.TimeLine{Name: name, Label: label, Text: text}
	for _, q := range v.Trace {
		l.T = append(l.T, q.T)
		l.Y = append(l.Y, y(q))
	}
	return l
}

// shareLines draws what became of the basis: what is left of it, the yields, and
// intermediates of which there is some. It is not ok where there is no basis or
// something is more than all of it.
func (s *runSource) shareLines(v runValue, sheet *paper.Sheet) ([]diagram.TimeLine, bool) {
	if v.Basis < 0 || len(s.Products) == 0 {
		return nil, false
	}
	share := func(mol float64) float64 { return math.Max(0, mol) / float64(v.BasisCharged) }
	var lines []diagram.TimeLine
	drawn := map[int]bool{v.Basis: true}
	listed := false
	for _, members := range v.Members {
		for _, i := range members {
			drawn[i] = true
			listed = listed || i == v.Basis
		}
	}
	if !listed {
		lines = append(lines, v.line("basis", v.basisLabel(), "", func(q runPoint) float64 { return share(q.C[v.Basis]) }))
	}
	for g, product := range s.Products {
		l := v.line("product "+product.Name, v.Products[g], sheet.Value("yield/"+product.Name+"@end").Text, func(q runPoint) float64 { return share(v.Units[g] * v.amount(g, q.C)) })
		l.Emphasis = true
		lines = append(lines, l)
	}
	for _, i := range v.main(len(v.Names)) {
		if drawn[i] || v.Charged[i] > 0 || len(lines) >= mostLines {
			continue
		}
		l := v.line("species "+v.Names[i], v.Labels[i], "", func(q runPoint) float64 { return share(q.C[i]) })
		if slices.Max(l.Y) >= minor {
			lines = append(lines, l)
		}
	}
	for _, l := range lines {
		for i, y := range l.Y {
			if y > 1+1e-6 {
				return nil, false
			}
			l.Y[i] = math.Min(y, 1)
		}
	}
	return lines, len(lines) <= 12
}

// amountLines draws concentrations: of the products and of the main species.
func (s *runSource) amountLines(v runValue, sheet *paper.Sheet) ([]diagram.TimeLine, string) {
	most := 0.0
	for _, q := range v.Trace {
		for _, c := range q.C {
			most = math.Max(most, c)
		}
	}
	u := molar
	for _, symbol := range []string{"mM", "µM", "nM"} {
		if most < u.Base(0.01) {
			u = unit.Must(symbol)
		}
	}
	var lines []diagram.TimeLine
	drawn := map[int]bool{}
	for g, product := range s.Products {
		if len(lines) == mostLines {
			break
		}
		for _, i := range v.Members[g] {
			drawn[i] = true
		}
		l := v.line("product "+product.Name, v.Products[g], "", func(q runPoint) float64 { return u.Of(v.amount(g, q.C)) })
		l.Emphasis = true
		lines = append(lines, l)
	}
	for _, i := range v.main(mostLines) {
		if !drawn[i] && len(lines) < mostLines {
			lines = append(lines, v.line("species "+v.Names[i], v.Labels[i], sheet.Value("amount/"+v.Names[i]+"@end").Text, func(q runPoint) float64 { return u.Of(math.Max(0, q.C[i])) }))
		}
	}
	return lines, u.Symbol
}

// nodes are the corners of the programme.
func (v *runValue) nodes() []diagram.TimeNode {
	var out []diagram.TimeNode
	at := 0.0
	node := func(kelvin float64) {
		x := celsius.Of(kelvin)
		out = append(out, diagram.TimeNode{T: at, Value: x, Text: unit.PrintBare(kelvin, celsius, unit.FormKelvin)})
	}
	for _, l := range v.Legs {
		if !l.Ramp {
			node(l.To)
		}
		at += l.Lasts
		node(l.To)
	}
	return out
}

// events are what happens at an instant: doses, removals, and where control or
// the ratio of the only two products turns.
func (s *runSource) events(v runValue) []diagram.TimeMark {
	var out []diagram.TimeMark
	mark := func(t float64, text string) {
		if t <= v.End {
			out = append(out, diagram.TimeMark{T: t, Text: text})
		}
	}
	for _, d := range s.Doses {
		amount := fmt.Sprintf("%s %s", amountWords(d.Amount), v.label(d.Species))
		switch {
		case d.At != nil:
			mark(d.At.SI, "add "+amount)
		case d.Over != nil:
			from := 0.0
			if d.From != nil {
				from = d.From.SI
			}
			mark(from, fmt.Sprintf("add %s over %s", amount, spanWords(*d.Over)))
		}
	}
	for _, r := range s.Removal {
		switch {
		case r.At != nil:
			mark(r.At.SI, "remove "+v.label(r.Species))
		case r.From != nil:
			mark(r.From.SI, "remove "+v.label(r.Species)+" from here on")
		default:
			mark(0, "remove "+v.label(r.Species)+" from here on")
		}
	}
	if len(v.Pairs) == 1 {
		p := v.Pairs[0]
		if !p.Changeover.none() {
			mark(float64(p.Changeover), "control changes over")
		}
		if !p.Even.none() {
			mark(float64(p.Even), fmt.Sprintf("%s : %s is 1", v.Products[p.A], v.Products[p.B]))
		}
	}
	slices.SortStableFunc(out, func(a, b diagram.TimeMark) int {
		switch {
		case a.T < b.T:
			return -1
		case a.T > b.T:
			return 1
		}
		return 0
	})
	return out
}

// early tells that half of all change is over within the first hundredth of the
// run, so that only a logarithmic time axis shows it.
func (v *runValue) early() bool {
	total, soon := 0.0, 0.0
	for k := 1; k < len(v.Trace); k++ {
		step := 0.0
		for i, c := range v.Trace[k].C {
			step += math.Abs(c - v.Trace[k-1].C[i])
		}
		total += step
		if v.Trace[k].T <= v.End/100 {
			soon += step
		}
	}
	return total > 0 && soon > total/2
}

// file is the run over time as numbers for another program.
func (s *runSource) file(v runValue, sheet *paper.Sheet) {
	d := paper.Data{Name: "course", Notes: []string{caution, "T / K is the programme. Yields and conversion are fractions of the basis charged by then."},
		Columns: []string{"time / s", "T / K"}}
	for _, name := range v.Names {
		d.Columns = append(d.Columns, name+" / M")
	}
	if v.Basis >= 0 {
		d.Columns = append(d.Columns, "conversion of "+v.Names[v.Basis])
		for _, p := range s.Products {
			d.Columns = append(d.Columns, "yield of "+p.Name)
		}
	}
	for _, p := range v.Pairs {
		d.Columns = append(d.Columns, "control "+s.pairName(p))
	}
	heat := v.Heat.Shown && len(v.Heat.Unknown) == 0
	if heat {
		d.Columns = append(d.Columns, "heat rate / W/L", "heat left / J/L")
	}
	for _, q := range v.Trace {
		row := append([]float64{q.T, q.Kelvin}, q.C...)
		if v.Basis >= 0 {
			row = append(row, float64(q.Conversion))
			for _, y := range q.Yields {
				row = append(row, float64(y))
			}
		}
		for _, c := range q.Control {
			row = append(row, float64(c))
		}
		if heat {
			row = append(row, float64(q.HeatRate), float64(q.HeatLeft))
		}
		d.Rows = append(d.Rows, row)
	}
	if len(d.Rows) > 0 {
		sheet.Data(d)
	}
}
