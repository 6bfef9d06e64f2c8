package schema

import "testing"

func TestNearest(t *testing.T) {
	keys := []string{"temperature", "energies", "at", "species", "step", "steps", "report-at", "G", "H", "S", "Cp", "label", "reaction"}
	for _, tt := range []struct {
		word  string
		known []string
		want  string
		why   string
	}{
		{"temprature", keys, "temperature", "a letter left out"},
		{"tempertaure", keys, "temperature", "two letters swapped"},
		{"Temperature", keys, "temperature", "case"},
		{"report_at", keys, "report-at", "underscore for hyphen"},
		{"report at", keys, "report-at", "space for hyphen"},
		{"h", keys, "H", "case of a single letter"},
		{"K", keys, "", "a single letter is near nothing else"},
		{"AT", keys, "at", "case of two letters"},
		{"ax", keys, "", "two letters are near nothing else"},
		{"lable", keys, "label", "swapped"},
		{"stepp", keys, "step", "one edit from both, the alphabet decides"},
		{"stepz", keys, "step", "the same"},
		{"temp", keys, "temperature", "the only word that it begins"},
		{"rea", []string{"reaction", "reactions"}, "", "two words that it begins"},
		{"conformers", keys, "", "nothing near"},
		{"", keys, "", "empty word"},
		{"x", nil, "", "no words"},
		{"kJ/mole", []string{"kcal/mol", "kJ/mol"}, "kJ/mol", "units"},
		{"ab-c", []string{"AB-c", "ab_c"}, "ab_c", "of equals the longer common beginning"},
		{"ΔG‡", []string{"ΔG†"}, "ΔG†", "characters, not bytes"},
	} {
		if got := Nearest(tt.word, tt.known); got != tt.want {
			t.Errorf("Nearest(%q) = %q, want %q (%s)", tt.word, got, tt.want, tt.why)
		}
	}
}

// TestNearestIgnoresOrder holds that ties do not depend on the order of the words.
func TestNearestIgnoresOrder(t *testing.T) {
	for _, known := range [][]string{{"abcd1", "abcd2", "abcd3"}, {"abcd3", "abcd1", "abcd2"}} {
		if got := Nearest("abcd9", known); got != "abcd1" {
			t.Errorf("%v: %q", known, got)
		}
	}
}

func TestDistance(t *testing.T) {
	for _, tt := range []struct {
		a, b string
		want int
	}{{"", "", 0}, {"a", "", 1}, {"abc", "acb", 1}, {"kitten", "sitting", 3}, {"ca", "abc", 3}, {"abcd", "badc", 2}} {
		if got := distance([]rune(tt.a), []rune(tt.b), 9); got != tt.want {
			t.Errorf("%q to %q: %d, want %d", tt.a, tt.b, got, tt.want)
		}
		if got := distance([]rune(tt.b), []rune(tt.a), 9); got != tt.want {
			t.Errorf("%q to %q: %d, want %d", tt.b, tt.a, got, tt.want)
		}
	}
}
