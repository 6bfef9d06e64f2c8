package kind

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/diagram"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

func (s *controlSource) present(v controlValue, sheet *paper.Sheet) {
	for _, q := range v.At {
		sheet.Words(v.words(q, sheet))
	}
	s.summary(v, sheet)
	s.states(v, sheet)
	s.orders(v, sheet)
	for _, q := range v.At {
		s.cycle(v, q, sheet)
	}
	s.figure(v, sheet)
	s.explain(v, sheet)
	cautionConditions(sheet)
}

func (q *controlPoint) at(key string) string { return key + "@" + q.Condition }

func (q *controlPoint) temperature() string { return unit.Print(q.T.SI, q.T.Unit, unit.FormPlain) }

// labels of all states.
func (v *controlValue) labels() []string {
	return append(append([]string{}, v.Labels...), v.StepLabels...)
}

// words says the rate, what decides it most, and where the catalyst rests.
func (v *controlValue) words(q controlPoint, sheet *paper.Sheet) string {
	verb := "forms"
	if q.Rate < 0 {
		verb = "is used up"
	}
	text := []string{fmt.Sprintf("%s, %s %s at %s.", v.composition(q), v.RateOf, verb, unit.Print(math.Abs(float64(q.Rate)), molarPerHour, unit.FormRate))}
	labels := v.labels()
	if i := v.foremost(q, len(v.Names), len(labels)); i >= 0 {
		text = append(text, sentence(labels[i], float64(q.States[i].Factor))+".")
	}
	if i := v.foremost(q, 0, len(v.Names)); i >= 0 {
		text = append(text, sentence(labels[i], float64(q.States[i].Factor))+".")
	}
	if q.Resting >= 0 {
		text = append(text, fmt.Sprintf("The resting state is %s, with %s of the total.", v.Labels[q.Resting], sheet.Value(q.at("resting-share")).Text))
	}
	return strings.Join(text, " ")
}

// foremost is the free species or step whose factor moves the rate most; −1 if
// none does by 5 %.
func (v *controlValue) foremost(q controlPoint, from, to int) int {
	best, most := -1, math.Log(1.05)
	for i := from; i < to && i < len(q.States); i++ {
		f := float64(q.States[i].Factor)
		if i < len(v.Names) && !q.Free[i] || !(f > 0) {
			continue
		}
		if x := math.Abs(math.Log(f)); x > most {
			best, most = i, x
		}
	}
	return best
}

func sentence(label string, factor float64) string {
	if factor < 1 {
		return fmt.Sprintf("Raising %s by 1 kcal/mol costs a factor %s in rate", label, unit.Digits(1/factor, 2))
	}
	return fmt.Sprintf("Raising %s by 1 kcal/mol gains a factor %s in rate", label, unit.Digits(factor, 2))
}

// summary is a row for each temperature.
func (s *controlSource) summary(v controlValue, sheet *paper.Sheet) {
	t := paper.Table{Caption: "Rate of formation of " + v.RateOf, Columns: []paper.Column{{Head: "T", Number: true}}}
	var keys []string
	column := func(head, key string) {
		t.Columns = append(t.Columns, paper.Column{Head: head, Number: true})
		keys = append(keys, key)
	}
	column("rate", "rate")
	if s.Catalyst != "" {
		column("turnover", "turnover")
	}
	if s.Ratio != "" {
		column(strings.Replace(s.pairText(), ":", " : ", 1), "ratio/"+s.pairText())
	}
	column("apparent activation energy", "activation-energy")
	var sure []string
	for _, q := range v.At {
		cells := []paper.Cell{paper.Text(q.temperature())}
		for _, key := range keys {
			c := wide(sheet, q.at(key))
			switch {
			case key == "activation-energy" && q.Ea.none():
				c = paper.Text("none")
			case key == "activation-energy":
				c = sheet.Value(q.at(key))
				c.Beside = unit.Print(float64(q.Ea), unit.Must("kJ/mol"), unit.FormEnergy)
			}
			cells = append(cells, c)
			sure = append(sure, q.at(key))
		}
		t.Rows = append(t.Rows, cells)
	}
	for i, q := range v.At {
		if with := "With " + v.stated(q) + "."; i == 0 {
			t.Notes = append(t.Notes, with) // the same at every temperature
		}
		if q.Ea.none() {
			t.Notes = append(t.Notes, fmt.Sprintf("No activation energy at %s: %s.", q.temperature(), q.NoEa))
		}
	}
	sheet.Table(t)
	sheet.Intervals(sure...)
}

// wide is a result with its interval beside it, where that shows a width.
func wide(sheet *paper.Sheet, key string) paper.Cell {
	c := withInterval(sheet, key)
	if c.Text+" to "+c.Text == sheet.Interval(key) {
		c.Beside = ""
	}
	return c
}

// temperatureColumn is a column for the temperature, where there are several.
func (v *controlValue) temperatureColumn() []paper.Column {
	if len(v.At) < 2 {
		return nil
	}
	return []paper.Column{{Head: "T", Number: true}}
}

// row is the head of a row, with the temperature where there are several.
func (v *controlValue) row(head paper.Cell, q controlPoint, cells ...paper.Cell) []paper.Cell {
	out := []paper.Cell{head}
	if len(v.At) > 1 {
		out = append(out, paper.Text(q.temperature()))
	}
	return append(out, cells...)
}

// where is " at 60 °C" for a caption, where there is one temperature.
func (v *controlValue) where() string {
	if len(v.At) != 1 {
		return ""
	}
	return " at " + v.At[0].temperature()
}

// states is the table of what decides: transition states, then species at
// their steady state, then those held.
func (s *controlSource) states(v controlValue, sheet *paper.Sheet) {
	t := paper.Table{Caption: or(s.Caption, "What decides the rate of formation of "+v.RateOf) + v.where(), Columns: append([]paper.Column{{Head: "State"}}, v.temperatureColumn()...)}
	t.Columns = append(t.Columns, paper.Column{Head: "X", Number: true}, paper.Column{Head: "rate × per +1 kcal/mol", Number: true})
	if s.Ratio != "" {
		t.Columns = append(t.Columns, paper.Column{Head: "X of " + s.pairText(), Number: true}, paper.Column{Head: s.pairText() + " × per +1 kcal/mol", Number: true})
	}
	names := append(append([]string{}, v.Names...), v.Steps...)
	labels := v.labels()
	var sure []string
	for _, q := range v.At {
		var order []int
		for i := range v.Steps {
			order = append(order, len(v.Names)+i)
		}
		for _, free := range []bool{true, false} {
			for i := range v.Names {
				if q.Free[i] == free {
					order = append(order, i)
				}
			}
		}
		best := v.foremost(q, len(v.Names), len(names))
		for _, i := range order {
			head := paper.Cell{Text: labels[i], Strong: i == best}
			if i < len(v.Names) && !q.Free[i] {
				head.Flags = append(head.Flags, "held")
			}
			if i == q.Resting {
				head.Flags = append(head.Flags, "rests here")
			}
			if up := q.States[i].Raises; len(up) > 0 {
				head.Flags = append(head.Flags, "lifts "+listWords(up)+" with it")
			}
			row := v.row(head, q, wide(sheet, q.at("control/"+names[i])), wide(sheet, q.at("factor/"+names[i])))
			if s.Ratio != "" {
				row = append(row, wide(sheet, q.at("ratio-control/"+names[i])), wide(sheet, q.at("ratio-factor/"+names[i])))
			}
			t.Rows = append(t.Rows, row)
			if i >= len(v.Names) {
				sure = append(sure, q.at("control/"+names[i]))
			}
		}
	}
	t.Notes = append(t.Notes, "X: degree of rate control, ∂ ln r/∂(−G/RT). A factor of 0.25 is a rate four times slower.")
	sheet.Table(t)
	sheet.Intervals(sure...)
}

// orders is the table of what a bench can test.
func (s *controlSource) orders(v controlValue, sheet *paper.Sheet) {
	t := paper.Table{Caption: "Reaction orders" + v.where(), Columns: append([]paper.Column{{Head: "In"}}, v.temperatureColumn()...)}
	t.Columns = append(t.Columns, paper.Column{Head: "at", Number: true}, paper.Column{Head: "order", Number: true})
	for _, q := range v.At {
		for _, i := range v.Stated {
			head := paper.Text(v.Labels[i])
			if q.Total[i] {
				head.Beside = "in all"
			}
			t.Rows = append(t.Rows, v.row(head, q, paper.Text(molarWords(float64(q.Stated[i]))), wide(sheet, q.at("order/"+v.Names[i]))))
		}
	}
	t.Notes = append(t.Notes, "Order: ∂ ln r/∂ ln c, all other concentrations as stated.")
	if len(t.Rows) > 0 {
		sheet.Table(t)
	}
}

// cycle is one turn of the catalyst, with every pair near the span.
func (s *controlSource) cycle(v controlValue, q controlPoint, sheet *paper.Sheet) {
	if s.Catalyst == "" {
		return
	}
	c := q.Cycle
	if c == nil {
		sheet.Words(fmt.Sprintf("No energetic span at %s: %s.", q.temperature(), q.NoCycle))
		return
	}
	labels := v.labels()
	with := "With " + v.stated(q)
	t := paper.Table{Caption: "One turn at " + q.temperature(), Columns: []paper.Column{{Head: "State"}, {Head: "beside it"}, {Head: "G", Number: true}, {Head: "share", Number: true}, {Head: "turnover control", Number: true}}}
	names := append(append([]string{}, v.Names...), v.Steps...)
	for _, l := range c.Levels {
		head := paper.Text(labels[l.State])
		if l.Off {
			head.Flags = []string{"off the cycle"}
		}
		share, G := "", "not known"
		if !l.Step {
			share = unit.Percent(float64(l.Rest))
		}
		cell := paper.Text(G)
		if !l.G.none() {
			cell = paper.Cell{Text: unit.Print(float64(l.G), kcalPerMol, unit.FormEnergy), Beside: unit.Print(float64(l.G), unit.Must("kJ/mol"), unit.FormEnergy)}
		}
		control := paper.Text("–")
		if !c.Backwards {
			control = sheet.Value(q.at("turnover-control/" + names[l.State]))
		}
		t.Rows = append(t.Rows, []paper.Cell{head, paper.Text(l.With), cell, paper.Text(share), control})
	}
	t.Notes = append(t.Notes, with+", beside each state as listed.")
	if !c.Turn.none() {
		t.Notes = append(t.Notes, fmt.Sprintf("One turn at these concentrations: ΔG′ = %s.", both(float64(c.Turn))))
	}
	sheet.Table(t)
	if c.Backwards {
		sheet.Words(fmt.Sprintf("%s, the cycle runs backwards: a turn does not go downhill, and there is no span.", v.composition(q)))
		return
	}
	p := paper.Table{Caption: "Energetic span at " + q.temperature(), Columns: []paper.Column{{Head: "Transition state"}, {Head: "above"}, {Head: "span", Number: true}}}
	for i, pair := range c.Pairs {
		row := []paper.Cell{{Text: labels[c.Levels[pair.TS].State], Strong: i == 0}, {Text: labels[c.Levels[pair.I].State], Strong: i == 0}, paper.Text(both(pair.Span))}
		if pair.Wraps {
			row[0].Flags = []string{"in the next turn"}
		}
		p.Rows = append(p.Rows, row)
	}
	p.Notes = append(p.Notes, "All pairs within 1 kcal/mol of the span. A transition state in the next turn stands ΔG′ lower.",
		fmt.Sprintf("%s, turns per catalyst: %s by the span, %s by the exact steady state.", with, sheet.Value(q.at("span-turns")).Text, sheet.Value(q.at("turns")).Text))
	if n := float64(c.PerTurn); n != 1 {
		p.Notes = append(p.Notes, fmt.Sprintf("One turn makes %s of %s.", unit.Digits(n, 2), v.RateOf))
	}
	sheet.Table(p)
	sheet.Intervals(q.at("span"), q.at("turns"))
}

// both prints an energy in both units.
func both(x float64) string {
	return unit.Print(x, kcalPerMol, unit.FormEnergy) + " (" + unit.Print(x, unit.Must("kJ/mol"), unit.FormEnergy) + ")"
}

// figure draws turnover control, which shares out 1 over each kind of state.
func (s *controlSource) figure(v controlValue, sheet *paper.Sheet) {
	bars := diagram.Bars{ID: s.ID, Title: "Turnover control", Axis: "turnover control"}
	numbers := paper.Table{Caption: "Turnover control", Columns: []paper.Column{{Head: "State"}, {Head: "T", Number: true}, {Head: "turnover control", Number: true}}}
	names := append(append([]string{}, v.Names...), v.Steps...)
	labels := v.labels()
	for _, q := range v.At {
		if q.Cycle == nil || q.Cycle.Backwards {
			continue
		}
		for _, step := range []bool{true, false} {
			g := diagram.BarGroup{Name: "Transition states, " + q.temperature()}
			if !step {
				g.Name = "States of the catalyst, " + q.temperature()
			}
			for _, l := range q.Cycle.Levels {
				if l.Step != step {
					continue
				}
				key := q.at("turnover-control/" + names[l.State])
				low, high := sheet.Ends(key)
				if low != nil && !(*low >= 0 && *high <= 1) {
					low, high = nil, nil // rounding at an end
				}
				g.Bars = append(g.Bars, diagram.Bar{Name: labels[l.State], Share: float64(l.Control), Low: low, High: high})
				numbers.Rows = append(numbers.Rows, []paper.Cell{paper.Text(labels[l.State]), paper.Text(q.temperature()), sheet.Value(key)})
			}
			bars.Groups = append(bars.Groups, g)
		}
	}
	if len(bars.Groups) == 0 {
		return
	}
	scene, err := bars.Scene()
	if err != nil {
		sheet.Fail(err)
		return
	}
	sheet.Figure(paper.Figure{Scene: scene, Caption: "Turnover control: over transition states, and over states of the catalyst, it sums to 100 %.", Numbers: numbers})
}

func (s *controlSource) explain(v controlValue, sheet *paper.Sheet) {
	sheet.Method("Species that are not held are at their steady state, under the conservation laws that hold among them, solved for net rates without subtraction. Degrees of rate control and reaction orders are exact derivatives of that state; each factor is the quotient of two full solutions and no extrapolation.")
	sheet.Method("Apparent activation energy: that of Arrhenius, −R d ln r/d(1/T), at the concentrations stated.")
	if s.Catalyst != "" {
		sheet.Method("Each level of the cycle has its reagents left and products released beside it at G + RT ln c. The span is T − I where the transition state follows the intermediate and T − I + ΔG′ where it precedes it; a state off the cycle has the position of the one it branches from. The exact number of turns is that of the full steady state.")
	}
	for _, q := range v.At {
		var free []string
		for i, f := range q.Free {
			if f {
				free = append(free, v.Labels[i])
			}
		}
		switch {
		case len(free) > 0:
			sheet.Assumption("At their steady state: " + listWords(free) + ". Ideal solution: activities are concentrations.")
		default:
			sheet.Assumption("The composition is taken as it stands: every concentration is held, so that only the steps that make the product decide. Ideal solution: activities are concentrations.")
		}
		if s.Run != "" {
			sheet.Assumption(fmt.Sprintf("Composition and temperature: run %s at %s, as computed with the energies as given; intervals here leave out how the errors move the run.", s.Run, q.Condition))
		}
		if q.Cycle != nil && len(q.Cycle.Partners) > 0 {
			var names []string
			for _, i := range q.Cycle.Partners {
				names = append(names, v.Labels[i])
			}
			sheet.Assumption("The span and turnover control take " + listWords(names) + " at its steady concentration, as if held there; X does not.")
		}
		if q.Cycle != nil && q.Cycle.OneWay {
			sheet.Assumption("A step of the turn has no return at these concentrations: no pair across it counts in the span.")
		}
		for i, st := range q.States {
			if st.WhyNot != "" {
				sheet.Assumption(fmt.Sprintf("No factor for %s: %s.", v.labels()[i], st.WhyNot))
			}
		}
		for _, a := range q.Assumes {
			sheet.Assumption(a)
		}
	}
}
