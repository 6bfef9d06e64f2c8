package kind

import (
	"fmt"
	"math"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/unit"
)

// chargeField is the field of what is charged, for every kind that has one.
func chargeField(doc string, required bool) schema.Field {
	return schema.Field{Key: "charge", Doc: doc, Type: schema.AmountsByName, Dims: []unit.Dim{unit.Concentration, unit.Equivalent},
		Required: required, Wants: "species", Example: `{ R = "0.20 M", X = "1.1 equiv" }`}
}

var basisField = schema.Field{Key: "basis", Doc: "the species that equiv and mol% refer to", Type: schema.Text, Wants: "species", Example: "R"}

// concentrations turns a charge into mol/L by species; NaN where nothing is stated.
func concentrations(m *kinetics.Mechanism, charge []schema.NamedAmount, basis string) ([]float64, fault.Problems) {
	c, _, ps := concentrationsWith(m, charge, basis, math.NaN())
	return c, ps
}

// concentrationsWith is concentrations where the basis is dosed as well (mol/L;
// NaN: it is not). It returns the concentration too that equiv and mol% refer to.
func concentrationsWith(m *kinetics.Mechanism, charge []schema.NamedAmount, basis string, dosed float64) ([]float64, float64, fault.Problems) {
	var ps fault.Problems
	c := make([]float64, len(m.Species))
	for i := range c {
		c[i] = math.NaN()
	}
	base := math.NaN()
	if basis != "" {
		if m.Index(basis) < 0 {
			ps = append(ps, unknownSpecies(m, basis, []string{"basis"}))
		}
		for _, a := range charge {
			if a.Name == basis && a.Quantity.Unit.Dim == unit.Concentration {
				base = a.Quantity.SI
			}
		}
		switch {
		case math.IsNaN(base):
			base = dosed
		case !math.IsNaN(dosed):
			base += dosed
		}
		if math.IsNaN(base) && len(ps) == 0 {
			ps = append(ps, problem([]string{"basis"}, fmt.Sprintf("%q has no concentration in the charge", basis), "charge it, such as "+basis+" = \"0.20 M\""))
		}
	}
	for _, a := range charge {
		path := []string{"charge", a.Name}
		i := m.Index(a.Name)
		if bad := tooMuch(path, a.Quantity, base); bad != nil {
			ps = append(ps, bad)
			continue
		}
		switch {
		case i < 0:
			ps = append(ps, unknownSpecies(m, a.Name, path))
		case a.Quantity.SI < 0:
			ps = append(ps, problem(path, fmt.Sprintf("%q is negative", a.Quantity), "charge 0 or more"))
		case a.Quantity.SD != 0:
			ps = append(ps, problem(path, fmt.Sprintf("the ± of %q is not carried on", a.Quantity), "leave out the ±"))
		case a.Quantity.Unit.Dim == unit.Equivalent && basis == "":
			ps = append(ps, problem(path, fmt.Sprintf("%q has no basis", a.Quantity), "add basis = \"NAME\", the species that equiv and mol% refer to"))
		case a.Quantity.Unit.Dim == unit.Equivalent:
			c[i] = a.Quantity.SI * base
		default:
			c[i] = a.Quantity.SI
		}
	}
	return c, base, ps
}

// densest is more than anything holds, mol/L: water has 55, diamond 290 (density
// over molar mass).
const densest = 1000

// tooMuch refuses an amount that nothing can be charged in; base is what equiv
// and mol% refer to, mol/L.
func tooMuch(path []string, q unit.Quantity, base float64) *fault.Problem {
	c := q.SI
	if q.Unit.Dim == unit.Equivalent {
		c *= base
	}
	if !(c > densest) {
		return nil
	}
	return problem(path, fmt.Sprintf("%q is more than any mixture holds", q), "check its unit and its power of ten")
}

func unknownSpecies(m *kinetics.Mechanism, name string, path []string) *fault.Problem {
	return problem(path, fmt.Sprintf("%q is not a species of mechanism %q", name, m.ID), suggest(name, m.States()[:len(m.Species)]))
}

// groupsOf turns named sums of products into species indices.
func groupsOf(m *kinetics.Mechanism, groups []schema.Group, key string) ([][]int, fault.Problems) {
	var ps fault.Problems
	owner := map[string]string{}
	out := make([][]int, len(groups))
	for g, group := range groups {
		for k, name := range group.Members {
			path := []string{key}
			if k < len(group.Paths) {
				path = append(path, group.Paths[k]...)
			}
			i := m.Index(name)
			if i < 0 {
				ps = append(ps, unknownSpecies(m, name, path))
				continue
			}
			if other, twice := owner[name]; twice {
				ps = append(ps, problem(path, fmt.Sprintf("%q is counted in %q already", name, other), "name each species once"))
			}
			owner[name] = group.Name
			out[g] = append(out[g], i)
		}
	}
	return out, ps
}

// groupLabel is how figures and tables name a product: by the label of its one
// species, or by its own name.
func groupLabel(m *kinetics.Mechanism, g schema.Group) string {
	if len(g.Members) == 1 && g.Members[0] == g.Name {
		if i := m.Index(g.Name); i >= 0 {
			return or(m.Species[i].Label, g.Name)
		}
	}
	return g.Name
}

// ratioNumber is a over b; an infinite or undefined one is nothing, with words in its place.
func ratioNumber(a, b float64) Number {
	switch {
	case a == 0 && b == 0:
		return Number{Kind: Nothing, Text: "neither forms"}
	case b == 0:
		return Number{Kind: Endless, Text: "only the first forms"}
	}
	return Value(a/b, "beyond any number")
}
