package kind

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

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
	energy, _ := energyUnits(s.Energies)
	for _, p := range []struct {
		name     string
		pressure float64
	}{{"1 atm", unit.Atmosphere}, {"1 bar", unit.Bar}} {
		if given == p.name || len(others[p.name]) > 0 {
			shift := rate.Standard{Pressure: p.pressure}.Shift(T.SI)
			text += fmt.Sprintf("; from %s each is raised by RT ln(c° RT/p°), %s at %s", p.name, unit.Print(shift, energy, unit.FormEnergy), unit.Print(T.SI, T.Unit, unit.FormPlain))
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

// showsLife tells whether the page has the half-life of a step of so many
// molecules: of more than one only at a concentration that the author states,
// since nobody works at 1 M of a catalyst.
func (s *mechanismSource) showsLife(molecules int) bool {
	return molecules == 1 || s.HalfLifeAt != nil
}

// hidesLives tells whether the page leaves a half-life out for want of a
// concentration.
func (s *mechanismSource) hidesLives(rows []stepValue) bool {
	return slices.ContainsFunc(rows, func(row stepValue) bool {
		return row.HalfLife != 0 && !s.showsLife(row.Molecules) || row.HalfLifeBack != 0 && !s.showsLife(row.MoleculesBack)
	})
}

// halfLifeHead names the concentration where a half-life depends on one.
func (s *mechanismSource) halfLifeHead(v mechanismValue) string {
	for _, row := range v.Steps[0] {
		if s.HalfLifeAt != nil && (row.Molecules > 1 || row.HalfLifeBack != 0 && row.MoleculesBack > 1) {
			return "Half-life at " + s.others()
		}
	}
	return "Half-life"
}

// energyTable lists every state with its energy as given: the key from names
// to labels, and what the page can be held to.
func (s *mechanismSource) energyTable(v mechanismValue) paper.Table {
	t := paper.Table{Caption: "Energies as given, where no unit is written in " + or(s.Energies, "kcal/mol"),
		Columns: []paper.Column{{Head: "State"}, {Head: "Name"}, {Head: "Energy"}, {Head: "Remarks"}}}
	row := func(name, label, energy string, remarks []string) {
		t.Rows = append(t.Rows, []paper.Cell{paper.Text(name), paper.Text(or(label, "–")), paper.Text(energy), paper.Text(or(strings.Join(remarks, "; "), "–"))})
	}
	inBlock := map[string]energySource{}
	rates := map[string]stepSource{}
	for _, sp := range s.Species {
		inBlock[sp.Name] = sp.energySource
	}
	for _, st := range s.Step {
		inBlock[st.Name] = st.energySource
		rates[st.Name] = st
		for i := range st.Reactions {
			inBlock[kinetics.AlikeName(st.Name, i+1)] = st.energySource
			rates[kinetics.AlikeName(st.Name, i+1)] = st
		}
	}
	given := func(name string, tabled thermo.Energy) (string, []string) {
		e, written := inBlock[name]
		var remarks []string
		if e.Standard != "" {
			remarks = append(remarks, "at "+e.Standard)
		}
		switch {
		case len(rates[name].rates()) > 0:
			return rates[name].words(), remarks
		case !written || e.none():
			g := unit.Print(tabled.At(v.Model.Temperature), unit.Must(or(s.Energies, "kcal/mol"), unit.MolarEnergy), unit.FormEnergy)
			return "G " + g, append(remarks, "sum of "+listWords(s.Table.Sum)+" in "+s.Table.File)
		}
		return e.words(), remarks
	}
	var without []string
	for _, sp := range v.Model.Species {
		if sp.Unknown {
			name := sp.Name
			if sp.Label != "" {
				name += " (" + sp.Label + ")"
			}
			without = append(without, name)
			continue
		}
		text, remarks := given(sp.Name, sp.Energy)
		if sp.Forms > 1 {
			remarks = append(remarks, fmt.Sprintf("stands for %d forms", sp.Forms))
		}
		row(sp.Name, sp.Label, text, append(remarks, s.fromDefaults(text, sp.SD)...))
	}
	for _, st := range v.Model.Steps {
		text, remarks := given(st.Name, st.Energy)
		row(st.Name, st.Label, text, append(remarks, s.fromDefaults(text, st.SD)...))
	}
	if len(without) > 0 {
		t.Notes = append(t.Notes, "Without an energy of their own: "+strings.Join(without, ", ")+".")
	}
	return t
}

// words writes an energy as its author gave it.
func (e energySource) words() string {
	if e.SameAs != "" {
		return "same as " + e.SameAs
	}
	if len(e.Conformers) > 0 {
		var parts []string
		for _, c := range e.Conformers {
			parts = append(parts, c.words())
		}
		return "conformers: " + strings.Join(parts, "; ")
	}
	return e.amountsSource.words()
}

func (c amountsSource) words() string {
	parts := quantityWords([]named{{"G", c.G}, {"H", c.H}, {"S", c.S}, {"Cp", c.Cp}, {"E", c.E}})
	switch n := len(c.Frequencies); {
	case n == 1:
		parts = append(parts, "1 frequency")
	case n > 1:
		parts = append(parts, fmt.Sprintf("%d frequencies", n))
	}
	for _, w := range []struct {
		word string
		n    *int
	}{{"symmetry number", c.Symmetry}, {"multiplicity", c.Multiplicity}} {
		if w.n != nil {
			parts = append(parts, fmt.Sprintf("%s %d", w.word, *w.n))
		}
	}
	if c.Scale != nil {
		parts = append(parts, fmt.Sprintf("frequencies × %g", *c.Scale))
	}
	return strings.Join(parts, ", ")
}

// named is a quantity as its author wrote it, under its key.
type named struct {
	name string
	q    *unit.Quantity
}

func quantityWords(list []named) []string {
	var parts []string
	for _, p := range list {
		if p.q != nil {
			parts = append(parts, p.name+" "+written(*p.q))
		}
	}
	return parts
}

// written prints a quantity with all digits that its author wrote: 18.4 ± 0.6
// kcal/mol, (1.2 ± 0.1) × 10⁻⁶ s⁻¹.
func written(q unit.Quantity) string {
	const space = "\u00a0"
	value := unit.Quantity{SI: q.SI, Unit: q.Unit}
	text, _, _ := strings.Cut(value.String(), " ")
	if x, err := strconv.ParseFloat(text, 64); err == nil && x != 0 && math.Abs(x) < 1e-3 {
		text = strconv.FormatFloat(x, 'e', -1, 64) // as every computed number is printed
	}
	number, power, scientific := strings.Cut(text, "e")
	sd := ""
	if q.SD != 0 {
		x := unit.Unit{Scale: q.Unit.Scale}.Of(q.SD) // a difference, without offset
		if scientific {
			p, _ := strconv.Atoi(power) // String wrote a whole number there
			x /= math.Pow(10, float64(p))
		}
		sd = " ± " + strconv.FormatFloat(x, 'g', 6, 64)
	}
	text = strings.Replace(number, "-", "−", 1) + sd
	if scientific {
		if sd != "" {
			text = "(" + text + ")"
		}
		p, _ := strconv.Atoi(power)
		text += space + "×" + space + "10" + unit.Superscript("a" + strconv.Itoa(p))[1:] // it raises what stands behind a letter
	}
	if q.Unit.Symbol != "" {
		text += space + strings.ReplaceAll(unit.Superscript(q.Unit.Symbol), " ", space)
	}
	return text
}

// fromDefaults tells the error that a state has from the defaults of the
// mechanism, since its energy as given shows none.
func (s *mechanismSource) fromDefaults(given string, sd *float64) []string {
	if sd == nil || *sd == 0 || strings.Contains(given, "±") {
		return nil
	}
	energy, _ := energyUnits(s.Energies)
	return []string{"own error ± " + unit.Print(*sd, energy, unit.FormEnergy) + " from error"}
}
