package kind

import (
	"fmt"
	"strings"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// presentMechanism shows the steps, a table for each temperature.
func presentMechanism(s *mechanismSource, v mechanismValue, sheet *paper.Sheet) {
	m := v.Model
	energy := or(s.Energies, "kcal/mol")
	beside := "kJ/mol"
	if energy == "kJ/mol" {
		beside = "kcal/mol"
	}
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
				if present {
					c.Text = sheet.Bare(key(quantity)).Text
					c.Beside = unit.Print(x, unit.Must(beside, unit.MolarEnergy), unit.FormEnergy)
				}
				return c
			}
			name := paper.Text(or(st.Label, st.Name))
			name.Flags = stepFlags(st)
			life := value("half-life", row.HalfLife != 0)
			if row.HalfLifeBack != 0 {
				life.Beside = "back " + sheet.Value(key("half-life-back")).Text
			}
			chi := sheet.Value(key("position"))
			chi.Beside = sheet.Value(key("character")).Text
			t.Rows = append(t.Rows, []paper.Cell{
				name, paper.Text(reactionText(m, st)),
				energyCell("barrier", row.Barrier, true), energyCell("barrier-back", row.BarrierBack, st.Returns), energyCell("reaction-energy", row.Reaction, true),
				value("rate", true), value("equilibrium-constant", st.Returns), life, chi,
			})
		}
		sheet.Table(t)
		for _, st := range m.Steps {
			at := "/" + st.Name + "@" + cond
			sure = append(sure, "barrier"+at, "rate"+at)
		}
		for j, st := range m.Steps {
			if v.Steps[i][j].HalfLife != 0 {
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
	sheet.Given(s.energyTable(v))
	sheet.Intervals(sure...)
	sheet.Method("Rate constants: Eyring equation with the exact constants of 2019; equilibrium constants from the free energies, so that each reversible step obeys detailed balance. Position: the Marcus relation χ = √f / (√f + √b) of the forward and back barriers f and b; early below 0.45, late above 0.55.")
	sheet.Assumption("Transmission coefficients and path degeneracies are 1 unless the block says otherwise; they act in both directions.")
	sheet.Assumption(s.standardWords())
	several, change := false, false
	for _, row := range v.Steps[0] {
		several = several || row.Molecules > 1 || row.MoleculesBack > 1
		change = change || row.Change != 0
	}
	sheet.Assumption("Half-lives are those of the one direction alone, as if nothing came back.")
	if several {
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

// standardWords says at which standard states the energies were given.
func (s *mechanismSource) standardWords() string {
	others := map[string][]string{}
	for _, sp := range s.Species {
		if sp.Standard != "" {
			others[sp.Standard] = append(others[sp.Standard], sp.Name)
		}
	}
	for _, st := range s.Step {
		if st.Standard != "" {
			others[st.Standard] = append(others[st.Standard], st.Name)
		}
	}
	given := or(s.Standard, "1 M")
	delete(others, given)
	if given == "1 M" && len(others) == 0 {
		return "Free energies are given and taken at 1 M."
	}
	text := "Free energies are taken at 1 M; they were given at " + given
	for _, state := range []string{"1 M", "1 atm", "1 bar"} {
		if len(others[state]) > 0 {
			text += fmt.Sprintf(", those of %s at %s", listWords(others[state]), state)
		}
	}
	T := s.temperatures()[0]
	for _, p := range []struct {
		name     string
		pressure float64
	}{{"1 atm", unit.Atmosphere}, {"1 bar", unit.Bar}} {
		if given == p.name || len(others[p.name]) > 0 {
			shift := rate.Standard{Pressure: p.pressure}.Shift(T.SI)
			text += fmt.Sprintf("; from %s each is raised by RT ln(c° RT/p°), %s at %s", p.name, unit.Print(shift, unit.Must("kcal/mol"), unit.FormEnergy), unit.Print(T.SI, T.Unit, unit.FormPlain))
		}
	}
	return text + "."
}

// presentRacemisation sets both constants of a step between enantiomers side by
// side, since they differ by two and are often confused.
func presentRacemisation(s *mechanismSource, v mechanismValue, sheet *paper.Sheet) {
	t := paper.Table{Caption: "Exchange of the enantiomers and racemisation", Columns: []paper.Column{{Head: "Step"}, {Head: "T", Number: true},
		{Head: "k exchange", Number: true}, {Head: "k racemisation", Number: true}, {Head: "ee halves in", Number: true}, {Head: "1 % of ee lost in", Number: true}}}
	for _, st := range v.Model.Steps {
		if !s.racemises(v.Model, st) {
			continue
		}
		for _, T := range s.temperatures() {
			at := "/" + st.Name + "@" + ConditionText(T)
			t.Rows = append(t.Rows, []paper.Cell{paper.Text(or(st.Label, st.Name)), paper.Text(unit.Print(T.SI, T.Unit, unit.FormPlain)),
				sheet.Value("rate" + at), sheet.Value("racemisation" + at), sheet.Value("racemisation-half-life" + at), sheet.Value("ee-loss" + at)})
		}
	}
	if len(t.Rows) > 0 {
		sheet.Table(t)
		sheet.Assumption("The racemisation constant is twice the constant of exchange.")
	}
}

// describeErrors says which errors the sampling used and which states were exact.
func describeErrors(v mechanismValue, sheet *paper.Sheet) {
	m := v.Model
	if !m.HasErrors() {
		sheet.Assumption("No energy of this mechanism has a ±: all are taken as exact, and no interval is given.")
		return
	}
	if len(v.Exact) > 0 {
		sheet.Assumption("Taken as exact, since no ± is given: " + listWords(v.Exact) + ".")
	}
	if len(m.Plans()) > 1 {
		sheet.Assumption("No shared error is stated: intervals were computed with independent errors and with errors of the transition states correlated at 0.9.")
	}
}

// sources collects where the energies come from.
func sources(m *kinetics.Mechanism) []string {
	by := map[string][]string{}
	var order []string
	note := func(name, source string) {
		if source == "" {
			return
		}
		if by[source] == nil {
			order = append(order, source)
		}
		by[source] = append(by[source], name)
	}
	for _, s := range m.Species {
		note(or(s.Label, s.Name), s.Source)
	}
	for _, s := range m.Steps {
		note(or(s.Label, s.Name), s.Source)
	}
	var out []string
	for _, src := range order {
		out = append(out, fmt.Sprintf("Energy of %s: %s", listWords(by[src]), strings.TrimSuffix(src, ".")+"."))
	}
	return out
}

// reactionText writes a step with its arrow.
func reactionText(m *kinetics.Mechanism, s kinetics.Step) string {
	side := func(terms []kinetics.Term) string {
		var parts []string
		for _, t := range terms {
			name := m.Species[t.Species].Name
			if t.N > 1 {
				name = fmt.Sprintf("%d %s", t.N, name)
			}
			parts = append(parts, name)
		}
		return strings.Join(parts, " + ")
	}
	arrow := " ⇌ "
	if !s.Returns {
		arrow = " → "
	}
	return side(s.From) + arrow + side(s.To)
}
