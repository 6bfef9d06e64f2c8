package kind

import (
	"testing"

	"saddlebook/kinetics/unit"
)

// Quantities as given keep all their digits.
func TestWritten(t *testing.T) {
	for text, want := range map[string]string{
		"-12.5 ± 0.4 kcal/mol": "−12.5 ± 0.4\u00a0kcal/mol",
		"1.2e-6 s-1":           "1.2\u00a0×\u00a010⁻⁶\u00a0s⁻¹",
		"1.2e-6 ± 2e-7 s-1":    "(1.2 ± 0.2)\u00a0×\u00a010⁻⁶\u00a0s⁻¹",
		"2e-4 ± 3e-5 s-1":      "(2 ± 0.3)\u00a0×\u00a010⁻⁴\u00a0s⁻¹",
		"1e4 M-1":              "10000\u00a0M⁻¹",
		"2.5e9 M-1 s-1":        "2.5\u00a0×\u00a010⁹\u00a0M⁻¹\u00a0s⁻¹",
		"-1234.56789012 Eh":    "−1234.56789012\u00a0Eh",
		"60 °C":                "60\u00a0°C",
		"25 ± 2 °C":            "25 ± 2\u00a0°C",
	} {
		q, err := unit.Parse(text, unit.Unit{})
		if err != nil {
			t.Fatal(err)
		}
		if got := written(q); got != want {
			t.Errorf("%s: %q, want %q", text, got, want)
		}
	}
}
