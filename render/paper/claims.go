package paper

// marks are the shapes beside the word for a standing: a pen's tick, a cross, a
// ring. The word is always there, so they are hidden from screen readers.
var marks = map[string]string{
	"holds":     `<path d="M1.5 6.5 4.5 10 10.5 2" />`,
	"fails":     `<path d="M2 2 10 10 M10 2 2 10" />`,
	"undecided": `<circle cx="6" cy="6" r="4" />`,
}

func (p claims) html(w *writer) {
	w.raw("<ul class=\"claims\">\n")
	for _, c := range p {
		c.html(w)
	}
	w.raw("</ul>\n")
}

func (c ClaimRow) html(w *writer) {
	mark, known := marks[c.Standing]
	if !known {
		w.failf("claim %q has the standing %q; it is holds, fails or undecided", c.Says, c.Standing)
		return
	}
	class := "claim " + c.Standing
	if c.Probability != "" {
		class += " odds" // only then does a claim that holds take its colour
	}
	w.raw("<li")
	w.attr("class", class)
	w.attr("id", element(w.block.Within(c.Anchor)))
	w.raw(">\n<p class=\"verdict\"><svg class=\"mark\" viewBox=\"0 0 12 12\" aria-hidden=\"true\">" + mark + "</svg> " + c.Standing + "</p>\n<p class=\"says\">")
	w.name(c.Says)
	w.raw("</p>\n<p class=\"facts\">")
	w.name(c.Value)
	w.raw(", wanted ")
	w.name(c.Bound)
	if c.Margin != "" {
		w.raw("; margin ")
		w.name(c.Margin)
	}
	w.raw("; probability ")
	if c.Probability == "" {
		w.raw("not known")
	}
	w.text(c.Probability)
	if c.Asked != "" {
		w.raw(", asked ")
		w.text(c.Asked)
	}
	if c.Why != "" {
		w.raw(" (")
		w.name(c.Why)
		w.raw(")")
	}
	w.raw("</p>\n<p class=\"facts\"><code>")
	w.text(c.Reading)
	w.raw("</code></p>\n</li>\n")
}
