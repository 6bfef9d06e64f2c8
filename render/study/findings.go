package study

import (
	"fmt"

	"saddlebook/content/fault"
	"saddlebook/render/kind"
)

// Findings are the conclusions of a block with their standing; none if it was
// not computed.
func (b *Block) Findings() []kind.Finding {
	if !b.Done {
		return nil
	}
	return b.Kind.Findings(b.Spec, b.Value)
}

// FindingFault words a conclusion that does not hold, at its place.
func (b *Block) FindingFault(f kind.Finding) fault.Diagnostic {
	msg := fmt.Sprintf("claim %q %s: %s is %s, and the claim wants %s", f.Says, f.Standing, f.Reading, f.Value, f.Bound)
	fix := "change the claim, or what it rests on"
	if f.Standing == kind.Undecided {
		msg = fmt.Sprintf("claim %q is undecided: it asks for a probability of %s", f.Says, f.Asked)
		if f.Probability != "" {
			msg += " and has " + f.Probability
		}
		msg += " (" + f.Why + ")"
		fix = "narrow the widest ± behind it, or ask for less"
		if f.Probability == "" {
			fix = "give every energy behind it a ±, or ask for no probability"
		}
	}
	severity := fault.Error
	if f.Standing == kind.Undecided {
		severity = fault.Warning
	}
	return b.diagnose(&fault.Problem{Path: f.Path, Severity: severity, Msg: msg, Fix: fix})
}
