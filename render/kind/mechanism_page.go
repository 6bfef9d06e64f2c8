package kind

import (
	"fmt"
	"math"

	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// present shows the steps, a table for each temperature.
func (s *mechanismSource) present(v mechanismValue, sheet *paper.Sheet) {
	m := v.Model
	energy := or(s.Energies, "kcal/mol")
	_, beside := energyUnits(energy)
	var sure []string
	for i, T := range s.temperatures() {
		cond := ConditionText(T)
		t := paper.Table{
			Caption: fmt.Sprintf("%s at %s", or(m.Title, "Steps"), unit.Print(T.SI, T.Unit, unit.FormPlain)),
			Columns: []paper.Column{
				{Head: "Step"}, {Head: "Reaction"},
				{Head: "ΔG‡", Unit: energy, Number: true}, {Head: "ΔG‡ back", Unit: energy, Number: true}, {Head: "ΔG", Unit: energy, Number: true},
				{Head: "k", Number: true}, {Head: "K", Number: true}, {Head: s.halfLifeHead(v), Number: true}, {Head: "χ", Number: true},
			},
		}
		for j, st := range m.Steps {
			row := v.Steps[i][j]
			key := func(quantity string) string { return quantity + "/" + st.Name + "@" + cond }
			value := func(quantity string, present bool) paper.Cell {
				if !present {
					return paper.Text("–")
				}
				return sheet.Value(key(quantity))
			}
			energyCell := func(quantity string, x float64, present bool) paper.Cell {
				c := value(quantity, present)
				if present && !math.IsNaN(x) {
					c.Text = sheet.Bare(key(quantity)).Text
					c.Beside = unit.Print(x, beside, unit.FormEnergy)
				}
				return c
			}
			name := paper.Text(or(st.Label, st.Name))
			name.Flags = stepFlags(st, row)
			if len(s.temperatures()) > 1 && limited(st) {
				name.Flags = append(name.Flags, "one viscosity at all temperatures")
			}
			life := value("half-life", row.HalfLife != 0 && s.showsLife(row.Molecules))
			if row.HalfLifeBack != 0 && s.showsLife(row.MoleculesBack) {
				life.Beside = "back " + sheet.Value(key("half-life-back")).Text
			}
			chi := sheet.Value(key("position"))
			if row.Position != nil {
				chi.Beside = sheet.Value(key("character")).Text
			}
			t.Rows = append(t.Rows, []paper.Cell{
				name, paper.Text(reactionText(m, st)),
				energyCell("barrier", row.Barrier, true), energyCell("barrier-back", told(row.BarrierBack), st.Returns), energyCell("reaction-energy", told(row.Reaction), true),
				value("rate", true), value("equilibrium-constant", st.Returns), life, chi,
			})
		}
		if s.hidesLives(v.Steps[i]) {
			t.Notes = append(t.Notes, "Half-lives of steps of more than one molecule depend on concentrations: state half-life-at to see them.")
		}
		sheet.Table(t)
		for _, st := range m.Steps {
			at := "/" + st.Name + "@" + cond
			sure = append(sure, "barrier"+at, "rate"+at)
		}
		for j, st := range m.Steps {
			if row := v.Steps[i][j]; row.HalfLife != 0 && s.showsLife(row.Molecules) {
				sure = append(sure, "half-life/"+st.Name+"@"+cond)
			}
			if s.racemises(m, st) {
				sure = append(sure, "ee-loss/"+st.Name+"@"+cond)
			}
		}
		for _, h := range v.Held[i] {
			if h != "" {
				sheet.Assumption(h)
			}
		}
	}
	presentRacemisation(s, v, sheet)
	s.presentMolecules(v, sheet)
	sheet.Given(s.energyTable(v))
	intervals(sheet, sure...)
	for _, text := range s.methods(v) {
		sheet.Method(text)
	}
	for _, text := range s.lawAssumptions(v) {
		sheet.Assumption(text)
	}
	sheet.Assumption(s.standardWords())
	several, change := false, false
	for _, row := range v.Steps[0] {
		several = several || row.Molecules > 1 || row.MoleculesBack > 1
		change = change || row.Change != 0
	}
	sheet.Assumption("Half-lives are those of the one direction alone, as if nothing came back.")
	if several && s.HalfLifeAt != nil {
		sheet.Assumption(fmt.Sprintf("The half-life of a step of more than one molecule is that of the first reactant that is used up, with all others held at %s; where several molecules of it react, from that concentration to half of it.", s.others()))
	}
	if change {
		sheet.Assumption("Where the number of molecules changes in a step, the position of its transition state depends on the standard state of 1 M.")
	}
	if m.Method != "" {
		sheet.Method("Energies: " + m.Method)
	}
	for _, src := range sources(m) {
		sheet.Method(src)
	}
	describeErrors(v, sheet)
}
