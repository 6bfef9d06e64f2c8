package kind

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/diagram"
	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

func init() {
	Register(Kind[profileSource, profileValue]{
		Name:    "profile",
		Doc:     "The free-energy profile of one or more paths through a mechanism.",
		Method:  "Free-energy profiles at 1 M, completed by spectators so that all levels of a path have one composition.",
		Version: 2,
		Fields: []schema.Field{
			{Key: "id", Doc: "the name by which readings and claims call this block", Type: schema.Text, Name: true, Required: true, Example: "hills"},
			usesMechanism,
			{Key: "path", Doc: "the paths, each a list of states and steps in turn", Type: schema.Tables, Required: true, Example: `[{ through = ["R + X", "TSa", "A"] }]`, Fields: []schema.Field{
				{Key: "name", Doc: "the name of the path", Type: schema.Text, Default: "its last state", Example: "1,2"},
				{Key: "through", Doc: "states and steps in turn", Type: schema.Words, Required: true, Wants: "state", Example: `["R + X", "TSa", "A"]`},
			}},
			{Key: "zero", Doc: "the states whose sum is the zero of the axis", Type: schema.Text, Default: "the first state of the first path", Wants: "species", Example: "R + X"},
			{Key: "at", Doc: "the temperature", Type: schema.Amount, Dims: []unit.Dim{unit.Temperature}, Default: "the mechanism's own temperature", Example: "-78 °C"},
			{Key: "energies", Doc: "the unit of the axis", Type: schema.Text, OneOf: []string{"kcal/mol", "kJ/mol", "eV", "cm-1"}, Default: "that of the mechanism"},
			{Key: "sides", Doc: "two paths from one reactant, drawn to its left and right", Type: schema.Flag, Default: "false"},
			{Key: "caption", Doc: "what the figure shows", Type: schema.Text, Example: "Two ways from enone 3"},
		},
		ID:    func(s *profileSource) string { return s.ID },
		Refs:  func(s *profileSource) []Ref { return mechanismRef(s.Mechanism) },
		Check: (*profileSource).check,
		Compute: func(_ context.Context, s *profileSource, in Inputs) (profileValue, error) {
			return onMechanism(in, s.Mechanism, s.walk)
		},
		Results: (*profileSource).results,
		Gives:   []Gift{{"level/STATE@T", "free energy of the state or transition state above the zero of the profile"}},
		Present: (*profileSource).present,
		Sampler: func(_ context.Context, s *profileSource, in Inputs) (Sampler, error) {
			return samplerOn(in, s.Mechanism, func(m *kinetics.Mechanism) []float64 { return []float64{s.temperature(m).SI} }, s.walk, s.results)
		},
	})
}

type profileSource struct {
	ID        string         `key:"id"`
	Mechanism string         `key:"mechanism"`
	Path      []pathSource   `key:"path"`
	Zero      string         `key:"zero"`
	At        *unit.Quantity `key:"at"`
	Energies  string         `key:"energies"`
	Sides     bool           `key:"sides"`
	Caption   string         `key:"caption"`
}

type pathSource struct {
	Name    string   `key:"name"`
	Through []string `key:"through"`
}

type profileValue struct {
	T       unit.Quantity
	Unit    string // of energies in the mechanism
	Paths   [][]levelValue
	Zero    string
	Assumes []string
}

type levelValue struct {
	State, Label, Spectators string
	Item                     string // its result: the state, with its spectators where the state stands at two levels
	Peak                     bool
	G                        float64  // J/mol above the zero
	Position                 *float64 // of a peak between its neighbours, as walked
}

func (s *profileSource) check() fault.Problems {
	ps := temperature([]string{"at"}, s.At)
	for i, p := range s.Path {
		if len(p.Through) == 1 {
			ps = append(ps, problem([]string{"path", fmt.Sprint(i + 1), "through"}, "the path has one element, and a path leads from a state over a step to a state", "write states and steps in turn, such as [\"R + X\", \"TSa\", \"A\"]"))
		}
	}
	if s.Sides && len(s.Path) != 2 {
		ps = append(ps, problem([]string{"sides"}, fmt.Sprintf("two sides need two paths, and here are %d", len(s.Path)), "give two paths from one reactant, or leave out sides"))
	}
	if s.Sides && len(s.Path) == 2 && len(s.Path[0].Through) > 0 && len(s.Path[1].Through) > 0 && s.Path[0].Through[0] != s.Path[1].Through[0] {
		ps = append(ps, problem([]string{"sides"}, "the two paths do not begin with the same state", "begin both with the common reactant"))
	}
	return ps
}

func (s *profileSource) walk(m *kinetics.Mechanism) (profileValue, error) {
	T := s.temperature(m)
	v := profileValue{T: T, Unit: m.Energies, Assumes: m.Held(T.SI), Zero: s.Zero}
	if v.Zero == "" && len(s.Path) > 0 && len(s.Path[0].Through) > 0 {
		v.Zero = s.Path[0].Through[0]
	}
	n, err := m.At(T.SI)
	if err != nil {
		return v, asProblems(err, "")
	}
	var ps fault.Problems
	zero, err := kinetics.ParseSum(v.Zero, n.Names)
	if err != nil {
		key := []string{"zero"}
		if s.Zero == "" {
			key = []string{"path", "1", "through", "1"}
		}
		return v, fault.Problems{sumProblem(key, err, n.Names)}
	}
	for i, p := range s.Path {
		if len(p.Through) == 0 {
			continue // the field list has told it
		}
		levels, err := n.Levels(p.Through, zero)
		if err != nil {
			ps = append(ps, s.pathProblem(i, err, n))
			continue
		}
		var row []levelValue
		for j, l := range levels {
			lv := levelValue{State: l.Name, Label: l.Label, Spectators: l.Spectators, Peak: l.Kind == kinetics.TransitionLevel, G: l.G}
			if lv.Peak {
				if chi := rate.Position(l.G-levels[j-1].G, l.G-levels[j+1].G); !math.IsNaN(chi) {
					lv.Position = &chi
				}
			}
			row = append(row, lv)
		}
		v.Paths = append(v.Paths, row)
	}
	if len(ps) > 0 {
		return v, ps
	}
	v.name()
	return v, nil
}

// name gives every level its result. A state that a path meets again beside
// other spectators, as the catalyst at the end of a turn, is another level.
func (v *profileValue) name() {
	at := map[string]float64{} // by state: its first level
	for _, path := range v.Paths {
		for i := range path {
			l := &path[i]
			first, met := at[l.State]
			if !met {
				at[l.State], first = l.G, l.G
			}
			l.Item = l.State
			if math.Abs(l.G-first) > 1e-6 {
				l.Item = strings.TrimSuffix(l.State+" + "+l.Spectators, " + ")
				l.Label = strings.TrimSuffix(or(l.Label, l.State)+" + "+l.Spectators, " + ")
			}
		}
	}
}

func (s *profileSource) temperature(m *kinetics.Mechanism) unit.Quantity {
	if s.At != nil {
		return *s.At
	}
	return atOr(nil, m)[0]
}

// sumProblem places a sum of species that could not be read.
func sumProblem(path []string, err error, names []string) *fault.Problem {
	var re *kinetics.ReactionError
	if !errors.As(err, &re) {
		return problem(path, err.Error(), "write a sum such as \"R + X\"")
	}
	if re.Unknown != "" {
		re.Fix = suggest(re.Unknown, names)
	}
	p := problem(path, re.Msg, re.Fix)
	p.Char = re.At
	return p
}

// pathProblem places a refusal of the core at the element of the path.
func (s *profileSource) pathProblem(path int, err error, n *kinetics.Network) *fault.Problem {
	at := []string{"path", fmt.Sprint(path + 1), "through"}
	var pe *kinetics.PathError
	if errors.As(err, &pe) {
		if pe.Element < 0 && s.Zero != "" {
			return problem([]string{"zero"}, pe.Msg, pe.Fix)
		}
		element := max(pe.Element, 0)
		at = append(at, fmt.Sprint(element+1))
		var steps []string
		for _, r := range n.Reactions {
			steps = append(steps, r.Name)
		}
		text := strings.TrimSpace(s.Path[path].Through[element])
		if _, err := kinetics.ParseSum(text, n.Names); err != nil && element%2 == 0 && !slices.Contains(steps, text) {
			return sumProblem(at, err, n.Names)
		}
		if near := schema.Nearest(text, steps); near != "" && element%2 == 1 && !slices.Contains(steps, text) {
			pe.Fix = fmt.Sprintf("did you mean %q?", near)
		}
		return problem(at, pe.Msg, pe.Fix)
	}
	return problem(at, err.Error(), "write states and steps in turn, such as [\"R + X\", \"TSa\", \"A\"]")
}

func (s *profileSource) unit(v profileValue) unit.Unit {
	first, _ := energyUnits(or(s.Energies, v.Unit))
	return first
}

func (s *profileSource) results(v profileValue) []Result {
	var out []Result
	seen := map[string]bool{}
	for _, path := range v.Paths {
		for _, l := range path {
			if seen[l.Item] {
				continue
			}
			seen[l.Item] = true
			out = append(out, Result{Key: Key{ID: s.ID, Quantity: "level", Item: l.Item, Condition: ConditionText(v.T)},
				Value: Value(l.G, "none"), Unit: s.unit(v), Form: unit.FormEnergy, Assumes: v.Assumes})
		}
	}
	return out
}

func (s *profileSource) present(v profileValue, sheet *paper.Sheet) {
	at := unit.Print(v.T.SI, v.T.Unit, unit.FormPlain)
	u := s.unit(v)
	p := diagram.Profile{ID: s.ID, Unit: u.Symbol, Zero: v.Zero, Sides: s.Sides,
		Title: or(s.Caption, fmt.Sprintf("Free-energy profile at %s", at))}
	numbers := paper.Table{Caption: fmt.Sprintf("Levels at %s above %s", at, v.Zero),
		Columns: []paper.Column{{Head: "Path"}, {Head: "State"}, {Head: "With"}, {Head: "ΔG", Unit: u.Symbol, Number: true}, {Head: "χ", Number: true}}}
	cond := "@" + ConditionText(v.T)
	highest, top := "", math.Inf(-1)
	var sure []string
	listed := map[string]bool{}
	for i, path := range v.Paths {
		name := s.Path[i].Name
		if name == "" {
			last := path[len(path)-1]
			name = or(last.Label, last.State)
		}
		dp := diagram.ProfilePath{Name: name}
		for _, l := range path {
			cell := sheet.Bare("level/" + l.Item + cond)
			chi, position := "–", math.NaN()
			if l.Position != nil {
				position = *l.Position
				chi = unit.Fixed(position, 2)
			}
			dp.Points = append(dp.Points, diagram.ProfilePoint{Name: l.Item, Label: or(l.Label, l.State), Value: u.Of(l.G), Peak: l.Peak, Position: position, Text: cell.Text})
			numbers.Rows = append(numbers.Rows, []paper.Cell{paper.Text(name), paper.Text(or(l.Label, l.State)), paper.Text(or(l.Spectators, "–")), cell, paper.Text(chi)})
			if l.Peak && l.G > top {
				highest, top = fmt.Sprintf("%s, %s above %s", or(l.Label, l.State), sheet.Value("level/"+l.Item+cond).Text, v.Zero), l.G
			}
			if !listed[l.Item] {
				listed[l.Item] = true
				sure = append(sure, "level/"+l.Item+cond)
			}
		}
		p.Paths = append(p.Paths, dp)
	}
	p.Desc = fmt.Sprintf("Free energies at %s along %d paths; the highest point is %s.", at, len(v.Paths), highest)
	if len(v.Paths) == 1 {
		p.Desc = fmt.Sprintf("Free energies at %s along one path; the highest point is %s.", at, highest)
	}
	scene, err := p.Scene()
	if err != nil {
		sheet.Fail(err)
		return
	}
	sheet.Figure(paper.Figure{Scene: scene, Caption: or(s.Caption, "Free-energy profile") + fmt.Sprintf(" (%s, 1 M).", at), Numbers: numbers})
	sheet.Intervals(sure...)
	sheet.Method("Levels are free energies at 1 M, completed by spectators so that levels of unequal composition compare. A transition state stands nearer the side that its position χ (Marcus) says, in order of χ and not to scale.")
	sheet.Assumption(fmt.Sprintf("The zero is %s.", v.Zero))
	for _, a := range v.Assumes {
		sheet.Assumption(a)
	}
}
