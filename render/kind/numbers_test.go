package kind_test

import (
	"math"
	"strings"
	"testing"
)

// What no number of a mechanism may be, each at its own key: a ± that nothing
// carries on, one temperature in two units, nothing where something must be.
func TestNumbersThatMakeNoSense(t *testing.T) {
	const note = "# T\n\n```toml mechanism\n" + `id = "m"
TOP
[species]
A = { G = 0 }
B = { G = -2 SPECIES}
[step]
TS = { reaction = "A <=> B", STEP }
` + "```\n"
	const temperature = `temperature = "25 °C"`
	for _, tt := range []struct{ name, top, species, step, want string }{
		{"temperature", `temperature = "25 ± 1 °C"`, "", "", `temperature: the ± of "25 ± 1 °C" is not carried on`},
		{"at", temperature + "\n" + `at = ["25 °C", "30 ± 1 °C"]`, "", "", `at.2: the ± of "30 ± 1 °C" is not carried on`},
		{"absolute zero", `temperature = "0 K"`, "", "", `temperature: at "0 K" nothing moves; write a temperature above absolute zero`},
		{"at absolute zero", temperature + "\n" + `at = ["25 °C", "-273.15 °C"]`, "", "", `at.2: at "-273.15 °C" nothing moves`},
		{"at twice", temperature + "\n" + `at = ["25 °C", "298.15 K"]`, "", "", `at.2: "298.15 K" is the same temperature as "25 °C"; list each temperature once`},
		{"viscosity", temperature + "\n" + `viscosity = "1 ± 0.1 mPa s"`, "", "", "viscosity: the ± of"},
		{"half-life at 0", temperature + "\n" + `half-life-at = "0 M"`, "", "", `half-life-at: at "0 M" of the other molecules nothing has a half-life`},
		{"half-life below 0", temperature + "\n" + `half-life-at = "-1 M"`, "", "", "half-life-at: "},
		{"half-life ±", temperature + "\n" + `half-life-at = "1 ± 0.1 M"`, "", "", "half-life-at: the ± of"},
		{"low modes", temperature + "\n" + `low-modes = { treatment = "floor", below = "100 ± 1 cm-1" }`, "", "", "low-modes.below: the ± of"},
		{"error below 0", temperature + "\n" + `error = { step = "-0.5" }`, "", "", `error.step: a standard deviation of -0.5 kcal/mol makes no sense; give 0 or more`},
		{"error of an error", temperature + "\n" + `error = { shared-species = "0.5 ± 0.1" }`, "", "", "error.shared-species: the ± of"},
		{"shared error below 0", temperature + "\n" + `shared = [{ of = ["TS"], sd = "-1" }]`, "", "", "shared.1.sd: a standard deviation of -1 kcal/mol makes no sense"},
		{"one enantiomer", temperature + "\n" + `enantiomers = ["A", "A"]`, "", "", `enantiomers.2: "A" is named twice`},
		{"no form", temperature, ", forms = 0 ", "", "species.B.forms: 0 forms make no sense; give 1 or more"},
		{"at of k", temperature, "", `k = "1 s-1", at = "25 ± 1 °C"`, `step.TS.at: the ± of "25 ± 1 °C" is not carried on`},
		{"mass", temperature, `, E = 3, mass = "18 ± 1 g/mol", rotation = [1, 2, 3], frequencies = [100, 200, 300] `, "", "species.B."},
	} {
		t.Run(tt.name, func(t *testing.T) {
			step := tt.step
			if step == "" {
				step = "G = 20"
			}
			species := tt.species
			text := strings.NewReplacer("TOP", tt.top, "SPECIES", species, "STEP", step).Replace(note)
			if strings.HasPrefix(species, ", E") {
				text = strings.Replace(text, "G = -2 , E", "E", 1)
			}
			_, faults := evaluate(t, text, nil)
			var b strings.Builder
			faults.Write(&b)
			if len(faults) != 1 || !strings.Contains(b.String(), tt.want) {
				t.Errorf("got %q, want %q alone", b.String(), tt.want)
			}
		})
	}
}

// A temperature in a list counts once, whatever its unit, in every kind.
func TestTemperaturesOnce(t *testing.T) {
	for block, key := range map[string]string{
		"selectivity\nid = \"s\"\nmechanism = \"m\"\nfrom = \"R\"\nproducts = [\"A\", \"B\"]\nat = [\"0 °C\", \"273.15 K\"]":                  "at.2",
		"equilibrium\nid = \"s\"\nmechanism = \"m\"\ncharge = { R = \"1 M\" }\nat = [\"0 °C\", \"273.15 K\"]":                                 "at.2",
		"control\nid = \"s\"\nmechanism = \"m\"\nrate-of = \"A\"\nat = { R = \"1 M\", A = 0, B = 0 }\ntemperature = [\"0 °C\", \"273.15 K\"]": "temperature.2",
		"profile\nid = \"s\"\nmechanism = \"m\"\npath = [{ through = [\"R\", \"TSa\", \"A\"] }]\nat = \"0 ± 1 °C\"":                           "at",
	} {
		_, faults := evaluate(t, parallel+"\n```toml "+block+"\n```\n", nil)
		if len(faults) != 1 || faults[0].Key != key {
			t.Errorf("%s: %v, want one fault at %s", strings.SplitN(block, "\n", 2)[0], faults, key)
		}
	}
}

// Heat can be claimed and read in units of its own.
func TestHeatInUnits(t *testing.T) {
	heat := strings.Replace(cold2, "report-at", "density = \"0.87 g/mL\"\nheat-capacity = \"1.7 J/g/K\"\nreport-at", 1)
	s := good(t, addition+heat+"\n```toml claims\n[[claim]]\nsays = \"c\"\nreading = \"cold/heat-left@end\"\nat-most = \"1 kJ/L\"\n[[claim]]\nsays = \"d\"\nreading = \"cold/heat-rate@30 min\"\nat-least = \"1 mW/mL\"\n```\n\nIt leaves {= cold/heat-left@2 h in kcal/L }.\n", nil)
	got, err := result(t, s, "cold/heat-rate@30 min").Print("kW/m3")
	if want := "\u00a0kW/m³"; err != nil || !strings.HasSuffix(got, want) {
		t.Errorf("the heat rate reads %q, %v", got, err)
	}
}

// Rounding about zero is no excess.
func TestRacemateHasNoExcess(t *testing.T) {
	note := strings.NewReplacer("B = { G = -30 }", "B = { G = -20 }", "R -> A\", G = 85", "R <=> A\", G = 85", "R -> B\", G = 87", "R <=> B\", G = 85").Replace(parallel)
	s := good(t, note+run(`charge = { R = "0.1 M" }
programme = ["10 min at 25 °C", "ramp to 60 °C over 1 h", "10 d at 0 °C"]
products = ["A", "B"]
enantiomers = ["B", "A"]
report-at = ["10 min", "1 h", "2 h", "3 d"]`), nil)
	for _, at := range []string{"10 min", "1 h", "2 h", "3 d", "end"} {
		if ee := value(t, s, "r/ee@"+at); ee != 0 || math.Signbit(ee) {
			t.Errorf("ee of a racemate at %s: %g", at, ee)
		}
	}
}

// Cells between tabs are named as such.
func TestTableWithTabs(t *testing.T) {
	_, faults := evaluate(t, "# T\n\n```toml mechanism\nid = \"m\"\ntemperature = \"25 °C\"\ntable = { file = \"e.csv\", sum = [\"E\"] }\n```\n",
		map[string]string{"e.csv": "name\treaction\tE\nA\t\t0\n"})
	if len(faults) != 1 || faults[0].Msg != "tabs stand between the cells" || faults[0].At.File != "e.csv" {
		t.Errorf("got %v", faults)
	}
}

// What the integration cannot tell from nothing is nothing, in amounts and in
// the yields made of them.
func TestNothingBelowTheFloor(t *testing.T) {
	note := strings.Replace(parallel, `reaction = "R -> B"`, `reaction = "A -> B"`, 1)
	s := good(t, note+run(`charge = { R = "0.1 M" }
basis = "R"
programme = "30 d at 80 °C"
products = ["A", "B"]
report-at = ["1 min"]`), nil)
	if y := value(t, s, "r/yield/A@1 min"); !(y > 0) {
		t.Errorf("yield of A at first: %g", y)
	}
	for _, key := range []string{"r/amount/A@end", "r/yield/A@end", "r/amount/R@end"} {
		if got := value(t, s, key); got != 0 {
			t.Errorf("%s is %g", key, got)
		}
	}
}
