package kind

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics"
	"saddlebook/kinetics/unit"
)

// steps adds the step of the source, or the several steps that share its rate.
func (b *builder) steps(m *kinetics.Mechanism, s stepSource) {
	g := b.energies[s.Name]
	base := kinetics.Step{Name: s.Name, Label: s.Label, Source: s.Source, Energy: g.energy, Above: s.Barrier != nil,
		Degeneracy: 1, Transmission: 1, Standard: b.standard(s.Standard), SD: g.sd, SDEntropy: g.sdEntropy}
	path := []string{"step", s.Name}
	row, tabled := b.table[s.Name]
	if tabled {
		base.Label, base.Source = or(base.Label, row.label), or(base.Source, or(row.source, b.src.Table.File))
	}
	for _, f := range []struct {
		key   string
		given *float64
		into  *float64
	}{{"degeneracy", s.Degeneracy, &base.Degeneracy}, {"transmission", s.Transmission, &base.Transmission}} {
		switch {
		case f.given == nil:
		case !(*f.given > 0) || math.IsInf(*f.given, 0):
			b.fault(append(path, f.key), fmt.Sprintf("%s %g makes no sense", f.key, *f.given), "give a number above 0")
		default:
			*f.into = *f.given
		}
	}
	b.alone(s, path)
	texts, at := b.alike(s, path)
	if tabled && texts[0] == "" {
		texts[0] = row.reaction
	}
	var order []int // molecules of the first that is read
	for i, text := range texts {
		st := base
		if len(texts) > 1 {
			st.Name = kinetics.AlikeName(s.Name, i+1)
			if s.Label != "" {
				st.Label = kinetics.AlikeName(s.Label, i+1)
			}
			b.origin[st.Name] = origin{s.Name, i + 1}
		}
		if text == "" {
			b.fault(path, fmt.Sprintf("step %q has no reaction", s.Name), "add reaction = \"A <=> B\"")
		} else if from, to, returns, err := kinetics.ParseReaction(text, b.names); err != nil {
			p := sumProblem(at[i], err, b.names)
			p.Fix = strings.Replace(p.Fix, "a sum such as \"R + X\"", "a reaction such as \"R + X <=> A\"", 1)
			if tabled && s.Reaction == "" {
				p.File, p.Line, p.Col = b.src.Table.File, row.line, row.reactionCol
			}
			b.problems = append(b.problems, p)
		} else {
			st.From, st.To, st.Returns = from, to, returns
			n := kinetics.Molecules(from)
			if order == nil {
				order = append(order, n)
				b.law(s, &st, path)
			} else if n != order[0] {
				b.fault(at[i], fmt.Sprintf("%d molecules meet in %q and %d in the first reaction, so they cannot share a rate", n, text, order[0]), "give it a step of its own")
			} else {
				quiet := *b
				quiet.law(s, &st, path) // faults of its keys are told
			}
			b.tunnelling(s, &st, m, path)
		}
		if st.Law == nil && st.SD == nil && st.SDEntropy == nil && b.src.Error != nil && b.src.Error.Step != nil && !s.lawful() {
			st.SD = deviation(b.src.Error.Step.SI)
		}
		b.states[s.Name] = append(b.states[s.Name], len(m.Species)+len(m.Steps))
		m.Steps = append(m.Steps, st)
	}
}

// sharing joins the errors that states have in common.
func (b *builder) sharing(m *kinetics.Mechanism) {
	index := map[string][]int{}
	for name, states := range b.states {
		if len(states) > 1 {
			index[name] = states
		}
	}
	for i, n := range m.States() {
		if _, twice := index[n]; twice {
			b.fault(b.path(n, ""), fmt.Sprintf("%q is a species and a step", n), "rename one of them")
		}
		index[n] = []int{i}
	}
	var groups [][]int
	for _, names := range b.twins {
		var group []int
		for _, name := range names {
			group = append(group, b.states[name]...)
		}
		groups = append(groups, group)
	}
	for _, st := range b.src.Step {
		if len(b.states[st.Name]) > 1 {
			groups = append(groups, b.states[st.Name])
		}
	}
	m.ShareErrors(groups)
	for i, sh := range b.src.Shared {
		c := kinetics.Common{SD: sh.SD.SI}
		for j, name := range sh.Of {
			states, ok := index[name]
			if !ok {
				b.fault([]string{"shared", fmt.Sprint(i + 1), "of", fmt.Sprint(j + 1)}, fmt.Sprintf("%q is not a state of this mechanism", name), suggest(name, m.States()))
				continue
			}
			c.States = append(c.States, states...)
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
				if k >= len(m.Species) && m.Steps[k-len(m.Species)].Law != nil || k < len(m.Species) && m.Species[k].Unknown {
					continue // not an energy
				}
				c.States = append(c.States, k)
			}
			m.Common = append(m.Common, c)
			m.SharingStated = true
		}
		all(e.SharedSpecies, 0, len(m.Species))
		all(e.SharedStep, len(m.Species), len(m.Species)+len(m.Steps))
	}
}
