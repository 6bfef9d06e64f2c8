package kinetics

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics/thermo"
)

// Complaint is something wrong or doubtful in a mechanism.
type Complaint struct {
	State string // the species or step; "": the mechanism
	Key   string // of the state, where one is at fault; or ""
	Fatal bool
	Msg   string // what is wrong, the value quoted
	Fix   string // what to do about it; never empty
}

// Complaints are an error.
type Complaints []Complaint

func (cs Complaints) Error() string {
	lines := make([]string, len(cs))
	for i, c := range cs {
		lines[i] = c.Msg + "; " + c.Fix
	}
	return strings.Join(lines, "\n")
}

// lowBarrier is where transition state theory stops to describe a step, in
// J/mol: 3 kcal/mol (common practice).
const lowBarrier = 3 * 1000 * joulesPerCalorie

// smallEntropy is below what a computed or measured entropy usually is, in
// J/mol/K; a value that small was probably meant in kJ.
const smallEntropy = 1.0

// largeEntropy is beyond the entropy of any molecule that has a mechanism, in
// J/mol/K; a value that large was probably meant in J where kJ stands.
const largeEntropy = 20000.0

// Check returns what is wrong or doubtful in the mechanism itself and at its
// own temperature, in order: species, then steps, then the whole. Complaints
// that are not Fatal are warnings.
func (m *Mechanism) Check() []Complaint {
	var out []Complaint
	say := func(state, key string, fatal bool, msg, fix string) {
		out = append(out, Complaint{State: state, Key: key, Fatal: fatal, Msg: msg, Fix: fix})
	}
	seen := map[string]bool{}
	for _, name := range m.States() {
		if fault := NameFault(name); fault != "" {
			say(name, "", true, fmt.Sprintf("%q cannot be a name: %s", name, fault), "write a name without + / @ : { } | # and arrows, such as TS2' or Na⁺")
		}
		if seen[name] {
			say(name, "", true, fmt.Sprintf("two states are named %q", name), "rename one of them")
		}
		seen[name] = true
	}
	used := make([]bool, len(m.Species))
	for _, s := range m.Steps {
		for _, side := range [][]Term{s.From, s.To} {
			for _, t := range side {
				used[t.Species] = true
			}
		}
	}
	for i, s := range m.Species {
		if !used[i] {
			say(s.Name, "", false, fmt.Sprintf("no step reaches %s", s.Name), "add a step that makes or consumes it, or remove it")
		}
		if s.Forms < 0 {
			say(s.Name, "forms", true, fmt.Sprintf("%d forms make no sense", s.Forms), "give 1 or more")
		}
		if s.SD != nil && !(*s.SD >= 0 && !math.IsInf(*s.SD, 0)) {
			say(s.Name, "", true, fmt.Sprintf("a standard deviation of %g J/mol makes no sense", *s.SD), "give a finite number, 0 or more")
		}
		if !s.Unknown {
			checkEnergy(s.Name, s.Energy, say)
		}
	}
	for i, s := range m.Steps {
		if len(s.From) == 0 || len(s.To) == 0 {
			say(s.Name, "reaction", true, fmt.Sprintf("step %s has an empty side", s.Name), "name at least one species on each side")
		}
		if s.SD != nil && !(*s.SD >= 0 && !math.IsInf(*s.SD, 0)) {
			say(s.Name, "", true, fmt.Sprintf("a standard deviation of %g J/mol makes no sense", *s.SD), "give a finite number, 0 or more")
		}
		if c, mixed := m.mixed(i, math.NaN()); mixed {
			c.Msg += fmt.Sprintf(", so it can be used at %s only", temperatureText(m.mixedHome(i)))
			out = append(out, c)
		}
		if s.Law == nil {
			checkEnergy(s.Name, s.Energy, say)
		}
	}
	m.checkFormulas(say)
	if err := m.stated().Check(); err != nil {
		say("", "shared", true, err.Error(), "correct the shared errors")
	}
	if parts := m.parts(); len(parts) > 1 {
		var names []string
		for _, p := range parts {
			names = append(names, strings.Join(p, ", "))
		}
		say("", "", false, "the mechanism falls into parts with no common state: "+strings.Join(names, "; "),
			"energies and ratios can be compared only within a part: add the step that joins them, or make them two mechanisms")
	}
	for _, c := range out {
		if c.Fatal {
			return out
		}
	}
	n, err := m.At(m.Temperature)
	if err != nil {
		return append(out, err.(Complaints)...)
	}
	out = append(out, n.Warnings...)
	m.doubts(n, say)
	return out
}

func checkEnergy(state string, e thermo.Energy, say func(state, key string, fatal bool, msg, fix string)) {
	if err := e.Check(); err != nil {
		say(state, "", true, fmt.Sprintf("the energy of %s: %v", state, err), "correct its energy")
	}
	for _, s := range entropies(e) {
		if math.Abs(s) > largeEntropy {
			say(state, "S", true, fmt.Sprintf("the entropy of %s is %.3g J/mol/K, beyond any molecule: was its unit J, not kJ?", state, s),
				fmt.Sprintf("write \"%.4g J/mol/K\" or \"%.4g cal/mol/K\" if that is what was meant", s/1000, s/1000))
			return
		}
		if s != 0 && math.Abs(s) < smallEntropy {
			say(state, "S", false, fmt.Sprintf("the entropy of %s is %.3g J/mol/K, which looks like a value meant in kJ or kcal", state, s),
				fmt.Sprintf("if so write \"%.4g J/mol/K\" or \"%.4g cal/mol/K\"", s*1000, s/joulesPerCalorie*1000))
			return
		}
	}
}

// entropies returns the entropies that an energy is given by, J/mol/K.
func entropies(e thermo.Energy) []float64 {
	var out []float64
	if e.Heat != nil {
		out = append(out, e.Heat.S)
	}
	for _, c := range e.Conformers {
		out = append(out, entropies(c)...)
	}
	return out
}
