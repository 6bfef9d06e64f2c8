package kind

import (
	"context"
	"fmt"
	"math"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/diagram"
	"saddlebook/kinetics"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

func init() {
	Register(Kind[equilibriumSource, equilibriumValue]{
		Name:    "equilibrium",
		Doc:     "What a charge becomes when every reversible step has come to rest.",
		Method:  "Equilibrium compositions over the reversible steps in log space, with conservation laws from the stoichiometry.",
		Version: 1,
		Fields: []schema.Field{
			{Key: "id", Doc: "the name by which readings and claims call this block", Type: schema.Text, Name: true, Required: true, Example: "rest"},
			usesMechanism,
			chargeField("what is charged, by species", true),
			basisField,
			{Key: "among", Doc: "the species whose shares are given; a name may stand for a sum", Type: schema.Groups, Default: "every species that is present", Wants: "species", Example: `["A", "B"]`},
			atField,
			{Key: "caption", Doc: "what the figure shows", Type: schema.Text, Example: "Adducts at equilibrium"},
		},
		ID:    func(s *equilibriumSource) string { return s.ID },
		Refs:  func(s *equilibriumSource) []Ref { return mechanismRef(s.Mechanism) },
		Check: (*equilibriumSource).check,
		Compute: func(_ context.Context, s *equilibriumSource, in Inputs) (equilibriumValue, error) {
			return onMechanism(in, s.Mechanism, s.rest)
		},
		Results: (*equilibriumSource).results,
		Gives: []Gift{
			{"share/NAME@T", "share of the listed species at equilibrium"},
			{"amount/NAME@T", "concentration at equilibrium"},
			{"ratio/A:B@T", "A over B at equilibrium, for the listed species"},
		},
		Present: (*equilibriumSource).present,
		Sampler: func(_ context.Context, s *equilibriumSource, in Inputs) (Sampler, error) {
			return samplerOn(in, s.Mechanism, func(m *kinetics.Mechanism) []float64 { return kelvins(atOr(s.At, m)) }, s.rest, s.results)
		},
	})
}

type equilibriumSource struct {
	ID        string               `key:"id"`
	Mechanism string               `key:"mechanism"`
	Charge    []schema.NamedAmount `key:"charge"`
	Basis     string               `key:"basis"`
	Among     []schema.Group       `key:"among"`
	At        []unit.Quantity      `key:"at"`
	Caption   string               `key:"caption"`
}

type equilibriumValue struct {
	Names  []string
	Labels []string // of the names, for figures and tables
	OneWay []string // steps without return, left out
	At     []restValue
}

type restValue struct {
	T       unit.Quantity
	Amounts []float64 // mol/L, by name
	Assumes []string
}

func (s *equilibriumSource) check() fault.Problems {
	ps := distinct("at", s.At)
	if len(s.Charge) == 0 {
		ps = append(ps, problem([]string{"charge"}, "nothing is charged", "name a species and its concentration, such as { A = \"0.20 M\" }"))
	}
	return ps
}

func (s *equilibriumSource) rest(m *kinetics.Mechanism) (equilibriumValue, error) {
	var v equilibriumValue
	charge, ps := concentrations(m, s.Charge, s.Basis)
	among := s.Among
	if len(among) == 0 {
		for _, sp := range m.Species {
			among = append(among, schema.Group{Name: sp.Name, Members: []string{sp.Name}})
		}
	}
	groups, more := groupsOf(m, among, "among")
	if ps = append(ps, more...); len(ps) > 0 {
		return v, ps
	}
	total := 0.0
	for i, c := range charge {
		if math.IsNaN(c) {
			charge[i] = 0
		}
		total += charge[i]
	}
	if total == 0 {
		return v, fault.Problems{problem([]string{"charge"}, "every amount charged is 0", "charge more than 0 of at least one species")}
	}
	for _, st := range m.Steps {
		if !st.Returns {
			v.OneWay = append(v.OneWay, st.Name)
		}
	}
	present := make([]bool, len(among))
	for _, T := range atOr(s.At, m) {
		n, err := m.At(T.SI)
		if err != nil {
			return v, asProblems(err, "")
		}
		eq, err := n.Equilibrium(charge)
		if err != nil {
			return v, asProblems(err, "")
		}
		row := restValue{T: T, Amounts: make([]float64, len(groups)), Assumes: m.Held(T.SI)}
		for g, members := range groups {
			for _, i := range members {
				row.Amounts[g] += eq.C[i]
			}
			present[g] = present[g] || row.Amounts[g] > 0 || len(s.Among) > 0
		}
		if len(v.OneWay) > 0 {
			row.Assumes = append(row.Assumes, "steps without return are left out: "+listWords(v.OneWay))
		}
		v.At = append(v.At, row)
	}
	for g, group := range among {
		if present[g] {
			v.Names = append(v.Names, group.Name)
			v.Labels = append(v.Labels, groupLabel(m, group))
		}
	}
	for i := range v.At {
		var kept []float64
		for g := range among {
			if present[g] {
				kept = append(kept, v.At[i].Amounts[g])
			}
		}
		v.At[i].Amounts = kept
	}
	return v, nil
}

func (s *equilibriumSource) results(v equilibriumValue) []Result {
	var out []Result
	for _, row := range v.At {
		total := 0.0
		for _, a := range row.Amounts {
			total += a
		}
		condition := ConditionText(row.T)
		key := func(quantity, item string) Key {
			return Key{ID: s.ID, Quantity: quantity, Item: item, Condition: condition}
		}
		for i, name := range v.Names {
			out = append(out,
				Result{Key: key("share", name), Value: Value(row.Amounts[i]/total, "none"), Unit: percent, Form: unit.FormPercent, Assumes: row.Assumes},
				Result{Key: key("amount", name), Value: Value(row.Amounts[i], "none"), Unit: molar, Form: unit.FormMolar, Assumes: row.Assumes})
		}
		if len(s.Among) == 0 {
			continue
		}
		for a := range v.Names {
			for b := a + 1; b < len(v.Names); b++ {
				out = append(out, Result{Key: key("ratio", v.Names[a]+":"+v.Names[b]), Value: ratioNumber(row.Amounts[a], row.Amounts[b]), Unit: plain, Form: unit.FormRatio, Assumes: row.Assumes})
			}
		}
	}
	return out
}

func (s *equilibriumSource) present(v equilibriumValue, sheet *paper.Sheet) {
	numbers := paper.Table{Caption: or(s.Caption, "Equilibrium"), Columns: []paper.Column{{Head: "T", Number: true}, {Head: "Species"}, {Head: "Share", Number: true}, {Head: "Concentration", Number: true}}}
	bars := diagram.Bars{ID: s.ID, Title: or(s.Caption, "Shares at equilibrium")}
	var sure []string
	lead, leadShare := "", -1.0
	for _, row := range v.At {
		cond := "@" + ConditionText(row.T)
		at := unit.Print(row.T.SI, row.T.Unit, unit.FormPlain)
		group := diagram.BarGroup{Name: at}
		total := 0.0
		for _, a := range row.Amounts {
			total += a
		}
		for i, name := range v.Names {
			share := sheet.Value("share/" + name + cond)
			numbers.Rows = append(numbers.Rows, []paper.Cell{paper.Text(at), paper.Text(v.Labels[i]), share, sheet.Value("amount/" + name + cond)})
			low, high := sheet.Ends("share/" + name + cond)
			group.Bars = append(group.Bars, diagram.Bar{Name: v.Labels[i], Share: row.Amounts[i] / total, Text: share.Text, Low: low, High: high})
			sure = append(sure, "share/"+name+cond)
			if x := row.Amounts[i] / total; x > leadShare {
				lead, leadShare = fmt.Sprintf("%s leads with %s at %s", v.Labels[i], share.Text, at), x
			}
		}
		bars.Groups = append(bars.Groups, group)
		for _, a := range row.Assumes {
			sheet.Assumption(a)
		}
	}
	bars.Desc = fmt.Sprintf("Shares at equilibrium: %s.", lead)
	if len(v.OneWay) > 0 {
		sheet.Caution(fmt.Sprintf("This is where the reversible steps alone come to rest. Steps without return (%s) would carry it on.", listWords(v.OneWay)))
	}
	scene, err := bars.Scene()
	if err != nil {
		sheet.Fail(err)
		return
	}
	sheet.Figure(paper.Figure{Scene: scene, Caption: or(s.Caption, "Shares at equilibrium."), Numbers: numbers})
	sheet.Intervals(sure...)
	sheet.Method("Equilibrium composition over the reversible steps, in log space, with the conservation laws found from the stoichiometry, to a relative 1e-10.")
	var charged []string
	for _, a := range s.Charge {
		charged = append(charged, fmt.Sprintf("%s %s", a.Name, a.Quantity))
	}
	sheet.Assumption("A share is of the molecules of the species shown, so two molecules joined in one count once.")
	sheet.Assumption("Charged: " + listWords(charged) + ". Ideal solution: activities are concentrations.")
}
