package kind

import (
	"fmt"
	"math"
	"slices"

	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// catalyst is the table of where the catalyst is.
func (s *controlSource) catalyst(v controlValue, sheet *paper.Sheet) {
	if s.Catalyst == "" {
		return
	}
	t := paper.Table{Caption: "Where the catalyst is" + v.where(), Columns: append([]paper.Column{{Head: "State"}}, v.temperatureColumn()...)}
	t.Columns = append(t.Columns, paper.Column{Head: "share of the total", Number: true}, paper.Column{Head: "concentration", Number: true})
	several := false
	for _, q := range v.At {
		for i, name := range v.Names {
			if q.Counted != v.Catalyst || q.share(i).none() {
				continue
			}
			total := float64(q.Stated[v.Catalyst])
			several = several || math.Abs(float64(q.share(i))*total-float64(q.C[i])) > 1e-6*float64(q.C[i])
			t.Rows = append(t.Rows, v.row(paper.Cell{Text: v.Labels[i], Strong: i == q.Resting}, q, wide(sheet, q.at("share/"+name)), wide(sheet, q.at("amount/"+name))))
		}
	}
	if several {
		t.Notes = append(t.Notes, "Shares count the catalyst: a state that holds two of it counts twice.")
	}
	if len(t.Rows) > 0 {
		sheet.Table(t)
	}
}

// cycle is one turn of the catalyst, with every pair near the span.
func (s *controlSource) cycle(v controlValue, q controlPoint, first bool, sheet *paper.Sheet) {
	if s.Catalyst == "" {
		return
	}
	c := q.Cycle
	if c == nil {
		if first { // the same at every temperature: the steps say it
			sheet.Words(capital(q.NoCycle) + ", so a span is not defined; the rate and shares here are those of the full steady state.")
		}
		return
	}
	labels := v.labels()
	energy, beside := energyUnits(v.Energies)
	t := paper.Table{Caption: "One turn at " + q.temperature(), Columns: []paper.Column{{Head: "State"}, {Head: "beside it"}, {Head: "G", Number: true}, {Head: "turnover control", Number: true}}}
	names := append(append([]string{}, v.Names...), v.Steps...)
	for _, l := range c.Levels {
		head := paper.Text(labels[l.State])
		if l.Off {
			head.Flags = []string{"off the cycle"}
		}
		cell := paper.Text("not known")
		if !l.G.none() {
			cell = paper.Cell{Text: unit.Print(float64(l.G), energy, unit.FormEnergy), Beside: unit.Print(float64(l.G), beside, unit.FormEnergy)}
		}
		control := paper.Text("–")
		if !c.Backwards {
			control = sheet.Value(q.at("turnover-control/" + names[l.State]))
		}
		t.Rows = append(t.Rows, []paper.Cell{head, paper.Text(l.With), cell, control})
	}
	t.Notes = append(t.Notes, "G at the concentrations stated, with what stands beside each state.")
	if !c.Turn.none() {
		t.Notes = append(t.Notes, fmt.Sprintf("One turn at these concentrations: ΔG′ = %s.", v.both(float64(c.Turn))))
	}
	sheet.Table(t)
	if c.Backwards {
		sheet.Words(fmt.Sprintf("At %s the cycle runs backwards: a turn does not go downhill, and there is no span.", q.temperature()))
		return
	}
	p := paper.Table{Caption: "Energetic span at " + q.temperature(), Columns: []paper.Column{{Head: "Transition state"}, {Head: "above"}, {Head: "span", Number: true}}}
	for i, pair := range c.Pairs {
		row := []paper.Cell{{Text: labels[c.Levels[pair.TS].State], Strong: i == 0}, {Text: labels[c.Levels[pair.I].State], Strong: i == 0}, paper.Text(v.both(pair.Span))}
		if pair.Wraps {
			row[0].Flags = []string{"in the next turn"}
		}
		p.Rows = append(p.Rows, row)
	}
	p.Notes = append(p.Notes, "All pairs within 1 kcal/mol of the span. A transition state in the next turn stands ΔG′ lower.",
		fmt.Sprintf("Turns per catalyst at the concentrations stated: %s by the span, %s by the exact steady state.", sheet.Value(q.at("span-turns")).Text, sheet.Value(q.at("turns")).Text))
	if n := float64(c.PerTurn); n != 1 {
		p.Notes = append(p.Notes, fmt.Sprintf("One turn makes %s of %s.", unit.Digits(n, 2), v.RateOf))
	}
	sheet.Table(p)
	intervals(sheet, q.at("span"), q.at("turns"))
}

// both prints an energy in both units.
func (v *controlValue) both(x float64) string {
	first, beside := energyUnits(v.Energies)
	return unit.Print(x, first, unit.FormEnergy) + " (" + unit.Print(x, beside, unit.FormEnergy) + ")"
}

func (s *controlSource) explain(v controlValue, sheet *paper.Sheet) {
	sheet.Method("Species that are not held are at their steady state, under the conservation laws that hold among them, solved for net rates without subtraction. Degrees of rate control and reaction orders are exact derivatives of that state; each factor is the quotient of two full solutions and no extrapolation.")
	sheet.Method("Apparent activation energy: that of Arrhenius, −R d ln r/d(1/T), at the concentrations stated.")
	if slices.ContainsFunc(v.At, func(q controlPoint) bool { return q.Cycle != nil }) {
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
