package render

import (
	"fmt"
	"html"
	"strings"

	"saddlebook/content"
	"saddlebook/kinetics/unit"
	"saddlebook/render/kind"
	"saddlebook/render/paper"
	"saddlebook/render/study"
)

// lay makes the sheet of a block: what stands on the page in its place.
func lay(b *study.Block) (*paper.Sheet, error) {
	sheet := paper.New(onPage(b), func(key string) (paper.Value, bool) {
		k, err := kind.ParseKey(b.ID + "/" + key)
		if err != nil {
			return paper.Value{}, false
		}
		r, err := b.Result(k)
		if err != nil {
			return paper.Value{}, false
		}
		return shown(r), true
	})
	b.Kind.Present(b.Spec, b.Value, sheet)
	for _, d := range b.Doubts {
		sheet.Caution("Doubtful: " + d + ".")
	}
	for _, r := range b.Remarks {
		sheet.Assumption(r)
	}
	return sheet, sheet.Err()
}

// onPage is how a block is known on its page.
func onPage(b *study.Block) paper.Block {
	p := paper.Block{ID: b.Source.Anchor(), Kind: b.Kind.Name, Text: b.Source.Text, File: b.Source.Note.Path, Line: b.Source.At.Line}
	for _, other := range b.Source.Note.Blocks {
		if other.Kind == b.Source.Kind {
			p.Nth++
		}
		if other == b.Source {
			break
		}
	}
	return p
}

// shown is a result as readings and tables print it.
func shown(r kind.Result) paper.Value {
	text, err := r.Print("")
	if err != nil {
		text = err.Error() // Print fails only for a unit that was asked for
	}
	v := paper.Value{Text: text, Bare: text, Widest: r.Interval(), Low: r.Low, High: r.High}
	if r.Value.Kind == kind.Real {
		v.Bare = unit.PrintBare(r.Value.Value, r.Unit, r.Form)
	}
	for _, i := range r.Intervals {
		v.Intervals = append(v.Intervals, paper.Interval{Case: i.Case.String(), Text: r.PrintBound(i.Low) + " to " + r.PrintBound(i.High)})
	}
	return v
}

// body joins the pieces of a note: prose, blocks and readings.
func body(s *study.Study, n *content.Note) (string, error) {
	var b strings.Builder
	for _, p := range n.Pieces {
		switch {
		case p.Block != nil:
			e := s.Of(p.Block)
			if e == nil || !e.Done {
				return "", fmt.Errorf("%s:%d: block %s was not computed", n.Path, p.Block.At.Line, p.Block.Label)
			}
			sheet, err := lay(e)
			if err != nil {
				return "", fmt.Errorf("%s:%d: %w", n.Path, p.Block.At.Line, err)
			}
			text, err := sheet.HTML()
			if err != nil {
				return "", fmt.Errorf("%s:%d: %w", n.Path, p.Block.At.Line, err)
			}
			b.WriteString(text)
		case p.Reading != nil:
			text, err := reading(s, p.Reading)
			if err != nil {
				return "", err
			}
			b.WriteString(text)
		default:
			b.WriteString(prose.Replace(p.HTML))
		}
	}
	return b.String(), nil
}

// prose lets tables and code of the prose scroll in a box of their own, within
// reach of the keyboard. A tag that an author wrote stands escaped, so what is
// found here is goldmark's own.
var prose = strings.NewReplacer(
	"<table>", "<div class=\"table\" role=\"region\" tabindex=\"0\" aria-label=\"Table\">\n<table>",
	"</table>", "</table>\n</div>",
	"<th>", "<th scope=\"col\">",
	"<th class=", "<th scope=\"col\" class=",
	"<pre>", "<pre tabindex=\"0\">",
)

// reading is a result set into prose: its number, with its key and interval
// for those who ask.
func reading(s *study.Study, r *content.Reading) (string, error) {
	a, d, pending := s.Answer(r)
	switch {
	case d != nil:
		return "", *d
	case pending:
		return "", fmt.Errorf("%s: the block behind %q was not computed", r.At, r.Key)
	}
	title := a.Result.Key.Local()
	if a.Interval != "" {
		title += ", 5 to 95 %: " + a.Interval
	}
	for _, assumes := range a.Result.Assumes {
		title += "; " + assumes
	}
	flag := ""
	if len(a.Result.Assumes) > 0 {
		flag = " flagged"
	}
	return fmt.Sprintf("<data class=\"reading%s\" value=\"%s\" title=\"%s\">%s</data>", flag, html.EscapeString(resultValue(a.Result)), html.EscapeString(title), html.EscapeString(a.Text)), nil
}

func resultValue(r kind.Result) string {
	return Line{Result: r}.value()
}
