package kind

import (
	"fmt"

	"saddlebook/render/paper"
)

// caution is what stands wherever a page gives conditions.
const caution = "Not a safety assessment. Listed steps only: no decomposition, gas, mixing, heat transfer or toxicity. " +
	"Do not change scale, temperature, concentration or dosing on this page alone: " +
	"calorimetry on your material, site rules and qualified people decide."

// cautionConditions puts the caution on a sheet that gives conditions.
func cautionConditions(sheet *paper.Sheet) { sheet.Caution(caution) }

// cautionWarming says how much has not reacted when warming starts. unreacted
// is the share as it is printed, heat what the pot can still give, "" if that is
// not known or nothing.
func cautionWarming(sheet *paper.Sheet, after float64, basis, unreacted, heat string) {
	when := "When warming starts, at once,"
	if after > 0 {
		when = fmt.Sprintf("When warming starts, after %s,", timeWords(after))
	}
	if heat != "" {
		heat = fmt.Sprintf(", and the listed steps can still set free %s", heat)
	}
	sheet.Caution(fmt.Sprintf("%s %s of the %s charged is unreacted%s.", when, unreacted, basis, heat))
}
