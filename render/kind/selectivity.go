package kind

import (
	"context"
	"fmt"
	"math"
	"slices"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

func init() {
	Register(Kind[selectivitySource, selectivityValue]{
		Name:    "selectivity",
		Doc:     "Which product forms, at the kinetic limit and at equilibrium, at one or more temperatures.",
		Method:  "Kinetic limits by state reduction (Grassmann, Taksar and Heyman) of the chain that is left when no listed product reacts; equilibrium ratios from the free energies.",
		Version: 1,
		Fields: []schema.Field{
			{Key: "id", Doc: "the name by which readings and claims call this block", Type: schema.Text, Name: true, Required: true, Example: "limits"},
			usesMechanism,
			{Key: "from", Doc: "the species whose fate is followed", Type: schema.Text, Default: "with a charge the basis, or else the only charged species that leads to the products", Wants: "species", Example: "R"},
			{Key: "products", Doc: "the products to compare; a product may be a sum of species", Type: schema.Groups, Required: true, Wants: "species", Example: `["A", "B"]`},
			atField,
			chargeField("concentrations of the other species, where they matter", false),
			basisField,
			{Key: "caption", Doc: "what the table shows", Type: schema.Text, Example: "Limits of control"},
		},
		ID:    func(s *selectivitySource) string { return s.ID },
		Refs:  func(s *selectivitySource) []Ref { return mechanismRef(s.Mechanism) },
		Check: (*selectivitySource).check,
		Compute: func(_ context.Context, s *selectivitySource, in Inputs) (selectivityValue, error) {
			return onMechanism(in, s.Mechanism, s.limits)
		},
		Results: (*selectivitySource).results,
		Gives: []Gift{
			{"kinetic/PRODUCT@T", "share of the product at the kinetic limit, among the listed ones"},
			{"kinetic-ratio/A:B@T", "A over B at the kinetic limit"},
			{"pre-equilibrium-ratio/A:B@T", "A over B if exchange before the products were infinitely fast"},
			{"fast-exchange@T", "whether the two ratios above agree within 5 %: holds, does not hold, or nothing to exchange"},
			{"equilibrium/PRODUCT@T", "share of the product at equilibrium, among the listed ones"},
			{"equilibrium-ratio/A:B@T", "A over B at equilibrium"},
		},
		Present: (*selectivitySource).present,
		Sampler: func(_ context.Context, s *selectivitySource, in Inputs) (Sampler, error) {
			return samplerOn(in, s.Mechanism, func(m *kinetics.Mechanism) []float64 { return kelvins(atOr(s.At, m)) }, s.limits, s.results)
		},
	})
}

type selectivitySource struct {
	ID        string               `key:"id"`
	Mechanism string               `key:"mechanism"`
	From      string               `key:"from"`
	Products  []schema.Group       `key:"products"`
	At        []unit.Quantity      `key:"at"`
	Charge    []schema.NamedAmount `key:"charge"`
	Basis     string               `key:"basis"`
	Caption   string               `key:"caption"`
}

type selectivityValue struct {
	From   string   // label of the species followed
	Labels []string // of the products, for tables
	At     []limitsValue
}

type limitsValue struct {
	T               unit.Quantity
	Kinetic         []float64 // by product, as shares of the listed ones
	PreEquilibrium  []float64
	Sources         int // states that products form from
	Fast            bool
	Elsewhere       float64
	Equilibrium     []float64 // empty: not reachable, or not computable
	WhyNot          string
	NoExchange      string // why there is no ratio for infinitely fast exchange
	Assumes, Caveat []string
}

func (s *selectivitySource) check() fault.Problems {
	ps := distinct("at", s.At)
	if s.From == "" && len(s.Charge) == 0 {
		ps = append(ps, problem([]string{"from"}, "no species is named whose fate is followed", "name it, such as from = \"R\", or state a charge"))
	}
	if len(s.Products) < 2 {
		ps = append(ps, problem([]string{"products"}, "fewer than two products are listed", "list the products to compare, such as [\"A\", \"B\"]"))
	}
	return ps
}

// limits computes both limits at every temperature.
func (s *selectivitySource) limits(m *kinetics.Mechanism) (selectivityValue, error) {
	var v selectivityValue
	groups, ps := groupsOf(m, s.Products, "products")
	held, more := concentrations(m, s.Charge, s.Basis)
	ps = append(ps, more...)
	if s.From != "" && m.Index(s.From) < 0 {
		ps = append(ps, unknownSpecies(m, s.From, []string{"from"}))
	}
	if len(ps) > 0 {
		return v, ps
	}
	var products []int
	for _, g := range groups {
		products = append(products, g...)
	}
	from, err := s.followed(m, products, held)
	if err != nil {
		return v, err
	}
	v.From = or(m.Species[from].Label, m.Species[from].Name)
	for _, g := range s.Products {
		v.Labels = append(v.Labels, groupLabel(m, g))
	}
	for _, T := range atOr(s.At, m) {
		n, err := m.At(T.SI)
		if err != nil {
			return v, asProblems(err, "")
		}
		lim, err := n.KineticLimit(kinetics.Limit{From: from, Products: products, Held: held})
		if err != nil {
			return v, asProblems(err, "")
		}
		row := limitsValue{T: T, Fast: lim.FastExchange, Sources: lim.Sources, Elsewhere: lim.Elsewhere, Assumes: m.Held(T.SI), Caveat: lim.Assumes}
		row.Kinetic = shareOut(groups, products, lim.Shares)
		row.PreEquilibrium = shareOut(groups, products, lim.PreEquilibrium)
		row.NoExchange = lim.NoExchange
		shares, why, err := n.EquilibriumShares(products, s.start(held))
		if err != nil {
			return v, asProblems(err, "")
		}
		row.Equilibrium, row.WhyNot = shareOut(groups, products, shares), why
		v.At = append(v.At, row)
	}
	return v, nil
}

// followed is the species whose fate is followed: from, else the basis, else the
// only charged species that leads to the products.
func (s *selectivitySource) followed(m *kinetics.Mechanism, products []int, held []float64) (int, error) {
	if name := or(s.From, s.Basis); name != "" {
		return m.Index(name), nil
	}
	n, err := m.At(atOr(s.At, m)[0].SI)
	if err != nil {
		return -1, asProblems(err, "")
	}
	var lead []int
	for i, c := range held {
		if !(c > 0) || slices.Contains(products, i) {
			continue
		}
		if _, err := n.KineticLimit(kinetics.Limit{From: i, Products: products, Held: held}); err == nil {
			lead = append(lead, i)
		}
	}
	switch len(lead) {
	case 0:
		return -1, fault.Problems{problem([]string{"charge"}, "the products cannot be followed back to one charged species", "name the species whose fate is followed, such as from = \"R\"")}
	case 1:
		return lead[0], nil
	}
	names := namesOf(m, lead)
	return -1, fault.Problems{problem([]string{"from"}, fmt.Sprintf("a kinetic limit follows the fate of one species, and %s lead to the products", listWords(names)), fmt.Sprintf("name one of them, such as from = %q", names[0]))}
}

// start is what is there at the start, for an equilibrium; nil: no charge is stated.
func (s *selectivitySource) start(held []float64) []float64 {
	if len(s.Charge) == 0 {
		return nil
	}
	start := make([]float64, len(held))
	for i, c := range held {
		if !math.IsNaN(c) {
			start[i] = c
		}
	}
	return start
}

// shareOut sums values over groups and divides by the total. It is nil when
// there is nothing to share.
func shareOut(groups [][]int, products []int, values []float64) []float64 {
	if len(values) == 0 {
		return nil
	}
	at := map[int]float64{}
	for i, p := range products {
		at[p] = values[i]
	}
	out, total := make([]float64, len(groups)), 0.0
	for g, members := range groups {
		for _, p := range members {
			out[g] += at[p]
		}
		total += out[g]
	}
	if total == 0 {
		return nil
	}
	for g := range out {
		out[g] /= total
	}
	return out
}

// exchange words whether fast exchange holds.
func (row limitsValue) exchange() string {
	switch {
	case row.NoExchange != "":
		return "not defined: " + row.NoExchange
	case row.Sources < 2:
		return "nothing to exchange"
	case row.Fast:
		return "holds"
	}
	return "does not hold"
}

func (s *selectivitySource) results(v selectivityValue) []Result {
	var out []Result
	for _, row := range v.At {
		condition := ConditionText(row.T)
		key := func(quantity, item string) Key {
			return Key{ID: s.ID, Quantity: quantity, Item: item, Condition: condition}
		}
		assumes := append(append([]string{}, row.Assumes...), row.Caveat...)
		shares := func(quantity string, x []float64) {
			for g, group := range s.Products {
				if len(x) > 0 {
					out = append(out, Result{Key: key(quantity, group.Name), Value: Value(x[g], "none"), Unit: percent, Form: unit.FormPercent, Assumes: assumes})
				} else {
					out = append(out, Result{Key: key(quantity, group.Name), Value: Number{Kind: Nothing, Text: or(row.WhyNot, "none")}, Unit: percent, Form: unit.FormPercent, Assumes: assumes})
				}
			}
		}
		ratios := func(quantity string, x []float64, why string) {
			for a := range s.Products {
				for b := a + 1; b < len(s.Products); b++ {
					n := Number{Kind: Nothing, Text: or(why, "none")}
					if len(x) > 0 {
						n = ratioNumber(x[a], x[b])
					}
					out = append(out, Result{Key: key(quantity, s.Products[a].Name+":"+s.Products[b].Name), Value: n, Unit: plain, Form: unit.FormRatio, Assumes: assumes})
				}
			}
		}
		shares("kinetic", row.Kinetic)
		ratios("kinetic-ratio", row.Kinetic, "")
		ratios("pre-equilibrium-ratio", row.PreEquilibrium, row.NoExchange)
		fast := row.exchange()
		out = append(out, Result{Key: key("fast-exchange", ""), Value: Number{Kind: Words, Text: fast}, Assumes: assumes})
		shares("equilibrium", row.Equilibrium)
		ratios("equilibrium-ratio", row.Equilibrium, row.WhyNot)
	}
	return out
}

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
