package kind_test

import (
	"strings"
	"testing"

	"saddlebook/render/kind"
	"saddlebook/render/study"
)

func findings(t *testing.T, s *study.Study) []kind.Finding {
	t.Helper()
	for _, b := range s.Blocks {
		if b.Kind.Name == "claims" {
			return b.Findings()
		}
	}
	t.Fatal("no claims block")
	return nil
}

func claim(lines string) string {
	return addition + limits + "\n```toml claims\n[[claim]]\nsays = \"It holds.\"\n" + lines + "\n```\n"
}

// The kinetic ratio at -78 °C is 21.7:1, as the design states for this mechanism.
func TestClaimsStanding(t *testing.T) {
	sd := strings.NewReplacer("H = 9.0,", `H = "9.0 ± 0.3",`, "H = 9.9,", `H = "9.9 ± 0.3",`)
	for _, tt := range []struct {
		name, lines string
		uncertain   bool
		want        kind.Standing
		value       string
	}{
		{"holds", `reading = "limits/kinetic-ratio/A:B@-78 °C"` + "\n" + `at-least = "15:1"`, false, kind.Holds, "21.7:1"},
		{"fails", `reading = "limits/kinetic-ratio/A:B@-78 °C"` + "\n" + `at-least = "25:1"`, false, kind.Fails, "21.7:1"},
		{"fails above", `reading = "limits/kinetic-ratio/A:B@-78 °C"` + "\n" + `at-most = "15:1"`, false, kind.Fails, "21.7:1"},
		{"in hundreds", `reading = "limits/kinetic-ratio/A:B@-78 °C"` + "\n" + `at-least = "95:5"`, false, kind.Holds, "96:4"},
		{"within", `reading = "limits/kinetic/A@-78 °C"` + "\n" + `at-least = "95 %"` + "\nat-most = \"96 %\"", false, kind.Holds, "95.6\u00a0%"},
		{"in another unit", `reading = "addition/barrier/TSa"` + "\n" + `at-most = "60 kJ/mol"`, false, kind.Holds, "57.7\u00a0kJ/mol"},
		{"probability, no ±", `reading = "limits/kinetic-ratio/A:B@-78 °C"` + "\nat-least = \"15:1\"\nprobability = 0.9", false, kind.Undecided, "21.7:1"},
		{"probability short", `reading = "limits/kinetic-ratio/A:B@-78 °C"` + "\nat-least = \"15:1\"\nprobability = 0.9", true, kind.Undecided, "21.7:1"},
		{"probable", `reading = "limits/kinetic-ratio/A:B@-78 °C"` + "\nat-least = \"1:1\"\nprobability = 0.9", true, kind.Holds, "21.7:1"},
		{"improbable and failing", `reading = "limits/kinetic-ratio/A:B@-78 °C"` + "\nat-least = \"1000:1\"\nprobability = 0.9", true, kind.Fails, "21.7:1"},
		{"rests on an exact energy", `reading = "limits/equilibrium-ratio/A:B@-78 °C"` + "\nat-most = \"1:1\"\nprobability = 0.9", true, kind.Undecided, ""},
	} {
		t.Run(tt.name, func(t *testing.T) {
			note := claim(tt.lines)
			if tt.uncertain {
				note = sd.Replace(note)
			}
			f := findings(t, good(t, note, nil))[0]
			if f.Standing != tt.want {
				t.Errorf("%s: %s (%s), want %s", f.Standing, f.Value, f.Why, tt.want)
			}
			if tt.value != "" && f.Value != tt.value {
				t.Errorf("value %q, want %q", f.Value, tt.value)
			}
			if tt.uncertain && f.Probability == "" && !strings.Contains(f.Why, "no ±") {
				t.Error("no probability, though energies have a ±")
			}
			if f.Standing == kind.Undecided && f.Why == "" {
				t.Error("undecided, and the page does not say why")
			}
		})
	}
}

// The probability of a bound on a ratio of two steps, against the normal
// distribution: with 0.3 kcal/mol on each, independent, ln(21.7/15) lies 0.337
// standard deviations above the bound, which has a probability of 63 %.
// Correlated at 0.9 it is 86 %; the less favourable one counts.
func TestClaimProbability(t *testing.T) {
	note := strings.NewReplacer("H = 9.0,", `H = "9.0 ± 0.3",`, "H = 9.9,", `H = "9.9 ± 0.3",`).Replace(
		claim(`reading = "limits/kinetic-ratio/A:B@-78 °C"` + "\nat-least = \"15:1\""))
	f := findings(t, good(t, note, nil))[0]
	if f.Probability != "63 %" && f.Probability != "64 %" {
		t.Errorf("probability %q (%s)", f.Probability, f.Why)
	}
	if f.Standing != kind.Holds || !strings.Contains(f.Why, "independent") {
		t.Errorf("%s, %q: want the less favourable sampling", f.Standing, f.Why)
	}
}

func TestClaimFaults(t *testing.T) {
	for _, tt := range []struct{ name, lines, want string }{
		{"no bound", `reading = "limits/kinetic/A"`, "the claim has no bound"},
		{"no such result", "reading = \"limits/kinetik/A\"\nat-least = 0.5", `did you mean "limits/kinetic/A"?`},
		{"no such block", "reading = \"limit/kinetic/A\"\nat-least = 0.5", `did you mean "limits"?`},
		{"wrong unit", "reading = \"limits/kinetic/A\"\nat-least = \"5 kcal/mol\"", `write it as in "90 %"`},
		{"no unit", "reading = \"addition/barrier/TSa\"\nat-least = 5", `write its unit, as in "5 kcal/mol"`},
		{"a word", "reading = \"addition/character/TSa\"\nat-least = 5", `is a word, "central", and has no bounds`},
		{"ratio for a share", "reading = \"limits/kinetic/A\"\nat-least = \"15:1\"", `write it as in "90 %"`},
		{"percentage for a ratio", "reading = \"limits/kinetic-ratio/A:B\"\nat-least = \"90 %\"", `write it as in "15:1"`},
		{"ninety for a share", "reading = \"limits/kinetic/A\"\nat-least = 90", `write its unit, as in "90 %"`},
		{"empty range", "reading = \"limits/kinetic/A\"\nat-least = 0.9\nat-most = 0.1", "no value is at least"},
		{"probability", "reading = \"limits/kinetic/A\"\nat-least = 0.1\nprobability = 90", "probability 90 is not between 0 and 1"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			_, faults := evaluate(t, claim(tt.lines), nil)
			var b strings.Builder
			faults.Write(&b)
			if !strings.Contains(b.String(), tt.want) {
				t.Errorf("got %q, want %q in it", b.String(), tt.want)
			}
		})
	}
}

// An infinite ratio is beyond any bound: B forms only by way of A.
func TestClaimOnAnInfiniteRatio(t *testing.T) {
	note := "# T\n\n```toml mechanism\n" + `id = "m"
temperature = "25 °C"
[species]
R = { G = 0 }
A = { G = -3 }
B = { G = -5 }
[step]
T1 = { reaction = "R <=> A", G = 18 }
T2 = { reaction = "A <=> B", G = 19 }
` + "```\n\n```toml selectivity\nid = \"limits\"\nmechanism = \"m\"\nfrom = \"R\"\nproducts = [\"A\", \"B\"]\n```\n\n" +
		"```toml claims\n[[claim]]\nsays = \"A first.\"\nreading = \"limits/kinetic-ratio/A:B\"\nat-least = \"5:1\"\n[[claim]]\nsays = \"Not much.\"\nreading = \"limits/kinetic-ratio/A:B\"\nat-most = \"100:1\"\n```\n"
	f := findings(t, good(t, note, nil))
	if f[0].Standing != kind.Holds || f[1].Standing != kind.Fails {
		t.Errorf("at least 5:1 %s, at most 100:1 %s", f[0].Standing, f[1].Standing)
	}
}

// Of two isomers at G = 0 only one sets the scale; the other is taken as exact,
// and a claim on their ratio has no probability.
func TestOnlyOneZeroSetsTheScale(t *testing.T) {
	note := "# T\n\n```toml mechanism\n" + `id = "m"
temperature = "25 °C"
[species]
R = { G = 0 }
R2 = { G = 0 }
[step]
T1 = { reaction = "R <=> R2", G = "18 ± 1" }
` + "```\n\n```toml equilibrium\nid = \"rest\"\nmechanism = \"m\"\ncharge = { R = \"1 M\" }\namong = [\"R\", \"R2\"]\n```\n\n" +
		"```toml claims\n[[claim]]\nsays = \"Even.\"\nreading = \"rest/ratio/R:R2\"\nat-least = \"1:2\"\nprobability = 0.9\n```\n"
	f := findings(t, good(t, note, nil))[0]
	if f.Standing != kind.Undecided || !strings.Contains(f.Why, "R2") {
		t.Errorf("%s, %q; want undecided for R2", f.Standing, f.Why)
	}
}

// Differences of temperatures are bounded and printed as differences, on
// whatever scale the bound is written.
func TestClaimsOnTemperatures(t *testing.T) {
	const run = addition + "\n```toml run\nid = \"cold\"\nmechanism = \"addition\"\ncharge = { R = \"0.20 M\", X = \"1.1 equiv\" }\nbasis = \"R\"\n" +
		"programme = [\"2 h at -78 °C\", \"ramp to 20 °C over 3 h\", \"12 h at 20 °C\"]\nproducts = [\"A\", \"B\"]\ndensity = \"0.87 g/mL\"\nheat-capacity = \"1.7 J/g/K\"\n```\n"
	for _, tt := range []struct{ reading, bound, value, margin string }{
		{"cold/adiabatic-rise", `at-most = "12 K"`, "9.6\u00a0K", "2.4\u00a0K"},
		{"cold/adiabatic-rise", `at-most = "12 °C"`, "9.6\u00a0°C", "2.4\u00a0K"},
		{"cold/changeover-temperature/A:B", `at-most = "0 °C"`, "\u22122\u00a0°C", "1.8\u00a0K"},
	} {
		note := run + "\n```toml claims\n[[claim]]\nsays = \"It holds.\"\nreading = \"" + tt.reading + "\"\n" + tt.bound + "\n```\n"
		f := findings(t, good(t, note, nil))[0]
		if f.Standing != kind.Holds || f.Value != tt.value || f.Margin != tt.margin {
			t.Errorf("%s: %s, value %q, margin %q; want holds, %q, %q", tt.reading, f.Standing, f.Value, f.Margin, tt.value, tt.margin)
		}
	}
}

// A step that is kept fast is an assumption: a claim that turns when it is ten
// times slower says so, and one that does not is left alone. Fast steps of one
// molecule run at 1e9 1/s, so the step beside it takes 1/(1 + 1e8/1e9) of R at
// first and half of it when the fast one is ten times slower.
func TestClaimRestsOnAFastStep(t *testing.T) {
	note := func(bound string) string {
		return "```toml mechanism\nid = \"race\"\ntemperature = \"25 °C\"\n[species]\nR = { G = 0 }\nA = { G = -10 }\nB = { G = -10 }\n[step]\n" +
			"fast = { reaction = \"R <=> A\", fast = true }\nslow = { reaction = \"R -> B\", k = \"1e8 s-1\", at = \"25 °C\" }\n```\n" +
			"```toml selectivity\nid = \"limits\"\nmechanism = \"race\"\nfrom = \"R\"\nproducts = [\"A\", \"B\"]\n```\n" +
			"```toml claims\n[[claim]]\nsays = \"A forms.\"\nreading = \"limits/kinetic/A\"\nat-least = \"" + bound + "\"\n```\n"
	}
	for _, tt := range []struct {
		bound string
		warns bool
	}{{"80 %", true}, {"40 %", false}} {
		s, faults := evaluate(t, note(tt.bound), nil)
		warned := false
		for _, f := range faults {
			warned = warned || strings.Contains(f.Msg, "if step fast is ten times slower, it would fail")
		}
		if warned != tt.warns {
			t.Errorf("at least %s: %v", tt.bound, faults)
		}
		if f := findings(t, s)[0]; f.Standing != kind.Holds || strings.Contains(f.Why, "ten times slower") != tt.warns {
			t.Errorf("at least %s: %s, %q", tt.bound, f.Standing, f.Why)
		}
	}
}
