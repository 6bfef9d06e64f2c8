package study

import (
	"fmt"
	"slices"
	"strings"

	"saddlebook/content"
	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/render/kind"
)

// NoResult says that a key names no result of its block.
type NoResult struct {
	Key kind.Key
	Fix string
}

func (e *NoResult) Error() string { return fmt.Sprintf("there is no result %q", e.Key.Local()) }

// Result finds a result of the block.
func (b *Block) Result(k kind.Key) (kind.Result, error) {
	if i, ok := b.index[k.Canonical()]; ok {
		return b.Results[i], nil
	}
	return kind.Result{}, &NoResult{k, b.suggestResult(k)}
}

// suggestResult names the results nearest to a key that there is not: that
// differ by a slip of the hand, else in the condition, the item or the quantity.
func (b *Block) suggestResult(k kind.Key) string {
	var all, conditions, items, quantities []string
	for _, r := range b.Results {
		known := r.Key
		quantities = append(quantities, known.Quantity)
		if known.Quantity == k.Quantity && known.Item == k.Item {
			conditions = append(conditions, known.Local())
		}
		if k.Condition == "" {
			known.Condition = ""
		}
		all = append(all, known.Local())
		if known.Quantity == k.Quantity {
			items = append(items, known.Local())
		}
	}
	if len(all) == 0 {
		return fmt.Sprintf("leave the reading out: a %s block has no results", b.Kind.Name)
	}
	items = distinct(items)
	few := 0 < len(items) && len(items) <= shown // show them all: a name of two letters is near to many
	near := schema.Nearest(k.Local(), all)
	if near != "" && len(conditions) == 0 && (!few || strings.EqualFold(near, k.Local())) {
		return fmt.Sprintf("did you mean %q?", near)
	}
	if near := schema.Nearest(k.Quantity, quantities); near != "" && near != k.Quantity {
		return fmt.Sprintf("did you mean the quantity %q?", near)
	}
	for _, known := range [][]string{conditions, items, quantities} {
		if known = distinct(known); len(known) == 1 {
			return "write " + known[0]
		} else if len(known) > 0 {
			return "write one of " + several(known)
		}
	}
	return "" // a block with results has quantities
}

// distinct drops doubles and keeps the order.
func distinct(words []string) []string {
	var out []string
	for _, w := range words {
		if !slices.Contains(out, w) {
			out = append(out, w)
		}
	}
	return out
}

// shown is how many words a remedy lists: what it takes to see the pattern.
const shown = 6

// several lists words for a remedy.
func several(words []string) string {
	if len(words) > shown {
		return fmt.Sprintf("%s and %d more", strings.Join(words[:shown], ", "), len(words)-shown)
	}
	return strings.Join(words, ", ")
}

// An Answer is what a reading prints, and where its number comes from.
type Answer struct {
	Text     string
	Interval string
	Result   kind.Result
	Block    *Block
}

// Answer answers a reading. pending tells that the block behind it was not
// computed, which has its own diagnostic.
func (s *Study) Answer(r *content.Reading) (a Answer, d *fault.Diagnostic, pending bool) {
	fail := func(msg, fix string, err error) (Answer, *fault.Diagnostic, bool) {
		return Answer{}, &fault.Diagnostic{At: r.At, Severity: fault.Error, Block: "reading", Msg: msg, Fix: fix, Err: err}, false
	}
	k, err := kind.ParseKey(r.Key)
	if err != nil {
		return fail(err.Error(), "write {= ID/quantity/item } or {= ID/quantity/item in unit }", err)
	}
	note := r.Note.Name
	if k.Note != "" {
		note = k.Note
	}
	b := s.Find(note, k.ID)
	if b == nil {
		return fail(fmt.Sprintf("%q names no block", k.String()), s.suggestBlock(r.Note.Name, note, k.ID), nil)
	}
	if !b.Done {
		return Answer{}, nil, true
	}
	res, err := b.Result(k)
	if err != nil {
		return fail(err.Error(), err.(*NoResult).Fix, err)
	}
	text, err := res.Print(r.In)
	if err == nil && res.Value.Kind == kind.Nothing && text != "none" {
		text = "no value (" + text + ")" // in a sentence the reason alone would read as the value
	}
	if err != nil {
		msg, fix := unitWords(err)
		return fail(msg, fix, err)
	}
	return Answer{Text: text, Interval: res.Interval(), Result: res, Block: b}, nil, false
}

// readings checks every reading of the notebook.
func (s *Study) readings() fault.List {
	var out fault.List
	for _, n := range s.Book.All() {
		for _, r := range n.Readings {
			if _, d, _ := s.Answer(r); d != nil {
				out = append(out, *d)
			}
		}
	}
	return out
}

// Remedy says what to write instead.
func (e *NoResult) Remedy() string { return e.Fix }
