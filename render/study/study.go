// Package study evaluates a notebook: it decodes every block, joins the blocks
// into a graph, computes them in order, and answers readings.
package study

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"path"
	"slices"
	"sort"
	"strings"
	"sync"

	"saddlebook/content"
	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/render/kind"
)

// A Study is an evaluated notebook.
type Study struct {
	Book   *content.Notebook
	Blocks []*Block // in order of notes and places
	byID   map[string]*Block
	of     map[*content.Block]*Block
	cache  Cache
	seed   []byte // what the cache key says of the program

	CacheError   error // why the cache could not be written; results stand all the same
	cacheTrouble sync.Once
}

// A Block is one block of the notebook with what it computed.
type Block struct {
	Source  *content.Block
	Kind    *kind.Entry
	ID      string
	Spec    any
	Value   any
	Results []kind.Result
	Hash    string   // of the results: what depends on this block depends on this
	Done    bool     // it was computed, without an error
	Doubts  []string // warnings, for the page
	Remarks []string // what else the sampling has to say

	wrong    []string // keys at which a fault has been told; a block with any is not computed
	unlinked bool     // it names a block that is not there
	refs     []ref
	index    map[string]int // canonical key in the block to result
	sampled  *sampling
	slowed   *slowing
}

type ref struct {
	kind.Ref
	to *Block
}

// Options steer an evaluation.
type Options struct {
	Jobs     int   // blocks computed at once; 0: one
	Cache    Cache // nil: none
	Progress func(done, total int)
}

// Run evaluates a notebook. All faults are returned together, sorted; the
// study answers for the blocks that were computed.
func Run(ctx context.Context, book *content.Notebook, o Options) (*Study, fault.List, error) {
	s := &Study{Book: book, byID: map[string]*Block{}, of: map[*content.Block]*Block{}, cache: o.Cache}
	if s.cache != nil {
		var err error
		if s.seed, err = identity(); err != nil {
			return nil, nil, fmt.Errorf("the program cannot read itself for the cache: %w", err)
		}
	}
	var faults fault.List
	for _, n := range book.All() {
		for _, b := range n.Blocks {
			if e, fs := s.decode(b); e != nil {
				faults = append(faults, fs...)
				s.Blocks = append(s.Blocks, e)
				s.of[b] = e
				if full := n.Name + "#" + e.ID; e.ID != "" && s.byID[full] == nil {
					s.byID[full] = e // a second block of the same id has its own fault
				}
			} else {
				faults = append(faults, fs...)
			}
		}
	}
	faults = append(faults, s.once()...)
	faults = append(faults, s.link()...)
	faults = append(faults, s.cycles()...)
	fs, err := s.evaluate(ctx, o)
	if err != nil {
		return nil, nil, err
	}
	faults = append(faults, fs...)
	faults = append(faults, s.readings()...)
	faults.Sort()
	return s, faults, nil
}

// decode reads a block into the source of its kind. It returns nil when the
// kind is unknown or the block could not be parsed at all.
func (s *Study) decode(b *content.Block) (*Block, fault.List) {
	k := kind.Find(b.Kind)
	if k == nil {
		fix := "write one of " + strings.Join(kind.Names(), ", ")
		if near := schema.Nearest(b.Kind, kind.Names()); near != "" {
			fix = fmt.Sprintf("did you mean %q?", near)
		}
		return nil, fault.List{{At: b.KindAt, Severity: fault.Error, Msg: fmt.Sprintf("%q is not a kind of block", b.Kind), Fix: fix}}
	}
	spec, faults := k.Decode(b.Tree)
	if b.Tree.Broken { // content has said why; the id still names the block
		return &Block{Source: b, Kind: k, ID: b.ID(), index: map[string]int{}, sampled: &sampling{}, slowed: &slowing{}}, nil
	}
	e := &Block{Source: b, Kind: k, Spec: spec, ID: k.ID(spec), index: map[string]int{}, sampled: &sampling{}, slowed: &slowing{}}
	if faults.Failed() {
		for i := range faults {
			faults[i].Block = b.Label
			e.wrong = append(e.wrong, faults[i].Key)
		}
	}
	if b.Tree.Refused() { // content has said why
		e.Spec = nil
		return e, faults
	}
	for _, p := range k.Check(spec) {
		if e.hides(p) {
			continue
		}
		faults = append(faults, e.diagnose(p))
		if p.Severity == fault.Error {
			e.wrong = append(e.wrong, fault.Key(p.Path))
		}
	}
	return e, faults
}

// once refuses a second block of a kind that a note has one of.
func (s *Study) once() fault.List {
	var out fault.List
	first := map[string]*Block{} // by note and kind
	for _, b := range s.Blocks {
		if !b.Kind.Once {
			continue
		}
		key := b.Source.Note.Path + " " + b.Kind.Name
		if f := first[key]; f != nil {
			out = append(out, b.diagnose(&fault.Problem{Severity: fault.Error,
				Msg: fmt.Sprintf("a note has one %s block, and the first stands in line %d", b.Kind.Name, f.Source.At.Line), Fix: "join the two"}))
			b.Spec = nil
			continue
		}
		first[key] = b
	}
	return out
}

// hides tells whether a problem may be no more than what follows from a fault
// that has been told: one of the block as a whole, or at the same key or one
// above or below it. What else is wrong is told in the same run.
func (b *Block) hides(p *fault.Problem) bool {
	if len(b.wrong) == 0 {
		return false
	}
	key := fault.Key(p.Path)
	if key == "" || p.Severity != fault.Error {
		return true
	}
	beside := ""
	if p.Lacks != "" {
		beside = fault.Key(append(slices.Clone(p.Path[:len(p.Path)-1]), p.Lacks))
	}
	for _, w := range b.wrong {
		if w == beside {
			return true
		}
		if w == "" || key == w || strings.HasPrefix(key, w+".") || strings.HasPrefix(w, key+".") {
			return true
		}
	}
	return false
}

// diagnose joins the place to a problem.
func (b *Block) diagnose(p *fault.Problem) fault.Diagnostic {
	at := b.Source.At
	if len(p.Path) > 0 {
		at = b.Source.Tree.Within(p.Char, p.Path...)
	}
	if p.File != "" {
		at = fault.Place{File: path.Join(path.Dir(at.File), p.File), Line: p.Line, Col: p.Col}
	}
	return p.In(b.Source.Label, at)
}

// link resolves what every block depends on.
func (s *Study) link() fault.List {
	var faults fault.List
	for _, b := range s.Blocks {
		if b.Spec == nil {
			continue
		}
		for _, r := range b.Kind.Refs(b.Spec) {
			to, p := s.resolve(b, r)
			if p != nil {
				if !b.hides(p) {
					faults = append(faults, b.diagnose(p))
				}
				b.unlinked = true
				continue
			}
			b.refs = append(b.refs, ref{r, to})
		}
	}
	return faults
}

func (s *Study) resolve(b *Block, r kind.Ref) (*Block, *fault.Problem) {
	note, id := b.Source.Note.Name, r.Target
	if r.Result {
		k, err := kind.ParseKey(r.Target)
		if err != nil {
			return nil, &fault.Problem{Path: r.Path, Severity: fault.Error, Msg: err.Error(), Fix: "write ID/quantity/item, such as limits/kinetic/A", Err: err}
		}
		id = k.ID
		if k.Note != "" {
			note = k.Note
		}
	} else if before, after, ok := strings.Cut(r.Target, "#"); ok {
		note, id = before, after
	}
	to := s.byID[note+"#"+id]
	if to == nil {
		msg := fmt.Sprintf("%q is not a block of this note", id)
		if note != b.Source.Note.Name {
			msg = fmt.Sprintf("%q is not a block of note %q", id, note)
			if s.Book.Note(note) == nil {
				msg = fmt.Sprintf("%q is not a note of this notebook", note)
			}
		}
		return nil, &fault.Problem{Path: r.Path, Severity: fault.Error, Msg: msg, Fix: s.suggestBlock(b.Source.Note.Name, note, id)}
	}
	if r.Model && !to.Kind.Model {
		return nil, &fault.Problem{Path: r.Path, Severity: fault.Error,
			Msg: fmt.Sprintf("%q is a %s", id, to.Kind.Name), Fix: "name a block of kind " + strings.Join(kind.Models(), " or ")}
	}
	return to, nil
}

// suggestBlock names the nearest block: in the note meant, else anywhere.
func (s *Study) suggestBlock(here, note, id string) string {
	var local, all []string
	for full := range s.byID {
		n, i, _ := strings.Cut(full, "#")
		if n == note {
			local = append(local, i)
		}
		all = append(all, full)
	}
	sort.Strings(local)
	sort.Strings(all)
	prefix := ""
	if note != here {
		prefix = note + "#"
	}
	if near := schema.Nearest(id, local); near != "" {
		return fmt.Sprintf("did you mean %q?", prefix+near)
	}
	if near := schema.Nearest(note+"#"+id, all); near != "" {
		return fmt.Sprintf("did you mean %q?", near)
	}
	if s.Book.Note(note) == nil {
		var notes []string
		for _, n := range s.Book.Notes {
			notes = append(notes, n.Name)
		}
		if near := schema.Nearest(note, notes); near != "" {
			return fmt.Sprintf("did you mean the note %q?", near)
		}
		return "write one of " + several(notes) + " before the #"
	}
	for _, full := range all { // the same id in another note
		if strings.HasSuffix(full, "#"+id) {
			return fmt.Sprintf("did you mean %q?", full)
		}
	}
	if len(local) == 0 {
		return "add the block, or name one of another note as note#id"
	}
	return "write one of " + strings.Join(local, ", ") + ", or note#id for one of another note"
}

// cycles refuses blocks that depend on each other in a circle.
func (s *Study) cycles() fault.List {
	var faults fault.List
	state := map[*Block]int{} // 0 new, 1 on the way, 2 done
	var trail []*Block
	var visit func(b *Block)
	visit = func(b *Block) {
		state[b] = 1
		trail = append(trail, b)
		for _, r := range b.refs {
			switch state[r.to] {
			case 0:
				visit(r.to)
			case 1:
				var names []string
				for i := len(trail) - 1; i >= 0; i-- {
					names = append([]string{trail[i].name()}, names...)
					trail[i].Spec = nil
					if trail[i] == r.to {
						break
					}
				}
				names = append(names, r.to.name())
				p := &fault.Problem{Path: r.Path, Severity: fault.Error, Msg: "blocks depend on each other in a circle: " + strings.Join(names, " needs "), Fix: "let one of them name a block outside the circle"}
				faults = append(faults, b.diagnose(p))
			}
		}
		trail = trail[:len(trail)-1]
		state[b] = 2
	}
	for _, b := range s.Blocks {
		if state[b] == 0 {
			visit(b)
		}
	}
	return faults
}

func (b *Block) name() string { return b.Source.Note.Name + "#" + b.ID }

// Of returns the evaluated block of a source block, or nil.
func (s *Study) Of(b *content.Block) *Block { return s.of[b] }

// Find returns the block of that note and id, or nil.
func (s *Study) Find(note, id string) *Block { return s.byID[note+"#"+id] }

// noFile says that a file is not there.
type noFile struct{ msg, fix string }

func (e *noFile) Error() string  { return e.msg }
func (e *noFile) Remedy() string { return e.fix }

func (s *Study) noFile(p, name string) error {
	e := &noFile{"there is no such file", "put the file beside the note"}
	entries, err := fs.ReadDir(s.Book.FS, path.Dir(p))
	if err != nil {
		return e // there is no such folder either
	}
	var known []string
	for _, f := range entries {
		if !f.IsDir() {
			known = append(known, f.Name())
		}
	}
	if near := schema.Nearest(path.Base(p), known); near != "" {
		e.fix = fmt.Sprintf("did you mean %q?", path.Join(path.Dir(name), near))
	}
	return e
}

// file reads a file beside a note.
func (s *Study) file(n *content.Note, name string) ([]byte, error) {
	p := path.Join(path.Dir(n.Path), name)
	if !fs.ValidPath(p) {
		return nil, &noFile{"it lies outside the notebook", "put the file beside the note"}
	}
	data, err := fs.ReadFile(s.Book.FS, p)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, s.noFile(p, name)
	}
	var pe *fs.PathError
	if errors.As(err, &pe) {
		err = pe.Err
	}
	return data, err
}
