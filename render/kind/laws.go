package kind

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/kinetics/rate"
	"saddlebook/kinetics/thermo"
	"saddlebook/kinetics/unit"
)

// stepSource is one step, or several that share a rate.
type stepSource struct {
	Name      string   `key:"*"`
	Reaction  string   `key:"reaction"`
	Reactions []string `key:"reactions"`
	energySource
	Barrier *unit.Quantity `key:"barrier"`
	lawSource
	Heat         *unit.Quantity `key:"heat"`
	Degeneracy   *float64       `key:"degeneracy"`
	Transmission *float64       `key:"transmission"`
	Limit        string         `key:"limit"`
	Tunnelling   string         `key:"tunnelling"`
	Imaginary    *unit.Quantity `key:"imaginary"`
	VForward     *unit.Quantity `key:"V-forward"`
	VBack        *unit.Quantity `key:"V-back"`
}

// lawSource is the rate of a step in place of an energy.
type lawSource struct {
	Rate      *unit.Quantity `key:"k"`
	At        *unit.Quantity `key:"at"`
	Ea        *unit.Quantity `key:"Ea"`
	Back      *unit.Quantity `key:"k-back"`
	AtBack    *unit.Quantity `key:"at-back"`
	EaBack    *unit.Quantity `key:"Ea-back"`
	A         *unit.Quantity `key:"A"`
	ABack     *unit.Quantity `key:"A-back"`
	K         *unit.Quantity `key:"K"`
	AtK       *unit.Quantity `key:"at-K"`
	Diffusion *bool          `key:"diffusion"`
	Fast      *bool          `key:"fast"`
}

func lawFields() []schema.Field {
	rates := []unit.Dim{unit.RateConstant(1), unit.RateConstant(2), unit.RateConstant(3)}
	constants := []unit.Dim{unit.None, unit.EquilibriumConstant(-2), unit.EquilibriumConstant(-1), unit.EquilibriumConstant(1), unit.EquilibriumConstant(2)}
	energy, kelvin := []unit.Dim{unit.MolarEnergy}, []unit.Dim{unit.Temperature}
	return []schema.Field{
		{Key: "k", Doc: "rate constant, in place of an energy; its unit must match the order, and its ± is one standard deviation", Type: schema.Amount, Dims: rates, Example: "3.5e-4 M-1 s-1"},
		{Key: "at", Doc: "the temperature at which k holds; away from it without Ea the ΔG‡ that k implies is held (and flagged)", Type: schema.Amount, Dims: kelvin, Default: "the mechanism's", Example: "40 °C"},
		{Key: "Ea", Doc: "activation energy, with k or A", Type: schema.Amount, Dims: energy, Bare: "@energies", Example: "18.2 kcal/mol"},
		{Key: "A", Doc: "pre-exponential factor, with Ea and in place of k", Type: schema.Amount, Dims: rates, Example: "2e11 s-1"},
		{Key: "k-back", Doc: "rate constant of the return, with k; without it or K the return follows from the species", Type: schema.Amount, Dims: rates, Example: "2e-6 s-1"},
		{Key: "at-back", Doc: "the temperature at which k-back holds", Type: schema.Amount, Dims: kelvin, Default: "that of k", Example: "40 °C"},
		{Key: "Ea-back", Doc: "activation energy of the return, with k-back or A-back", Type: schema.Amount, Dims: energy, Bare: "@energies", Example: "24.5 kcal/mol"},
		{Key: "A-back", Doc: "pre-exponential factor of the return, with A and Ea-back", Type: schema.Amount, Dims: rates, Example: "5e12 s-1"},
		{Key: "K", Doc: "equilibrium constant, with k, A, a barrier, diffusion or fast; at other temperatures it follows heat, else the ΔG that it implies is held (and flagged)", Type: schema.Amount, Dims: constants, Example: "1.2e3 M-1"},
		{Key: "at-K", Doc: "the temperature at which K holds", Type: schema.Amount, Dims: kelvin, Default: "that of k, or the mechanism's", Example: "25 °C"},
		{Key: "diffusion", Doc: "the direction in which two molecules meet (if both do, the downhill one) runs at the diffusion limit; the return follows from K or the species", Type: schema.Flag, Example: "true"},
		{Key: "fast", Doc: "an equilibrium that is kept fast: the downhill direction runs at the diffusion limit, or at 1e9 s-1 if unimolecular; a conclusion that a tenth of that would move is flagged", Type: schema.Flag, Example: "true"},
	}
}

func stepFields() []schema.Field {
	energy := []unit.Dim{unit.MolarEnergy}
	fields := []schema.Field{
		{Key: "reaction", Doc: "what goes to what; <=> is reversible, -> has no return", Type: schema.Text, Example: "R + X <=> A"},
		{Key: "reactions", Doc: "several reactions, in place of one, that share one rate (a barrier, k, A, diffusion or fast) and its error; they become steps NAME.1, NAME.2 and so on", Type: schema.Words, Example: `["R + X -> A", "S + X -> B"]`},
		{Key: "barrier", Doc: "free energy of activation above the reactants, in place of an energy", Type: schema.Amount, Dims: energy, Bare: "@energies", Example: "22.4"},
	}
	fields = append(fields, lawFields()...)
	fields = append(fields, []schema.Field{
		{Key: "heat", Doc: "enthalpy of reaction, negative for an exotherm, where the species do not give it; K follows it to other temperatures", Type: schema.Amount, Dims: energy, Bare: "@energies", Example: "-85 kJ/mol"},
		{Key: "degeneracy", Doc: "number of equivalent paths, in both directions", Type: schema.Real, Default: "1", Example: "2"},
		{Key: "transmission", Doc: "transmission coefficient, in both directions", Type: schema.Real, Default: "1"},
		{Key: "limit", Doc: "diffusion: the molecules must meet first, 1/k = 1/k(TS) + 1/k(diffusion), the same factor in both directions", Type: schema.Text, OneOf: []string{"diffusion"}, Example: "diffusion"},
		{Key: "tunnelling", Doc: "how tunnelling is counted, the same factor in both directions", Type: schema.Text, OneOf: []string{string(rate.ByWigner), string(rate.ByBell), string(rate.ByEckart), string(rate.BySkodjeTruhlar)}, Example: "Wigner"},
		{Key: "imaginary", Doc: "magnitude of the imaginary wavenumber, for tunnelling", Type: schema.Amount, Dims: []unit.Dim{unit.Wavenumber}, Bare: "cm-1", Default: "that among its frequencies", Example: "1350 cm-1"},
		{Key: "V-forward", Doc: "height of the barrier above the reactants, an energy with zero point and never G, for Eckart and Skodje-Truhlar", Type: schema.Amount, Dims: energy, Bare: "@energies", Default: "from E and frequencies of all states of the step", Example: "14.2 kcal/mol"},
		{Key: "V-back", Doc: "the same above the products", Type: schema.Amount, Dims: energy, Bare: "@energies", Default: "from E and frequencies of all states of the step", Example: "20.1 kcal/mol"},
	}...)
	return append(fields, energyFields()...)
}

func yes(flag *bool) bool { return flag != nil && *flag }

// rates lists what the source gives as the rate of a step, by key.
func (s stepSource) rates() []string {
	var keys []string
	for _, k := range []struct {
		key   string
		given bool
	}{{"barrier", s.Barrier != nil}, {"k", s.Rate != nil}, {"A", s.A != nil}, {"diffusion", yes(s.Diffusion)}, {"fast", yes(s.Fast)}} {
		if k.given {
			keys = append(keys, k.key)
		}
	}
	return keys
}

// lawful tells whether the rate of the step is not that of an energy.
func (s stepSource) lawful() bool {
	keys := s.rates()
	return len(keys) > 0 && keys[0] != "barrier"
}

// alone checks that every key of a rate stands beside those that it needs.
func (b *builder) alone(s stepSource, path []string) {
	at := func(key string) []string { return append(append([]string{}, path...), key) }
	if keys := s.rates(); len(keys) > 1 {
		b.fault(at(keys[1]), fmt.Sprintf("%s stands beside %s", keys[1], keys[0]), "keep one of them: a step has one rate")
	}
	fastOnes := yes(s.Diffusion) || yes(s.Fast)
	for _, k := range []struct {
		key   string
		given bool
		needs string
		there bool
		fix   string
	}{
		{"at", s.At != nil, "k", s.Rate != nil || s.A != nil, "add k, or leave out at"},
		{"Ea", s.Ea != nil, "k or A", s.Rate != nil || s.A != nil, "add k with at, or A"},
		{"k-back", s.Back != nil, "k", s.Rate != nil || fastOnes || s.Barrier != nil || s.A != nil, "add k"},
		{"at-back", s.AtBack != nil, "k-back", s.Back != nil, "add k-back, or leave out at-back"},
		{"A-back", s.ABack != nil, "A", s.A != nil, "add A and Ea, or give k-back beside k"},
		{"Ea-back", s.EaBack != nil, "k-back or A-back", s.Back != nil || s.ABack != nil, "add k-back or A-back"},
		{"at-K", s.AtK != nil, "K", s.K != nil, "add K, or leave out at-K"},
		{"K", s.K != nil, "k, A, barrier, diffusion or fast", len(s.rates()) > 0, "give the step one of these: beside the energy of a transition state the return follows from the species"},
		{"imaginary", s.Imaginary != nil, "tunnelling", s.Tunnelling != "", "add tunnelling = \"Wigner\", or leave it out"},
		{"V-forward", s.VForward != nil, "tunnelling", s.Tunnelling != "", "add tunnelling = \"Eckart\", or leave it out"},
		{"V-back", s.VBack != nil, "tunnelling", s.Tunnelling != "", "add tunnelling = \"Eckart\", or leave it out"},
	} {
		if k.given && !k.there {
			key, _, _ := strings.Cut(strings.ReplaceAll(k.needs, ",", ""), " ")
			b.problems = append(b.problems, lacking(key, problem(at(k.key), k.key+" has no "+k.needs+" beside it", k.fix)))
		}
	}
	switch {
	case s.A != nil && s.At != nil:
		b.fault(at("at"), "at stands beside A, which holds at any temperature", "leave out at, or give k in place of A")
	case s.A != nil && s.Ea == nil:
		b.problems = append(b.problems, lacking("Ea", problem(at("A"), "A has no Ea beside it", "add Ea, such as Ea = \"18.2 kcal/mol\"")))
	case s.Back != nil && s.Rate == nil && len(s.rates()) > 0:
		b.fault(at("k-back"), "k-back stands beside "+s.rates()[0], "give K in its place, or k beside it")
	case s.ABack != nil && s.EaBack == nil:
		b.problems = append(b.problems, lacking("Ea-back", problem(at("A-back"), "A-back has no Ea-back beside it", "add Ea-back")))
	case s.ABack != nil && s.Back != nil:
		b.fault(at("A-back"), "A-back stands beside k-back", "keep one of them")
	}
	if s.lawful() {
		for _, k := range []struct {
			key   string
			given bool
		}{{"degeneracy", s.Degeneracy != nil}, {"transmission", s.Transmission != nil}, {"tunnelling", s.Tunnelling != ""}} {
			if k.given {
				b.fault(at(k.key), fmt.Sprintf("%s stands beside %s, and a rate as it is stated holds it already", k.key, s.rates()[0]), "leave it out, or give the step an energy or a barrier")
			}
		}
	}
	for _, q := range []struct {
		key string
		q   *unit.Quantity
		fix string
	}{
		{"Ea", s.Ea, "give k at a temperature amid the measured ones and put the ± there: A and Ea of one fit move together"},
		{"Ea-back", s.EaBack, "put the ± on k-back"},
		{"A", s.A, "give k at a temperature amid the measured ones and put the ± there: A and Ea of one fit move together"},
		{"A-back", s.ABack, "give k-back and put the ± there"},
		{"heat", s.Heat, "leave out the ±"}, {"imaginary", s.Imaginary, "leave out the ±"},
		{"V-forward", s.VForward, "leave out the ±"}, {"V-back", s.VBack, "leave out the ±"},
	} {
		if q.q != nil && q.q.SD != 0 {
			b.fault(at(q.key), fmt.Sprintf("the ± of %q is not carried on", *q.q), q.fix)
		}
	}
}

// law fills in the rate of a step whose reaction is read.
func (b *builder) law(s stepSource, st *kinetics.Step, path []string) {
	at := func(key string) []string { return append(append([]string{}, path...), key) }
	n, back := kinetics.Molecules(st.From), kinetics.Molecules(st.To)
	home := b.home
	if s.At != nil {
		home = s.At.SI
	}
	switch {
	case yes(s.Diffusion):
		st.Law = &kinetics.Law{Kind: kinetics.AtDiffusion}
	case yes(s.Fast):
		st.Law = &kinetics.Law{Kind: kinetics.KeptFast}
	case s.Rate != nil:
		b.order(at("k"), "rate constant", *s.Rate, unit.RateConstant(n), "the step is of order "+fmt.Sprint(n))
		st.Law = &kinetics.Law{Kind: kinetics.Measured, Forward: &kinetics.Constant{K: s.Rate.SI, At: home, Ea: amount(s.Ea)}}
		st.SD = onEnergy(s.Rate, home)
	case s.A != nil:
		b.order(at("A"), "factor", *s.A, unit.RateConstant(n), "the step is of order "+fmt.Sprint(n))
		st.Law = &kinetics.Law{Kind: kinetics.Measured, Forward: &kinetics.Constant{A: s.A.SI, Ea: amount(s.Ea)}}
	}
	way := "its return is of order " + fmt.Sprint(back)
	switch {
	case st.Law == nil || st.Law.Kind != kinetics.Measured:
	case s.Back != nil:
		b.order(at("k-back"), "rate constant", *s.Back, unit.RateConstant(back), way)
		T := home
		if s.AtBack != nil {
			T = s.AtBack.SI
		}
		st.Law.Back = &kinetics.Constant{K: s.Back.SI, At: T, Ea: amount(s.EaBack)}
		st.SDReturn = onEnergy(s.Back, T)
	case s.ABack != nil:
		b.order(at("A-back"), "factor", *s.ABack, unit.RateConstant(back), way)
		st.Law.Back = &kinetics.Constant{A: s.ABack.SI, Ea: amount(s.EaBack)}
	}
	if s.K != nil {
		makes := fmt.Sprintf("the step makes %d molecules of %d", back, n)
		if back == n {
			makes = "the step keeps the number of molecules"
		}
		b.order(at("K"), "constant", *s.K, unit.EquilibriumConstant(back-n), makes)
		T := home
		if s.AtK != nil {
			T = s.AtK.SI
		}
		st.K = &kinetics.StatedK{K: s.K.SI, At: T}
		st.SDReturn = onEnergy(s.K, T)
	}
	st.Heat = amount(s.Heat)
	st.Limited = s.Limit == "diffusion"
}

// order holds the unit of a constant against what the reaction asks for.
func (b *builder) order(path []string, what string, q unit.Quantity, want unit.Dim, why string) {
	if !(q.SI > 0) {
		b.fault(path, fmt.Sprintf("a %s of %s makes no sense", what, q), "give a number above 0")
		return
	}
	if q.Unit.Dim == want {
		return
	}
	has := "in " + q.Unit.Symbol
	if q.Unit.Symbol == "" {
		has = "without a unit"
	}
	fix := "write it in " + unitOf(want)
	if want == unit.None {
		fix = "write it without a unit"
	}
	b.fault(path, fmt.Sprintf("%q is a %s %s, and %s", q, what, has, why), fix)
}

// unitOf is the usual unit of a kind of constant.
func unitOf(d unit.Dim) string {
	for _, u := range append(rateUnits[:], constantUnits[-2], constantUnits[-1], constantUnits[1], constantUnits[2]) {
		if u.Dim == d {
			return u.Symbol
		}
	}
	return "its own unit"
}

func amount(q *unit.Quantity) *float64 {
	if q == nil {
		return nil
	}
	x := q.SI
	return &x
}

// onEnergy turns the standard deviation of a constant into one of energy, J/mol:
// it is log-normal.
func onEnergy(q *unit.Quantity, T float64) *float64 {
	if q.SD == 0 || !(q.SI > 0) {
		return nil
	}
	return deviation(rate.R * T * q.SD / q.SI)
}

// tunnelling reads how a step tunnels, with what its frequencies give.
func (b *builder) tunnelling(s stepSource, st *kinetics.Step, m *kinetics.Mechanism, path []string) {
	if s.Tunnelling == "" || s.lawful() {
		return
	}
	at := func(key string) []string { return append(append([]string{}, path...), key) }
	t := &rate.Tunnelling{By: rate.Correction(s.Tunnelling)}
	ts := st.Energy.Molecule
	switch {
	case s.Imaginary != nil:
		t.Imaginary = math.Abs(s.Imaginary.SI)
	case ts != nil:
		t.Imaginary, _ = ts.Imaginary()
	}
	if !(t.Imaginary > 0) {
		b.problems = append(b.problems, lacking("imaginary", problem(at("tunnelling"), "tunnelling has no imaginary wavenumber to go by", "add imaginary, such as imaginary = \"1350 cm-1\", or give the step E with frequencies")))
		return
	}
	if t.By == rate.ByEckart || t.By == rate.BySkodjeTruhlar {
		forward, back, known := heights(m, st)
		if s.VForward != nil {
			forward = s.VForward.SI
		}
		if s.VBack != nil {
			back = s.VBack.SI
		}
		for _, v := range []struct {
			key   string
			given bool
			value float64
		}{{"V-forward", s.VForward != nil, forward}, {"V-back", s.VBack != nil, back}} {
			switch {
			case !v.given && !known:
				b.problems = append(b.problems, lacking(v.key, problem(at("tunnelling"), fmt.Sprintf("the correction of %s has no %s to go by", t.By, v.key), "add V-forward and V-back, energies with zero point, or give all states of the step E with frequencies")))
				return
			case !(v.value > 0):
				key := v.key
				if !v.given {
					key = "tunnelling"
				}
				b.fault(at(key), fmt.Sprintf("the height %s of %s is not above 0", v.key, unit.Print(v.value, unit.Must("kcal/mol"), unit.FormEnergy)), "give an energy with zero point above 0, or take the correction of Wigner")
				return
			}
		}
		t.Forward, t.Back = forward, back
	} else {
		for key, q := range map[string]*unit.Quantity{"V-forward": s.VForward, "V-back": s.VBack} {
			if q != nil {
				b.fault(at(key), fmt.Sprintf("the correction of %s takes no %s", t.By, key), "leave it out, or write tunnelling = \"Eckart\"")
			}
		}
	}
	st.Tunnelling = t
}

// heights returns the energies with zero point of the transition state above
// both sides, where every state of the step is given by E with frequencies.
func heights(m *kinetics.Mechanism, st *kinetics.Step) (forward, back float64, known bool) {
	level := func(e thermo.Energy) (float64, bool) {
		if e.Molecule == nil {
			return 0, false
		}
		c, err := e.Molecule.At(thermo.Reference)
		return c.E + c.ZPE, err == nil
	}
	top, known := level(st.Energy)
	side := func(terms []kinetics.Term) float64 {
		sum := 0.0
		for _, t := range terms {
			x, ok := level(m.Species[t.Species].Energy)
			known = known && ok
			sum += float64(t.N) * x
		}
		return sum
	}
	from, to := side(st.From), side(st.To)
	return top - from, top - to, known
}

// alike reads the reactions of one step: one, or several that share its rate.
func (b *builder) alike(s stepSource, path []string) (texts []string, at [][]string) {
	if len(s.Reactions) == 0 {
		return []string{s.Reaction}, [][]string{append(append([]string{}, path...), "reaction")}
	}
	for i, r := range s.Reactions {
		texts = append(texts, r)
		at = append(at, append(append([]string{}, path...), "reactions", fmt.Sprint(i+1)))
	}
	if s.Reaction != "" {
		b.fault(append(append([]string{}, path...), "reaction"), "reaction stands beside reactions", "keep one of them")
	}
	if len(s.rates()) == 0 {
		b.fault(append(append([]string{}, path...), "reactions"), "several reactions share no energy of a transition state", "give them a barrier above their reactants, or k, or one step each")
	}
	return texts, at
}
