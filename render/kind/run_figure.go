package kind

import (
	"cmp"
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
	caption := or(s.Caption, "The run over time") + "."
	if lines, ok := s.shareLines(v, sheet); ok {
		c.Share, c.Axis, c.Lines = true, "share of "+v.basisLabel()+" charged", lines
	} else {
		var apart []int
		c.Lines, c.Unit, apart = s.amountLines(v)
		for _, i := range apart {
			caption += fmt.Sprintf(" Not drawn, being in large excess: %s.", v.Labels[i])
		}
	}
	if c.Log = v.early(); c.Log {
		caption += " The time axis is logarithmic: most happens early."
	}
	scene, err := c.Scene()
	if err != nil {
		sheet.Fail(err)
		return
	}
	scene.Desc += " " + caution // it goes where the figure goes
	sheet.Figure(paper.Figure{Scene: scene, Caption: caption, Numbers: s.numbers(v, c)})
}

// mostLines is how many lines one figure has.
const mostLines = 8

// minor is how much of a species there must be, against the largest, for a line.
const minor = 0.02

// points are those of the trace, and those asked for where it has none.
func (v *runValue) points() []runPoint {
	out := slices.Clone(v.Trace)
	for _, q := range v.reached() {
		k, found := slices.BinarySearchFunc(out, q.T, func(p runPoint, t float64) int { return cmp.Compare(p.T, t) })
		if !found {
			out = slices.Insert(out, k, q)
		}
	}
	return out
}

// line is a line over the points.
func (v *runValue) line(name, label, text string, y func(runPoint) float64) diagram.TimeLine {
	l := diagram.TimeLine{Name: name, Label: label, Text: text}
	for _, q := range v.points() {
		l.T = append(l.T, q.T)
		l.Y = append(l.Y, y(q))
	}
	return l
}

// shareLines draws what became of the basis: what is left of it, the yields, and
// intermediates that hold some of it. It is not ok where there is no basis, where
// something is dosed or a reagent runs out, which shares would not show, and where
// something is more than all of the basis.
func (s *runSource) shareLines(v runValue, sheet *paper.Sheet) ([]diagram.TimeLine, bool) {
	if v.Basis < 0 || len(s.Products) == 0 || len(s.Doses) > 0 || len(v.scarce()) > 0 {
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
		holds := float64(v.Holds[i])
		if drawn[i] || !(holds > 0) || len(lines) >= mostLines {
			continue
		}
		l := v.line("species "+v.Names[i], v.Labels[i], "", func(q runPoint) float64 { return share(holds * q.C[i]) })
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

// What is charged in less than catalytic equivalents of the basis counts as a
// catalyst, and what is in more than excess equivalents hides the rest in a figure.
const (
	catalytic = 0.2
	excess    = 5
)

// scarce are the reagents that run out before the basis does: most of one is used
// up, and less is left of it.
func (v *runValue) scarce() []int {
	if v.Basis < 0 || len(v.Trace) == 0 {
		return nil
	}
	last, base := v.Trace[len(v.Trace)-1].C, float64(v.BasisCharged)
	left := last[v.Basis] / base
	var out []int
	for i, c := range v.Charged {
		if i != v.Basis && !(v.Holds[i] > 0) && c >= catalytic*base && last[i] < c/2 && last[i] < c*(left-0.01) {
			out = append(out, i)
		}
	}
	return out
}

// amountLines draws concentrations: of the products, of what is dosed, of the
// basis and what runs out, and of the main species. apart are those in so large
// an excess that they are left out.
func (s *runSource) amountLines(v runValue) (lines []diagram.TimeLine, symbol string, apart []int) {
	last := v.Trace[len(v.Trace)-1].C
	drawn := map[int]bool{}
	for g, product := range s.Products {
		if len(lines) == mostLines {
			break
		}
		for _, i := range v.Members[g] {
			drawn[i] = true
		}
		l := v.line("product "+product.Name, v.Products[g], unit.Print(v.amount(g, last), molar, unit.FormMolar), func(q runPoint) float64 { return v.amount(g, q.C) })
		l.Emphasis = true
		lines = append(lines, l)
	}
	main := slices.Concat(v.dosed(s), v.scarce())
	if v.Basis >= 0 {
		main = append(main, v.Basis)
	}
	for k, i := range slices.Concat(main, v.main(len(v.Names))) {
		if drawn[i] {
			continue
		}
		drawn[i] = true
		if k >= len(main) && v.Basis >= 0 && v.Charged[i] > excess*float64(v.BasisCharged) {
			apart = append(apart, i)
			continue
		}
		if len(lines) < maxLines(k < len(main)) {
			lines = append(lines, v.line("species "+v.Names[i], v.Labels[i], unit.Print(math.Max(0, last[i]), molar, unit.FormMolar), func(q runPoint) float64 { return math.Max(0, q.C[i]) }))
		}
	}
	most := 0.0
	for _, l := range lines {
		most = math.Max(most, slices.Max(l.Y))
	}
	u := molar
	for _, symbol := range []string{"mM", "µM", "nM"} {
		if most < u.Base(0.05) {
			u = unit.Must(symbol)
		}
	}
	for _, l := range lines {
		for k := range l.Y {
			l.Y[k] = u.Of(l.Y[k])
		}
	}
	return lines, u.Symbol, apart
}

// maxLines is how many lines a figure has before a species is left out: what is
// dosed or runs out has some kept for it.
func maxLines(needed bool) int {
	if needed {
		return mostLines + 4
	}
	return mostLines
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
