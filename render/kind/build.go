package kind

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
	"saddlebook/kinetics/unit"
)

// builder makes the mechanism of the core from its source.
type builder struct {
	src      *mechanismSource
	home     float64
	low      thermo.LowModes
	problems fault.Problems
	energies map[string]given // by state, as far as read
	twins    [][]string       // states with one energy and so one error; the first gives it
	table    map[string]tableRow
	names    []string          // species in order
	states   map[string][]int  // by name in the source: the states made of it
	origin   map[string]origin // by name of a state: where it comes from, if its name is another there
}

// origin is the step of the source that one of several alike comes from.
type origin struct {
	step   string
	number int // of the reaction, from 1
}

// build returns the mechanism, with every fault found on the way.
func (s *mechanismSource) build(in Inputs) (*kinetics.Mechanism, fault.Problems) {
	b := &builder{src: s, home: s.Temperature.SI, energies: map[string]given{}, table: map[string]tableRow{}, states: map[string][]int{}, origin: map[string]origin{}}
	species, steps := s.Species, s.Step
	if s.Table != nil {
		rows, problems := s.Table.read(in, s.Energies)
		b.problems = append(b.problems, problems...)
		if problems.Failed() {
			return nil, b.problems
		}
		species, steps = merge(species, steps, rows)
		for _, r := range rows {
			b.table[r.name] = r
		}
	}
	if len(species) == 0 {
		b.fault(nil, "the mechanism has no species", "add a [species] table, such as A = { G = 0 }")
		return nil, b.problems
	}
	if len(steps) == 0 {
		b.fault(nil, "the mechanism has no steps", "add a [step] table, such as TS1 = { reaction = \"A <=> B\", G = 21.5 }")
		return nil, b.problems
	}
	for _, sp := range species {
		b.names = append(b.names, sp.Name)
	}
	low, bad := s.lowModes()
	if bad != nil {
		b.problems = append(b.problems, bad)
	}
	b.low = low
	if f := s.Scale; f != nil && !(*f > 0) {
		b.fault([]string{"frequency-scale"}, fmt.Sprintf("a factor of %g on frequencies makes no sense", *f), "give a number above 0, such as 0.97")
	}
	b.readEnergies(species, steps)
	m := &kinetics.Mechanism{ID: s.ID, Title: s.Title, Method: s.Method, Energies: s.Energies, Temperature: b.home}
	b.problems = append(b.problems, s.plainNumbers()...)
	if v := s.Viscosity; v != nil {
		if m.Viscosity = v.SI; !(m.Viscosity > 0) {
			b.fault([]string{"viscosity"}, fmt.Sprintf("viscosity %s makes no sense", v), "give one above 0, such as \"0.6 mPa s\"")
		}
	}
	for i, sp := range species {
		m.Species = append(m.Species, b.species(sp))
		b.states[sp.Name] = []int{i}
	}
	for _, st := range steps {
		b.steps(m, st)
	}
	b.sharing(m)
	b.mirror(m)
	if b.problems.Failed() {
		return nil, b.problems
	}
	for _, c := range m.Check() {
		b.complain(c)
	}
	if b.problems.Failed() {
		return nil, b.problems
	}
	for _, T := range s.temperatures() {
		n, err := m.At(T.SI)
		if err != nil {
			b.refuse(err)
			continue
		}
		if math.Abs(T.SI-b.home) > 1e-9*b.home { // those at home are told
			for _, c := range n.Warnings {
				b.complain(c)
			}
		}
		b.diffusion(m, n, T)
	}
	return m, b.problems
}

func (b *builder) fault(path []string, msg, fix string) {
	b.problems = append(b.problems, problem(path, msg, fix))
}

// section tells in which table of the source a state stands, or would stand if
// the file beside the note did not declare it.
func (b *builder) section(name string) string {
	if b.table[name].reaction != "" {
		return "step"
	}
	for _, st := range b.src.Step {
		if st.Name == name {
			return "step"
		}
	}
	return "species"
}

func (b *builder) complain(c kinetics.Complaint) {
	severity := fault.Warning
	if c.Fatal {
		severity = fault.Error
	}
	path := b.path(c.State, c.Key)
	if c.Fatal { // it says more than a warning at the same place
		b.problems = slices.DeleteFunc(b.problems, func(p *fault.Problem) bool { return p.Severity == fault.Warning && slices.Equal(p.Path, path) })
	}
	p := &fault.Problem{Path: path, Severity: severity, Msg: c.Msg, Fix: c.Fix}
	if row, ok := b.table[c.State]; ok && !b.written(c.State) {
		p.File, p.Line, p.Col = b.src.Table.File, row.line, 1
	}
	b.problems = append(b.problems, p)
}

// path leads to a key of a state; nil, the block, if there is no state.
func (b *builder) path(state, key string) []string {
	var path []string
	if o, ok := b.origin[state]; ok {
		path = []string{"step", o.step}
		if key == "reaction" {
			return append(path, "reactions", fmt.Sprint(o.number))
		}
	} else if state != "" {
		path = []string{b.section(state), state}
	} else {
		return nil
	}
	if key != "" {
		path = append(path, key)
	}
	return path
}

// written tells whether a state stands in the block itself.
func (b *builder) written(name string) bool {
	return slices.ContainsFunc(b.src.Species, func(s speciesSource) bool { return s.Name == name }) ||
		slices.ContainsFunc(b.src.Step, func(s stepSource) bool { return s.Name == name })
}

// refuse turns an error of the core into problems, without saying one twice.
func (b *builder) refuse(err error) {
	var cs kinetics.Complaints
	if !errors.As(err, &cs) {
		b.fault(nil, err.Error(), "check the energies of this mechanism")
		return
	}
	for _, c := range cs {
		b.complain(c)
	}
}

// readEnergies reads every state's energy, then follows same-as.
func (b *builder) readEnergies(species []speciesSource, steps []stepSource) {
	sameAs := map[string]string{}
	path := map[string][]string{}
	measured := slices.ContainsFunc(steps, func(s stepSource) bool { return len(s.rates()) > 0 })
	one := func(section, name string, e energySource) {
		p := []string{section, name}
		path[name] = p
		row, tabled := b.table[name]
		switch {
		case tabled && !e.none():
			b.fault(p, fmt.Sprintf("%q has an energy here and another in %q", name, b.src.Table.File), "keep one of them")
		case tabled:
			b.energies[name] = given{energy: thermo.Constant(row.energy)}
		case section == "species" && measured && e.none():
			b.energies[name] = given{unknown: true}
		case e.SameAs != "" && (!e.amountsSource.none() || len(e.Conformers) > 0):
			b.fault(append(p, "same-as"), "same-as stands beside another energy", "keep one of them")
		case e.SameAs != "":
			sameAs[name] = e.SameAs
		default:
			g, bad := b.reader(e, section == "step").energy(e, p)
			if bad != nil {
				b.problems = append(b.problems, bad)
			}
			b.energies[name] = g
		}
	}
	for _, sp := range species {
		one("species", sp.Name, sp.energySource)
	}
	for _, st := range steps {
		if st.Barrier != nil {
			p := []string{"step", st.Name}
			if !st.none() {
				b.fault(append(p, "barrier"), "a barrier stands beside an energy of the transition state", "keep one of them")
			}
			path[st.Name] = p
			b.energies[st.Name] = given{energy: thermo.Constant(st.Barrier.SI), sd: deviation(st.Barrier.SD)}
			continue
		}
		if st.lawful() {
			p := []string{"step", st.Name}
			if key := st.rates()[0]; !st.none() {
				b.fault(append(p, key), key+" stands beside an energy of the transition state", "keep one of them")
			}
			if _, tabled := b.table[st.Name]; tabled {
				b.fault(p, fmt.Sprintf("%q has a rate here and an energy in %q", st.Name, b.src.Table.File), "keep one of them")
			}
			path[st.Name] = p
			b.energies[st.Name] = given{}
			continue
		}
		one("step", st.Name, st.energySource)
	}
	known := append([]string{}, b.names...)
	for _, st := range steps {
		known = append(known, st.Name)
	}
	circled := map[string]bool{} // states of which a circle is told
	for _, name := range known {
		seen := map[string]bool{}
		at := name
		var trail []string
		for sameAs[at] != "" && !seen[at] {
			seen[at] = true
			trail = append(trail, at)
			at = sameAs[at]
		}
		if sameAs[name] == "" {
			continue
		}
		g, ok := b.energies[at]
		switch {
		case seen[at] && circled[at]:
		case seen[at]:
			for _, s := range trail {
				circled[s] = true
			}
			b.fault(append(path[name], "same-as"), "same-as leads in a circle: "+strings.Join(append(trail, at), ", "), "give one of these states an energy")
		case !ok:
			b.fault(append(path[name], "same-as"), fmt.Sprintf("%q is not a state of this mechanism", at), suggest(at, known))
		default:
			b.twin(at, name)
			b.energies[name] = g
		}
	}
}

// reader reads the energy of one state.
func (b *builder) reader(e energySource, saddle bool) reader {
	r := reader{home: b.home, saddle: saddle, standard: b.standard(e.Standard), low: b.low}
	if b.src.Scale != nil && *b.src.Scale > 0 {
		r.scale = *b.src.Scale
	}
	return r
}

func (b *builder) standard(own string) rate.Standard {
	if own == "" {
		own = b.src.Standard
	}
	switch own {
	case "1 atm":
		return rate.Standard{Pressure: 101325}
	case "1 bar":
		return rate.Standard{Pressure: 100000}
	}
	return rate.Standard{}
}

func (b *builder) species(s speciesSource) kinetics.Species {
	forms := 1
	if s.Forms != nil {
		if forms = *s.Forms; forms < 1 {
			b.fault([]string{"species", s.Name, "forms"}, fmt.Sprintf("%d forms make no sense", forms), "give 1 or more")
		}
	}
	g := b.energies[s.Name]
	sp := kinetics.Species{Name: s.Name, Label: s.Label, Source: s.Source, Energy: g.energy, Unknown: g.unknown, Forms: forms, Standard: b.standard(s.Standard), SD: g.sd, SDEntropy: g.sdEntropy}
	if sp.SD == nil && sp.SDEntropy == nil && !sp.Unknown && b.src.Error != nil && b.src.Error.Species != nil {
		sp.SD = deviation(b.src.Error.Species.SI)
	}
	row, tabled := b.table[s.Name]
	if tabled {
		sp.Label, sp.Source = or(sp.Label, row.label), or(sp.Source, or(row.source, b.src.Table.File))
	}
	if sp.Formula = or(s.Formula, row.formula); sp.Formula != "" {
		_, err := kinetics.ParseFormula(sp.Formula)
		var bad *kinetics.FormulaError
		if errors.As(err, &bad) {
			p := problem([]string{"species", s.Name, "formula"}, bad.Msg, bad.Fix)
			p.Char = bad.At
			if s.Formula == "" {
				p.File, p.Line, p.Col = b.src.Table.File, row.line, row.formulaCol+bad.At
			}
			b.problems = append(b.problems, p)
		}
	}
	return sp
}

func (s *mechanismSource) temperatures() []unit.Quantity {
	if len(s.At) == 0 {
		return []unit.Quantity{s.Temperature}
	}
	return s.At
}

func or(a, b string) string {
	if a != "" {
		return a
	}
	return b
}

// suggest words a remedy for a name that is not known.
func suggest(name string, known []string) string {
	if n := schema.Nearest(name, known); n != "" {
		return fmt.Sprintf("did you mean %q?", n)
	}
	if len(known) == 0 {
		return "there are none"
	}
	const most = 12
	if len(known) > most {
		return fmt.Sprintf("write one of %s and %d more", listWords(known[:most]), len(known)-most)
	}
	return "write one of " + listWords(known)
}
