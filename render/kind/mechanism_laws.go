package kind

import (
	"fmt"
	"slices"
	"strings"

	"saddlebook/kinetics"
	"saddlebook/kinetics/thermo"
	"saddlebook/kinetics/unit"
	"saddlebook/render/paper"
)

// stepFlags are the marks of a step whose rate is not that of its barrier alone.
func stepFlags(st kinetics.Step, row stepValue) []string {
	var flags []string
	if !st.Returns {
		flags = append(flags, "no return")
	}
	if l := st.Law; l != nil {
		switch {
		case l.Kind == kinetics.AtDiffusion:
			flags = append(flags, "at the diffusion limit")
		case l.Kind == kinetics.KeptFast:
			flags = append(flags, "kept fast")
		case l.Forward.A != 0:
			flags = append(flags, "Arrhenius")
		default:
			flags = append(flags, "k stated")
		}
	}
	if st.Degeneracy != 1 {
		flags = append(flags, "degeneracy "+unit.Digits(st.Degeneracy, 2))
	}
	if st.Transmission != 1 {
		flags = append(flags, "transmission "+unit.Digits(st.Transmission, 2))
	}
	if st.Tunnelling != nil {
		flags = append(flags, "tunnelling × "+unit.Digits(row.Tunnelling, 2))
	}
	if st.Limited {
		flags = append(flags, "diffusion × "+unit.Digits(row.Limit, 2))
	}
	return flags
}

// limited tells whether diffusion has a part in the rate of a step.
func limited(st kinetics.Step) bool {
	if st.Limited || st.Law == nil || st.Law.Kind == kinetics.Measured {
		return st.Limited
	}
	return kinetics.Molecules(st.From) > 1 || kinetics.Molecules(st.To) > 1
}

// lawAssumes is what the results of a step with a law rest on.
func lawAssumes(st kinetics.Step) []string {
	if st.Law == nil {
		return nil
	}
	switch st.Law.Kind {
	case kinetics.AtDiffusion:
		return []string{st.Name + ": the direction in which two molecules meet is set to the diffusion limit; its barriers are those that give such rates"}
	case kinetics.KeptFast:
		return []string{st.Name + ": kept fast as an equilibrium; its rate and barriers are set and not known"}
	}
	return []string{st.Name + ": its rate constant is stated, and its barrier is the ΔG‡ that this implies"}
}

// words writes the rate of a step as its author gave it.
func (s stepSource) words() string {
	parts := quantityWords([]named{{"barrier", s.Barrier}, {"k", s.Rate}, {"at", s.At}, {"A", s.A}, {"Ea", s.Ea}})
	if yes(s.Diffusion) {
		parts = append(parts, "at the diffusion limit")
	}
	if yes(s.Fast) {
		parts = append(parts, "kept fast")
	}
	parts = append(parts, quantityWords([]named{{"k-back", s.Back}, {"at", s.AtBack}, {"A-back", s.ABack}, {"Ea-back", s.EaBack}, {"K", s.K}, {"at", s.AtK}, {"heat", s.Heat}})...)
	return strings.ReplaceAll(strings.Join(parts, ", "), ", at ", " at ")
}

// methods says by which laws the rates were found, naming the steps.
func (s *mechanismSource) methods(v mechanismValue) []string {
	by := map[string][]string{}
	var order []string
	note := func(what, step string) {
		if by[what] == nil {
			order = append(order, what)
		}
		by[what] = append(by[what], step)
	}
	const eyring = "Eyring equation with the exact constants of 2019"
	for _, st := range v.Model.Steps {
		name := or(st.Label, st.Name)
		switch l := st.Law; {
		case l == nil:
			note(eyring, name)
		case l.Kind == kinetics.AtDiffusion:
			note("Smoluchowski limit 8RT/3η for two molecules that meet", name)
		case l.Kind == kinetics.KeptFast:
			note("kept fast, the downhill direction at the Smoluchowski limit 8RT/3η, or at 10⁹ s⁻¹ if unimolecular", name)
		case l.Forward.A != 0:
			note("Arrhenius equation with the A and Ea stated", name)
		case l.Forward.Ea != nil:
			note("as stated, carried to other temperatures by Ea", name)
		default:
			note("as stated, carried to other temperatures at the ΔG‡ that it implies", name)
		}
	}
	var ways []string
	for _, what := range order {
		if len(order) == 1 {
			ways = append(ways, what)
			continue
		}
		ways = append(ways, what+" ("+listWords(by[what])+")")
	}
	text := "Rate constants: " + strings.Join(ways, "; ")
	stated := slices.ContainsFunc(v.Model.Steps, func(st kinetics.Step) bool { return st.Returns && (st.K != nil || st.Law != nil && st.Law.Back != nil) })
	if stated {
		text += "; equilibrium constants as stated, else from the free energies; every reversible step and every cycle obeys detailed balance."
	} else {
		text += "; equilibrium constants from the free energies, so that each reversible step obeys detailed balance."
	}
	out := []string{text + " Position: the Marcus relation χ = √f / (√f + √b) of the forward and back barriers f and b; early below 0.45, late above 0.55."}
	by, order = map[string][]string{}, nil
	for _, st := range v.Model.Steps {
		name := or(st.Label, st.Name)
		if t := st.Tunnelling; t != nil {
			text := fmt.Sprintf("Tunnelling by the correction of %s, the same factor both ways", t.By)
			switch t.By {
			case "Wigner":
				text += " (1 + u²/24)"
			case "Bell":
				text += " (half of u over its sine)"
			}
			note(text, fmt.Sprintf("%s, %si cm⁻¹", name, unit.Fixed(t.Imaginary/100, 0)))
		}
		if st.Limited {
			note("Limited by diffusion, 1/k = 1/k(TS) + 1/k(Smoluchowski), the same factor both ways", name)
		}
	}
	for _, what := range order {
		out = append(out, what+": "+strings.Join(by[what], "; ")+".")
	}
	return out
}

// lawAssumptions says what the rates take for granted.
func (s *mechanismSource) lawAssumptions(v mechanismValue) []string {
	var out []string
	energies, limit := false, false
	for _, st := range v.Model.Steps {
		energies = energies || st.Law == nil
		limit = limit || limited(st)
	}
	if energies {
		out = append(out, "Transmission coefficients and path degeneracies are 1 unless the block says otherwise; they act in both directions.")
	}
	if limit {
		eta := "1 mPa s, that of water at 20 °C, since none is stated"
		if s.Viscosity != nil {
			eta = s.Viscosity.String()
		}
		T := s.temperatures()[0]
		out = append(out, fmt.Sprintf("Viscosity for the diffusion limit, at every temperature: %s; the limit is %s at %s.", eta,
			unit.Print(v.Model.DiffusionLimit(T.SI), rateUnit(2), unit.FormRate), unit.Print(T.SI, T.Unit, unit.FormPlain)))
	}
	if fast := v.Model.FastSteps(); len(fast) > 0 {
		out = append(out, "Kept fast and not measured: "+listWords(fast)+". What a tenth of that speed would change is flagged where a claim is checked.")
	}
	var free []string
	for _, sp := range v.Model.Species {
		if sp.Unknown {
			free = append(free, or(sp.Label, sp.Name))
		}
	}
	if len(free) > 0 {
		out = append(out, "Without an energy: "+listWords(free)+". Free energies of reaction are given where constants or energies determine them.")
	}
	if slices.ContainsFunc(v.Model.Steps, func(st kinetics.Step) bool { return st.Law != nil }) {
		out = append(out, "Stated constants hold at 1 M. The barrier of a stated rate is the ΔG‡ that the Eyring equation gives for it; a ± on it is log-normal.")
	}
	return out
}

// moleculeValue is the thermochemistry of one state, J/mol and J/mol/K.
type moleculeValue struct {
	State             string
	E, ZPE, H, S, G   float64
	Imaginary         float64 // 1/m, magnitude; 0: none
	Soft, Frequencies int
}

// contributions returns the thermochemistry of every state given by E and
// frequencies, conformers apart.
func contributions(m *kinetics.Mechanism, T float64) []moleculeValue {
	var out []moleculeValue
	add := func(name string, e thermo.Energy) {
		if e.Molecule == nil {
			return
		}
		c, err := e.Molecule.At(T)
		if err != nil {
			return // the building of the mechanism has refused it
		}
		nu, _ := e.Molecule.Imaginary()
		below := e.Molecule.LowModes.Given().Cutoff
		if below == 0 {
			below = thermo.DefaultCutoff
		}
		out = append(out, moleculeValue{State: name, E: c.E + e.Offset, ZPE: c.ZPE, H: c.H + e.Offset, S: c.S, G: c.G + e.Offset, Imaginary: nu, Soft: e.Molecule.Soft(below), Frequencies: len(e.Molecule.Frequencies)})
	}
	for _, sp := range m.Species {
		add(sp.Name, sp.Energy)
	}
	for _, st := range m.Steps {
		add(st.Name, st.Energy)
	}
	return out
}

func (s *mechanismSource) moleculeResults(v mechanismValue, i int, T unit.Quantity) []Result {
	var out []Result
	energy := unit.Must(or(s.Energies, "kcal/mol"), unit.MolarEnergy)
	for _, c := range v.Molecules[i] {
		add := func(quantity string, x float64, u unit.Unit, f unit.Form) {
			out = append(out, Result{Key: Key{ID: s.ID, Quantity: quantity, Item: c.State, Condition: ConditionText(T)}, Value: Value(x, "none"), Unit: u, Form: f})
		}
		add("zero-point", c.ZPE, energy, unit.FormEnergy)
		add("enthalpy", c.H, energy, unit.FormEnergy)
		add("entropy", c.S, unit.Must("cal/mol/K"), unit.FormEntropy)
	}
	return out
}

// presentMolecules shows what the frequencies add, state by state, at the first
// temperature.
func (s *mechanismSource) presentMolecules(v mechanismValue, sheet *paper.Sheet) {
	if len(v.Molecules) == 0 || len(v.Molecules[0]) == 0 {
		return
	}
	T := s.temperatures()[0]
	energy := unit.Must(or(s.Energies, "kcal/mol"), unit.MolarEnergy)
	t := paper.Table{Caption: "Thermochemistry from frequencies at " + unit.Print(T.SI, T.Unit, unit.FormPlain),
		Columns: []paper.Column{{Head: "State"}, {Head: "E", Unit: energy.Symbol, Number: true}, {Head: "Zero point", Unit: energy.Symbol, Number: true}, {Head: "H", Unit: energy.Symbol, Number: true},
			{Head: "S", Unit: "cal/mol/K", Number: true}, {Head: "G", Unit: energy.Symbol, Number: true}, {Head: "Modes", Number: true}, {Head: "Imaginary", Unit: "cm⁻¹", Number: true}, {Head: "Low modes", Number: true}}}
	for _, c := range v.Molecules[0] {
		at := "/" + c.State + "@" + ConditionText(T)
		bare := func(x float64) paper.Cell { return paper.Text(unit.PrintBare(x, energy, unit.FormEnergy)) }
		imaginary := "–"
		if c.Imaginary > 0 {
			imaginary = unit.Fixed(c.Imaginary/100, 0) + "i"
		}
		t.Rows = append(t.Rows, []paper.Cell{paper.Text(c.State), bare(c.E), sheet.Bare("zero-point" + at), sheet.Bare("enthalpy" + at), sheet.Bare("entropy" + at), bare(c.G),
			paper.Text(fmt.Sprint(c.Frequencies)), paper.Text(imaginary), paper.Text(fmt.Sprint(c.Soft))})
	}
	sheet.Table(t)
	sheet.Method(s.moleculeMethod(v))
	if s.LowModes == nil || s.LowModes.Treatment == string(thermo.Harmonic) {
		var soft []string
		for _, c := range v.Molecules[0] {
			if c.Soft > 0 {
				soft = append(soft, c.State)
			}
		}
		if len(soft) > 0 {
			sheet.Assumption("Modes below 100 cm⁻¹ are taken as harmonic in " + listWords(soft) + ", and the entropy of such modes is not to be trusted: state low-modes.")
		}
	}
}

// moleculeMethod says how free energies came from frequencies.
func (s *mechanismSource) moleculeMethod(v mechanismValue) string {
	text := "Free energies from frequencies: ideal gas, rigid rotor, harmonic oscillator"
	low := thermo.LowModes{}
	if s.LowModes != nil {
		low, _ = s.lowModes()
	}
	low = low.Given()
	switch low.Treatment {
	case thermo.Floor:
		text += fmt.Sprintf("; modes below %s cm⁻¹ count as if at it", unit.Digits(low.Cutoff/100, 3))
	case thermo.FreeRotor:
		text += fmt.Sprintf("; the entropy of low modes turns into that of a free rotor about %s cm⁻¹ (Grimme 2012, exponent %g, mean moment of inertia %s kg m²)", unit.Digits(low.Cutoff/100, 3), low.Exponent, unit.PrintBare(low.Moment, plain, unit.FormPlain))
	default:
		text += "; low modes are taken as harmonic"
	}
	if s.Scale != nil {
		text += fmt.Sprintf("; frequencies are scaled by %g where a state gives no factor of its own", *s.Scale)
	}
	return text + "."
}
