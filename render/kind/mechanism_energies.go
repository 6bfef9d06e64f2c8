package kind

import (
	"fmt"
	"strings"

	"saddlebook/kinetics"
	"saddlebook/kinetics/thermo"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// halfLifeHead names the concentration where a half-life depends on one.
func (s *mechanismSource) halfLifeHead(v mechanismValue) string {
	for _, row := range v.Steps[0] {
		if row.Molecules > 1 {
			return "Half-life at " + s.others()
		}
	}
	return "Half-life"
}

// stepFlags are the marks of a step whose rate is not that of its barrier alone.
func stepFlags(st kinetics.Step) []string {
	var flags []string
	if !st.Returns {
		flags = append(flags, "no return")
	}
	if st.Degeneracy != 1 {
		flags = append(flags, "degeneracy "+unit.Digits(st.Degeneracy, 2))
	}
	if st.Transmission != 1 {
		flags = append(flags, "transmission "+unit.Digits(st.Transmission, 2))
	}
	return flags
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
	barrier := map[string]*unit.Quantity{}
	for _, sp := range s.Species {
		inBlock[sp.Name] = sp.energySource
	}
	for _, st := range s.Step {
		inBlock[st.Name] = st.energySource
		barrier[st.Name] = st.Barrier
	}
	given := func(name string, tabled thermo.Energy) (string, []string) {
		e, written := inBlock[name]
		var remarks []string
		if e.Standard != "" {
			remarks = append(remarks, "at "+e.Standard)
		}
		switch {
		case barrier[name] != nil:
			return "barrier " + barrier[name].String(), remarks
		case !written || e.none():
			g := unit.Print(tabled.At(v.Model.Temperature), unit.Must(or(s.Energies, "kcal/mol"), unit.MolarEnergy), unit.FormEnergy)
			return "G " + g, append(remarks, "sum of "+listWords(s.Table.Sum)+" in "+s.Table.File)
		}
		return e.words(), remarks
	}
	for _, sp := range v.Model.Species {
		text, remarks := given(sp.Name, sp.Energy)
		if sp.Forms > 1 {
			remarks = append(remarks, fmt.Sprintf("stands for %d forms", sp.Forms))
		}
		row(sp.Name, sp.Label, text, append(remarks, fromDefaults(text, sp.SD)...))
	}
	for _, st := range v.Model.Steps {
		text, remarks := given(st.Name, st.Energy)
		row(st.Name, st.Label, text, append(remarks, fromDefaults(text, st.SD)...))
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
	return conformerSource{e.G, e.H, e.S, e.Cp}.words()
}

func (c conformerSource) words() string {
	var parts []string
	for _, p := range []struct {
		name string
		q    *unit.Quantity
	}{{"G", c.G}, {"H", c.H}, {"S", c.S}, {"Cp", c.Cp}} {
		if p.q != nil {
			parts = append(parts, p.name+" "+strings.ReplaceAll(p.q.String(), "-", "−"))
		}
	}
	return strings.Join(parts, ", ")
}

// fromDefaults tells the error that a state has from the defaults of the
// mechanism, since its energy as given shows none.
func fromDefaults(given string, sd *float64) []string {
	if sd == nil || *sd == 0 || strings.Contains(given, "±") {
		return nil
	}
	return []string{"own error ± " + unit.Print(*sd, unit.Must("kcal/mol"), unit.FormEnergy) + " from error"}
}
