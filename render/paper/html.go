package paper

import (
	"fmt"

	"saddlebook/diagram/ink"
)

// Within is the id on the page of an element of the block, such as a claim. No
// heading has a dot in its id.
func (b Block) Within(anchor string) string {
	return fmt.Sprintf("%s.%d.%s", b.Kind, b.Nth, anchor)
}

// Anchor is the id of the block's element on its page.
func (b Block) Anchor() string {
	if b.ID == "" {
		return b.Kind
	}
	return element(b.ID)
}

// HTML writes the parts as one section, "" if there is nothing to show. Its ids
// are those of the block, if the block has one, of its claims and of its figures.
func (s *Sheet) HTML() (string, error) {
	if s.Empty() {
		return "", s.Err()
	}
	w := &writer{block: s.block}
	w.raw("<section")
	w.attr("class", "block "+s.block.Kind)
	if s.block.ID != "" {
		w.attr("id", s.block.Anchor())
	}
	w.raw(">\n")
	for _, p := range s.parts {
		p.html(w)
	}
	for _, c := range s.cautions {
		w.raw(`<p class="caution" role="note">`)
		w.name(c)
		w.raw("</p>\n")
	}
	s.folds(w)
	w.raw("</section>\n")
	for _, err := range w.errs {
		s.Fail(err)
	}
	return w.String(), s.Err()
}

func (p words) html(w *writer) {
	w.raw("<p>")
	w.name(string(p))
	w.raw("</p>\n")
}

func (f Figure) html(w *writer) {
	w.raw("<figure>\n")
	w.scroll("scene", "Figure: "+f.Caption)
	if err := ink.Inline(w, f.Scene); err != nil {
		w.failf("figure %q: %w", f.Caption, err)
	}
	w.raw("\n</div>\n<figcaption>")
	w.name(f.Caption)
	w.raw("</figcaption>\n</figure>\n")
}
