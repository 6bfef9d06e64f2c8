package lettering

import "strings"

// Quantity sets the head of an axis or a column as a quantity over its unit, as
// ISO 80000-1 has it: Quantity("ΔG", "kcal/mol") gives ΔG / kcal mol⁻¹, with the
// one letter of a quantity in italics. A name in words stays upright. Without a
// unit the quantity stands alone.
func Quantity(name, unit string) []Run {
	runs := Runs(name)
	if len(runs) > 0 && runs[0].Shift == Base {
		symbol := strings.TrimLeft(runs[0].Text, "Δδ∂")
		if n := len([]rune(symbol)); n == 1 {
			operator := strings.TrimSuffix(runs[0].Text, symbol)
			set := []Run{{Text: symbol, Italic: true}}
			if operator != "" {
				set = append([]Run{{Text: operator}}, set...)
			}
			runs = append(set, runs[1:]...)
		}
	}
	if unit == "" {
		return runs
	}
	var b setter
	b.runs = runs
	b.add(" / ", Base)
	for _, r := range Unit(unit) {
		b.add(r.Text, r.Shift)
	}
	return b.done()
}

// Unit sets the symbol of a unit with powers in place of strokes: kcal/mol as
// kcal mol⁻¹, cal/mol/K as cal mol⁻¹ K⁻¹, cm-1 and s^-1 with their powers high.
func Unit(symbol string) []Run {
	var b setter
	for i, factor := range strings.Split(clean(symbol), "/") {
		for k, f := range strings.Fields(factor) {
			if i > 0 || k > 0 {
				b.add(" ", Base)
			}
			name := strings.TrimRight(f, "0123456789+-−^")
			power := strings.ReplaceAll(strings.TrimLeft(f[len(name):], "^"), "-", "−")
			if name == "" { // a bare number, such as the 1 of 1/s
				if power == "1" && i == 0 && strings.Contains(symbol, "/") {
					continue
				}
				b.add(power, Base)
				continue
			}
			if i > 0 {
				if power == "" {
					power = "1"
				}
				power = "−" + strings.TrimPrefix(power, "+")
			}
			b.marked(name)
			b.add(power, Super)
		}
	}
	runs := b.done()
	if len(runs) > 0 {
		runs[0].Text = strings.TrimPrefix(runs[0].Text, " ")
	}
	return runs
}
