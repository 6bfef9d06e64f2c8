package kind

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"saddlebook/diagram"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

func (s *controlSource) present(v controlValue, sheet *paper.Sheet) {
	for i, q := range v.At {
		sheet.Words(v.words(q, i == 0, sheet))
	}
	s.summary(v, sheet)
	s.states(v, sheet)
	s.figure(v, sheet)
	s.orders(v, sheet)
	s.catalyst(v, sheet)
	for i, q := range v.At {
		s.cycle(v, q, i == 0, sheet)
	}
	s.explain(v, sheet)
	cautionConditions(sheet)
}

func (q *controlPoint) at(key string) string { return key + "@" + q.Condition }

func (q *controlPoint) temperature() string { return unit.Print(q.T.SI, q.T.Unit, unit.FormPlain) }

// labels of all states.
func (v *controlValue) labels() []string {
	return append(append([]string{}, v.Labels...), v.StepLabels...)
}

// words says the rate, what decides it most, and where the catalyst rests. The
// composition is said once: it is the same at every temperature.
func (v *controlValue) words(q controlPoint, first bool, sheet *paper.Sheet) string {
	verb := "forms"
	if q.Rate < 0 {
		verb = "is used up"
	}
	where := v.composition(q)
	if !first {
		where = "At " + q.temperature()
	}
	text := []string{fmt.Sprintf("%s, %s %s at %s.", where, v.RateOf, verb, unit.Print(math.Abs(float64(q.Rate)), molarPerHour, unit.FormRate))}
	labels := v.labels()
	if i := v.foremost(q, len(v.Names), len(labels)); i >= 0 {
		text = append(text, "Raising the barrier of "+labels[i]+change(float64(q.States[i].Factor)))
	}
	if i := v.foremost(q, 0, len(v.Names)); i >= 0 {
		text = append(text, "Making "+labels[i]+" less stable"+change(float64(q.States[i].Factor)))
	}
	if rests := v.resting(q, func(i int) string { return sheet.Value(q.at("share/" + v.Names[i])).Text }); rests != "" {
		text = append(text, rests)
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

// change words what a shift of 1 kcal/mol does to the rate.
func change(factor float64) string {
	if factor < 1 {
		return fmt.Sprintf(" by 1 kcal/mol costs a factor of %s in rate.", unit.Digits(1/factor, 2))
	}
	return fmt.Sprintf(" by 1 kcal/mol gains a factor of %s in rate.", unit.Digits(factor, 2))
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
		column(v.pair(), "ratio/"+s.pairText())
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
				_, beside := energyUnits(v.Energies)
				c.Beside = unit.Print(float64(q.Ea), beside, unit.FormEnergy)
			}
			cells = append(cells, c)
			sure = append(sure, q.at(key))
		}
		t.Rows = append(t.Rows, cells)
	}
	t.Notes = append(t.Notes, v.each(func(q controlPoint) string {
		if !q.Ea.none() {
			return ""
		}
		return "no activation energy: " + q.NoEa
	})...)
	sheet.Table(t)
	intervals(sheet, sure...)
}

// each collects a remark for every temperature: one that is the same at all of
// them is made once, without them.
func (v *controlValue) each(remark func(q controlPoint) string) []string {
	var at []string // temperatures
	var texts []string
	for _, q := range v.At {
		if text := remark(q); text != "" {
			at, texts = append(at, q.temperature()), append(texts, text)
		}
	}
	if len(texts) == len(v.At) && len(slices.Compact(slices.Clone(texts))) == 1 {
		return []string{capital(texts[0]) + "."}
	}
	for i, text := range texts {
		texts[i] = fmt.Sprintf("At %s %s.", at[i], text)
	}
	return texts
}

// capital sets the first letter of a sentence.
func capital(text string) string {
	first, size := utf8.DecodeRuneInString(text)
	return string(unicode.ToUpper(first)) + text[size:]
}

// pair is the head of a column for the ratio, in labels.
func (v *controlValue) pair() string { return v.Pair[0] + " : " + v.Pair[1] }

// intervals lists results whose intervals show a width.
func intervals(sheet *paper.Sheet, keys ...string) {
	for _, key := range keys {
		if text := sheet.Value(key).Text; sheet.Interval(key) != text+" to "+text {
			sheet.Intervals(key)
		}
	}
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

// idle tells that a state neither decides the rate nor the ratio.
func (q *controlPoint) idle(i int) bool {
	still := func(x, factor orNone) bool { return math.Abs(float64(x)) < 0.005 && math.Abs(float64(factor)-1) < 0.05 }
	st := q.States[i]
	return still(st.X, st.Factor) && (st.RatioX.none() || still(st.RatioX, st.RatioFactor))
}

// listed are the states that the table shows: transition states, then species at
// their steady state. What is held has an order, which says the same.
func (v *controlValue) listed(q controlPoint) (shown, idle []int) {
	put := func(i int) {
		if q.idle(i) {
			idle = append(idle, i)
		} else {
			shown = append(shown, i)
		}
	}
	for i := range v.Steps {
		put(len(v.Names) + i)
	}
	for i := range v.Names {
		if q.Free[i] {
			put(i)
		}
	}
	return shown, idle
}

// states is the table of what decides.
func (s *controlSource) states(v controlValue, sheet *paper.Sheet) {
	t := paper.Table{Caption: or(s.Caption, "What decides the rate of formation of "+v.RateOf) + v.where(), Columns: append([]paper.Column{{Head: "State"}}, v.temperatureColumn()...)}
	t.Columns = append(t.Columns, paper.Column{Head: "X", Number: true}, paper.Column{Head: "rate, if raised by 1 kcal/mol", Number: true})
	if s.Ratio != "" {
		t.Columns = append(t.Columns, paper.Column{Head: "X of " + v.pair(), Number: true}, paper.Column{Head: v.pair() + ", if raised by 1 kcal/mol", Number: true})
	}
	names := append(append([]string{}, v.Names...), v.Steps...)
	labels := v.labels()
	var sure []string
	for _, q := range v.At {
		best := v.foremost(q, len(v.Names), len(names))
		shown, _ := v.listed(q)
		for _, i := range shown {
			head := paper.Cell{Text: labels[i], Strong: i == best}
			if i == q.Resting {
				head.Flags = append(head.Flags, "rests here")
			}
			if up := q.States[i].Raises; len(up) > 0 {
				head.Flags = append(head.Flags, "lifts "+listWords(up)+" with it")
			}
			row := v.row(head, q, wide(sheet, q.at("control/"+names[i])), times(sheet, q.at("factor/"+names[i]), q.States[i].Factor))
			if s.Ratio != "" {
				row = append(row, wide(sheet, q.at("ratio-control/"+names[i])), times(sheet, q.at("ratio-factor/"+names[i]), q.States[i].RatioFactor))
			}
			t.Rows = append(t.Rows, row)
			if i >= len(v.Names) {
				sure = append(sure, q.at("control/"+names[i]))
			}
		}
	}
	t.Notes = append(t.Notes, "X: degree of rate control, ∂ ln r/∂(−G/RT), all other states where they stand. × 0.25 is four times slower.")
	if len(v.Rates) > 0 {
		t.Notes = append(t.Notes, fmt.Sprintf("%s: the rate or barrier is stated. X of such a step is ∂ ln r/∂ ln k at fixed K; when a species is moved, the transition state that this rate implies stays where it is.", listWords(v.Rates)))
	}
	t.Notes = append(t.Notes, v.each(func(q controlPoint) string {
		_, idle := v.listed(q)
		var list []string
		for _, i := range idle {
			list = append(list, labels[i])
		}
		if len(list) == 0 {
			return ""
		}
		return "no control: " + strings.Join(list, ", ")
	})...)
	sheet.Table(t)
	intervals(sheet, sure...)
}

// times is a factor as "× 0.22", with its interval.
func times(sheet *paper.Sheet, key string, factor orNone) paper.Cell {
	c := wide(sheet, key)
	if !factor.none() {
		c.Text = "×\u00a0" + c.Text
	}
	return c
}

// orders is the table of what a bench can test.
func (s *controlSource) orders(v controlValue, sheet *paper.Sheet) {
	t := paper.Table{Caption: "Reaction orders" + v.where(), Columns: append([]paper.Column{{Head: "In"}}, v.temperatureColumn()...)}
	t.Columns = append(t.Columns, paper.Column{Head: "order", Number: true})
	for _, q := range v.At {
		for _, i := range v.Stated {
			if q.Orders[i].none() {
				continue
			}
			head := paper.Text(v.Labels[i])
			if q.Total[i] {
				head.Beside = "in all"
			}
			t.Rows = append(t.Rows, v.row(head, q, wide(sheet, q.at("order/"+v.Names[i]))))
		}
	}
	t.Notes = append(t.Notes, "Order: ∂ ln r/∂ ln c, all other concentrations as stated.")
	t.Notes = append(t.Notes, v.each(func(q controlPoint) string {
		var absent []string
		for _, i := range v.Stated {
			if q.Orders[i].none() {
				absent = append(absent, v.Labels[i])
			}
		}
		if len(absent) == 0 {
			return ""
		}
		return "no order is told at 0 M: " + strings.Join(absent, ", ")
	})...)
	if len(t.Rows) > 0 {
		sheet.Table(t)
	}
}

// figure draws the degrees of rate control of what is not held.
func (s *controlSource) figure(v controlValue, sheet *paper.Sheet) {
	bars := diagram.SignedBars{ID: s.ID, Title: "Degree of rate control"}
	numbers := paper.Table{Caption: "Degree of rate control", Columns: append([]paper.Column{{Head: "State"}}, v.temperatureColumn()...)}
	numbers.Columns = append(numbers.Columns, paper.Column{Head: "X", Number: true})
	names := append(append([]string{}, v.Names...), v.Steps...)
	labels := v.labels()
	for _, q := range v.At {
		shown, _ := v.listed(q)
		for _, step := range []bool{true, false} {
			g := diagram.SignedGroup{Name: "Transition states, " + q.temperature()}
			if !step {
				g.Name = "Species at their steady state, " + q.temperature()
			}
			for _, i := range shown {
				if i >= len(v.Names) != step {
					continue
				}
				key := q.at("control/" + names[i])
				cell := wide(sheet, key)
				bar := diagram.SignedBar{Name: labels[i], Value: float64(q.States[i].X), Text: cell.Text}
				if cell.Beside != "" {
					bar.Low, bar.High = sheet.Ends(key)
				}
				g.Bars = append(g.Bars, bar)
				numbers.Rows = append(numbers.Rows, v.row(paper.Text(labels[i]), q, cell))
			}
			if len(g.Bars) > 0 {
				bars.Groups = append(bars.Groups, g)
			}
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
	sheet.Figure(paper.Figure{Scene: scene, Caption: "Degree of rate control of transition states, and of species at their steady state. What is held has an order in place of it.", Numbers: numbers})
}
