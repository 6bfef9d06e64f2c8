package kind

import (
	"fmt"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/unit"
)

// What kinds share that compute from one mechanism at some temperatures.

var usesMechanism = schema.Field{Key: "mechanism", Doc: "the mechanism it speaks of: its id, or note#id in another note", Type: schema.Text,
	Required: true, Wants: "mechanism", Example: "addition"}

var atField = schema.Field{Key: "at", Doc: "the temperatures", Type: schema.Amounts, Dims: []unit.Dim{unit.Temperature},
	Default: "the mechanism's own temperature", Example: `["-78 °C", "25 °C"]`}

// mechanismRef is the dependence of a block on the mechanism it names.
func mechanismRef(target string) []Ref {
	return []Ref{{Target: target, Model: true, Path: []string{"mechanism"}}}
}

// atOr returns the temperatures asked for, or the mechanism's own.
func atOr(at []unit.Quantity, m *kinetics.Mechanism) []unit.Quantity {
	if len(at) > 0 {
		return at
	}
	return []unit.Quantity{{SI: m.Temperature, Unit: celsius}}
}

// exactly refuses a ± that nothing would carry on; nil is nothing.
func exactly(path []string, q *unit.Quantity) fault.Problems {
	if q == nil || q.SD == 0 {
		return nil
	}
	return fault.Problems{problem(path, fmt.Sprintf("the ± of %q is not carried on", *q), "leave out the ±")}
}

// temperature refuses one with a ± and one at which nothing moves; nil is
// nothing.
func temperature(path []string, q *unit.Quantity) fault.Problems {
	ps := exactly(path, q)
	if q != nil && q.Unit.Symbol != "" && !(q.SI > 0) {
		ps = append(ps, problem(path, fmt.Sprintf("at %q nothing moves", *q), "write a temperature above absolute zero"))
	}
	return ps
}

// distinct refuses a temperature that has a ± or stands in the list twice,
// whatever its unit.
func distinct(key string, list []unit.Quantity) fault.Problems {
	var ps fault.Problems
	seen := map[string]unit.Quantity{}
	for i, q := range list {
		path := []string{key, fmt.Sprint(i + 1)}
		ps = append(ps, temperature(path, &q)...)
		at := canonicalCondition(ConditionText(q))
		if other, twice := seen[at]; twice {
			ps = append(ps, problem(path, fmt.Sprintf("%q is the same temperature as %q", q, other), "list each temperature once"))
			continue
		}
		seen[at] = q
	}
	return ps
}

func kelvins(at []unit.Quantity) []float64 {
	out := make([]float64, len(at))
	for i, q := range at {
		out[i] = q.SI
	}
	return out
}

// onMechanism computes from the mechanism that a block names.
func onMechanism[V any](in Inputs, target string, compute func(*kinetics.Mechanism) (V, error)) (V, error) {
	m, err := in.Mechanism(target)
	if err != nil {
		var none V
		return none, err
	}
	return compute(m)
}

// samplerOn draws the energies of the mechanism that a block names.
func samplerOn[V any](in Inputs, target string, temperatures func(*kinetics.Mechanism) []float64,
	compute func(*kinetics.Mechanism) (V, error), results func(V) []Result) (Sampler, error) {
	m, err := in.Mechanism(target)
	if err != nil {
		return Sampler{}, err
	}
	return Sampler{Mechanism: m, Temperatures: temperatures(m), Results: func(m *kinetics.Mechanism) ([]Result, error) {
		v, err := compute(m)
		if err != nil {
			return nil, err
		}
		return results(v), nil
	}}, nil
}
