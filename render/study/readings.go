package study

import (
	"fmt"
	"sort"

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
	var known []string
	for _, r := range b.Results {
		known = append(known, r.Key.Local())
	}
	fix := fmt.Sprintf("see what it makes with: saddlebook results, or: saddlebook reference %s", b.Kind.Name)
	if near := schema.Nearest(k.Local(), known); near != "" {
		fix = fmt.Sprintf("did you mean %q?", near)
	} else if near := schema.Nearest(k.Quantity, quantities(b.Results)); near != "" && near != k.Quantity {
		fix = fmt.Sprintf("did you mean the quantity %q?", near)
	}
	return kind.Result{}, &NoResult{k, fix}
}

func quantities(rs []kind.Result) []string {
	seen := map[string]bool{}
	var out []string
	for _, r := range rs {
		if !seen[r.Key.Quantity] {
			seen[r.Key.Quantity] = true
			out = append(out, r.Key.Quantity)
		}
	}
	sort.Strings(out)
	return out
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
