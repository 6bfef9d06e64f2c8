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
	problems fault.Problems
	energies map[string]given // by state, as far as read
	twins    [][]string       // states with one energy and so one error; the first gives it
	table    map[string]tableRow
	names    []string // species in order
}

// build returns the mechanism, with every fault found on the way.
func (s *mechanismSource) build(in Inputs) (*kinetics.Mechanism, fault.Problems) {
	b := &builder{src: s, home: s.Temperature.SI, energies: map[string]given{}, table: map[string]tableRow{}}
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
	b.readEnergies(species, steps)
	m := &kinetics.Mechanism{ID: s.ID, Title: s.Title, Method: s.Method, Temperature: b.home}
	for _, sp := range species {
		m.Species = append(m.Species, b.species(sp))
	}
	for _, st := range steps {
		m.Steps = append(m.Steps, b.step(st))
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
		b.diffusion(n, T)
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
	var path []string
	if c.State != "" {
		path = []string{b.section(c.State), c.State}
		if c.Key != "" {
			path = append(path, c.Key)
		}
	}
	p := &fault.Problem{Path: path, Severity: severity, Msg: c.Msg, Fix: c.Fix}
	if row, ok := b.table[c.State]; ok && !b.written(c.State) {
		p.File, p.Line, p.Col = b.src.Table.File, row.line, 1
	}
	b.problems = append(b.problems, p)
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
	one := func(section, name string, e energySource) {
		p := []string{section, name}
		path[name] = p
		row, tabled := b.table[name]
		switch {
		case tabled && !e.none():
			b.fault(p, fmt.Sprintf("%q has an energy here and another in %q", name, b.src.Table.File), "keep one of them")
		case tabled:
			b.energies[name] = given{energy: thermo.Constant(row.energy)}
		case e.SameAs != "" && (e.G != nil || e.H != nil || e.S != nil || len(e.Conformers) > 0):
			b.fault(append(p, "same-as"), "same-as stands beside another energy", "keep one of them")
		case e.SameAs != "":
			sameAs[name] = e.SameAs
		default:
			g, bad := e.read(b.home, p)
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
	if s.Forms < 0 {
		b.fault([]string{"species", s.Name, "forms"}, fmt.Sprintf("%d forms make no sense", s.Forms), "give 1 or more")
	}
	g := b.energies[s.Name]
	sp := kinetics.Species{Name: s.Name, Label: s.Label, Source: s.Source, Energy: g.energy, Forms: s.Forms, Standard: b.standard(s.Standard), SD: g.sd, SDEntropy: g.sdEntropy}
	if sp.SD == nil && sp.SDEntropy == nil && b.src.Error != nil && b.src.Error.Species != nil {
		sp.SD = deviation(b.src.Error.Species.SI)
	}
	if s.Formula != "" {
		sp.Formula = s.Formula
		_, err := kinetics.ParseFormula(s.Formula)
		var bad *kinetics.FormulaError
		if errors.As(err, &bad) {
			p := problem([]string{"species", s.Name, "formula"}, bad.Msg, bad.Fix)
			p.Char = bad.At
			b.problems = append(b.problems, p)
		}
	}
	if row, ok := b.table[s.Name]; ok {
		sp.Label, sp.Source = or(sp.Label, row.label), or(sp.Source, or(row.source, b.src.Table.File))
	}
	return sp
}

func (b *builder) step(s stepSource) kinetics.Step {
	g := b.energies[s.Name]
	st := kinetics.Step{Name: s.Name, Label: s.Label, Source: s.Source, Energy: g.energy, Above: s.Barrier != nil,
		Degeneracy: 1, Transmission: 1, Standard: b.standard(s.Standard), SD: g.sd, SDEntropy: g.sdEntropy}
	if st.SD == nil && st.SDEntropy == nil && b.src.Error != nil && b.src.Error.Step != nil {
		st.SD = deviation(b.src.Error.Step.SI)
	}
	row, tabled := b.table[s.Name]
	if tabled {
		st.Label, st.Source = or(st.Label, row.label), or(st.Source, or(row.source, b.src.Table.File))
	}
	path := []string{"step", s.Name}
	for key, given := range map[string]*float64{"degeneracy": s.Degeneracy, "transmission": s.Transmission} {
		if given == nil {
			continue
		}
		if !(*given > 0) || math.IsInf(*given, 0) {
			b.fault(append(path, key), fmt.Sprintf("%s %g makes no sense", key, *given), "give a number above 0")
			continue
		}
		if key == "degeneracy" {
			st.Degeneracy = *given
		} else {
			st.Transmission = *given
		}
	}
	reaction := s.Reaction
	if tabled && reaction == "" {
		reaction = row.reaction
	}
	if reaction == "" {
		b.fault(path, fmt.Sprintf("step %q has no reaction", s.Name), "add reaction = \"A <=> B\"")
		return st
	}
	from, to, returns, err := kinetics.ParseReaction(reaction, b.names)
	if err != nil {
		p := sumProblem(append(path, "reaction"), err, b.names)
		p.Fix = strings.Replace(p.Fix, "a sum such as \"R + X\"", "a reaction such as \"R + X <=> A\"", 1)
		if tabled && s.Reaction == "" {
			p.File, p.Line, p.Col = b.src.Table.File, row.line, row.reactionCol
		}
		b.problems = append(b.problems, p)
		return st
	}
	st.From, st.To, st.Returns = from, to, returns
	return st
}

// sharing joins the errors that states have in common.
func (b *builder) sharing(m *kinetics.Mechanism) {
	index := map[string]int{}
	for i, n := range m.States() {
		if _, twice := index[n]; twice {
			b.fault([]string{"step", n}, fmt.Sprintf("%q is a species and a step", n), "rename one of them")
		}
		index[n] = i
	}
	b.shareTwins(m, index)
	for i, sh := range b.src.Shared {
		c := kinetics.Common{SD: sh.SD.SI}
		for j, name := range sh.Of {
			k, ok := index[name]
			if !ok {
				b.fault([]string{"shared", fmt.Sprint(i + 1), "of", fmt.Sprint(j + 1)}, fmt.Sprintf("%q is not a state of this mechanism", name), suggest(name, m.States()))
				continue
			}
			c.States = append(c.States, k)
		}
		m.Common = append(m.Common, c)
		m.SharingStated = true
	}
	if e := b.src.Error; e != nil {
		all := func(sd *unit.Quantity, from, to int) {
			if sd == nil {
				return
			}
			c := kinetics.Common{SD: sd.SI}
			for k := from; k < to; k++ {
				c.States = append(c.States, k)
			}
			m.Common = append(m.Common, c)
			m.SharingStated = true
		}
		all(e.SharedSpecies, 0, len(m.Species))
		all(e.SharedStep, len(m.Species), len(m.Species)+len(m.Steps))
	}
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
