package kind

import (
	"fmt"

	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// present shows both limits in one table, a row for each temperature.
func (s *selectivitySource) present(v selectivityValue, sheet *paper.Sheet) {
	pair := ""
	if len(s.Products) == 2 {
		pair = s.Products[0].Name + ":" + s.Products[1].Name
	}
	rests, exchanges := false, false
	for _, row := range v.At {
		rests = rests || len(row.Equilibrium) > 0
		exchanges = exchanges || row.Sources > 1
	}
	t := paper.Table{Caption: or(s.Caption, fmt.Sprintf("Products from %s, at both limits", v.From)), Columns: []paper.Column{{Head: "T", Number: true}}}
	column := func(head string) { t.Columns = append(t.Columns, paper.Column{Head: head, Number: true}) }
	for _, label := range v.Labels {
		column(label + ", kinetic")
	}
	if pair != "" {
		column("ratio, kinetic")
		if exchanges {
			column("ratio if exchange were infinitely fast")
		}
	}
	if rests {
		for _, label := range v.Labels {
			column(label + ", at equilibrium")
		}
		if pair != "" {
			column("ratio, at equilibrium")
		}
	}
	for _, row := range v.At {
		at := "@" + ConditionText(row.T)
		cells := []paper.Cell{paper.Text(unit.Print(row.T.SI, row.T.Unit, unit.FormPlain))}
		for _, group := range s.Products {
			cells = append(cells, sheet.Value("kinetic/"+group.Name+at))
		}
		if pair != "" {
			cells = append(cells, withInterval(sheet, "kinetic-ratio/"+pair+at))
			if exchanges {
				cells = append(cells, sheet.Value("pre-equilibrium-ratio/"+pair+at))
			}
		}
		if rests {
			for _, group := range s.Products {
				cells = append(cells, row.atRest(sheet.Value("equilibrium/"+group.Name+at)))
			}
			if pair != "" {
				cells = append(cells, row.atRest(withInterval(sheet, "equilibrium-ratio/"+pair+at)))
			}
		}
		t.Rows = append(t.Rows, cells)
	}
	if pair != "" {
		t.Notes = append(t.Notes, fmt.Sprintf("Ratio: %s to %s.", v.Labels[0], v.Labels[1]))
	}
	sheet.Table(t)
	s.explain(v, sheet)
}

// withInterval is a result with the widest of its 5 to 95 % intervals beside it.
func withInterval(sheet *paper.Sheet, key string) paper.Cell {
	c := sheet.Value(key)
	if i := sheet.Interval(key); i != "" {
		c.Beside = "5 to 95 %: " + i
	}
	return c
}

// atRest is the cell, or a dash where equilibrium has no number.
func (row limitsValue) atRest(c paper.Cell) paper.Cell {
	if len(row.Equilibrium) == 0 {
		return paper.Text("–")
	}
	return c
}

// explain says how the limits were found and what they rest on.
func (s *selectivitySource) explain(v selectivityValue, sheet *paper.Sheet) {
	sheet.Method("Kinetic limit: every direction that consumes a listed product is removed, and the branching of the remaining chain is found by state reduction (Grassmann, Taksar and Heyman), which subtracts nothing and so loses no digits.")
	sheet.Method("Equilibrium: over the reversible steps. A ratio is of the first to the second.")
	var sure []string
	for _, row := range v.At {
		T := unit.Print(row.T.SI, row.T.Unit, unit.FormPlain)
		sheet.Method(fmt.Sprintf("Fast exchange (Curtin-Hammett) at %s: %s. It holds where the kinetic ratio and the one for infinitely fast exchange agree within 5 %%; with one state to form products from there is nothing to exchange.", T, row.exchange()))
		if row.WhyNot != "" {
			sheet.Words(fmt.Sprintf("At %s %s.", T, row.WhyNot))
		}
		if row.Elsewhere > 0 {
			sheet.Assumption(fmt.Sprintf("At %s a share of %s goes to species that are not listed; the shares here are among the listed products.", T, unit.Percent(row.Elsewhere)))
		}
		for _, a := range row.Assumes {
			sheet.Assumption(a)
		}
		for _, a := range row.Caveat {
			sheet.Assumption(a)
		}
		for a := range s.Products {
			for b := a + 1; b < len(s.Products); b++ {
				item := s.Products[a].Name + ":" + s.Products[b].Name + "@" + ConditionText(row.T)
				sure = append(sure, "kinetic-ratio/"+item, "equilibrium-ratio/"+item)
			}
		}
	}
	sheet.Intervals(sure...)
}
