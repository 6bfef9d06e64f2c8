package diagram

import (
	"fmt"
	"math"
	"strings"

	"saddlebook/kinetics/unit"
)

// words tells the figure to those who do not see it: in the first sentence its
// size and the largest flux, then notes, amounts and steps.
func (n Network) words() string {
	first := fmt.Sprintf("%s and %s", plural(len(n.Nodes), "node"), plural(len(n.Steps), "step"))
	largest := -1
	for i, s := range n.Steps {
		if s.Flux != nil && (largest < 0 || math.Abs(*s.Flux) > math.Abs(*n.Steps[largest].Flux)) {
			largest = i
		}
	}
	if largest >= 0 && *n.Steps[largest].Flux != 0 {
		s := n.Steps[largest]
		first += fmt.Sprintf(", the largest %s %s in %s", n.Flux, n.value(math.Abs(*s.Flux)), s.shown())
	}
	parts := []string{first + "."}
	for _, d := range n.Nodes {
		if d.Note != "" {
			parts = append(parts, sentence(d.Note)+": "+d.shown()+".")
		}
	}
	for _, s := range n.Steps {
		if s.Note != "" {
			parts = append(parts, sentence(s.Note)+": "+s.shown()+".")
		}
	}
	if len(n.Cycle) > 0 {
		parts = append(parts, sentence(n.CycleName)+": "+strings.Join(n.Cycle, ", ")+".")
	}
	var amounts []string
	for _, d := range n.Nodes {
		text := d.Text
		if text == "" && d.Share != nil {
			text = unit.Percent(*d.Share)
		}
		if text != "" {
			amounts = append(amounts, d.shown()+" "+text)
		}
	}
	if len(amounts) > 0 {
		parts = append(parts, "Amounts: "+strings.Join(amounts, ", ")+".")
	}
	label := map[string]string{}
	for _, d := range n.Nodes {
		label[d.key()] = d.shown()
	}
	var steps []string
	for _, s := range n.Steps {
		side := func(terms []NetworkTerm) string {
			var out []string
			for _, t := range terms {
				text := label[t.Node]
				if t.count() > 1 {
					text = fmt.Sprint(t.count(), " ", text)
				}
				out = append(out, text)
			}
			return strings.Join(out, " + ")
		}
		arrow := " → "
		if s.Returns {
			arrow = " ⇌ "
		}
		text := s.shown() + ": " + side(s.From) + arrow + side(s.To)
		if s.Text != "" {
			text += ", " + s.Text
		}
		if s.Flux != nil {
			text += ", " + n.value(*s.Flux)
		}
		steps = append(steps, text)
	}
	return strings.Join(append(parts, "Steps: "+strings.Join(steps, "; ")+"."), " ")
}

// value prints a flux with its unit.
func (n Network) value(v float64) string {
	text := unit.Digits(v, 2)
	if n.FluxUnit != "" {
		text += " " + n.FluxUnit
	}
	return text
}

func plural(n int, word string) string {
	if n == 1 {
		return "1 " + word
	}
	return fmt.Sprint(n, " ", word, "s")
}
