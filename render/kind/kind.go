package kind

import (
	"context"
	"encoding/json"
	"fmt"
	"sort"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/kinetics"
	"saddlebook/render/paper"
)

// A Kind is one kind of block: the shape S of its source, the value R it
// computes, and what is made of that value. One file registers one kind.
type Kind[S, R any] struct {
	Name, Doc string
	Method    string                                             // how it computes, in a sentence or two for the colophon; "" if it computes nothing
	Version   int                                                // raise it when results change
	Fields    []schema.Field                                     // the one source of decoding, reference and schema
	ID        func(*S) string                                    // "" when the block has none
	Refs      func(*S) []Ref                                     // the blocks it depends on
	Files     func(*S) []string                                  // the files beside the note that it reads
	Check     func(*S) fault.Problems                            // what the field list cannot say
	Compute   func(context.Context, *S, Inputs) (R, error)       // pure; knows no places; R encodes to JSON. Problems that are all warnings go with a good R. A block with faults is computed too, to find what else is wrong: zero values must do no harm
	Results   func(*S, R) []Result                               // every computed value
	Gives     []Gift                                             // the keys of Results, for the reference
	Present   func(*S, R, *paper.Sheet)                          // words, tables, figures; no HTML
	Sampler   func(context.Context, *S, Inputs) (Sampler, error) // how results answer to shifted energies; nil: not sampled
	Findings  func(*S, R) []Finding                              // conclusions with their standing; nil: none
	About     func(*S, R) About                                  // what the block says of its page; nil: nothing
	Once      bool                                               // a note has one at most
}

// A Gift says which result keys a kind makes.
type Gift struct{ Key, Doc string }

// A Ref is a block that another block depends on.
type Ref struct {
	Target string   // "addition", "other-note#addition", or a whole result key
	Result bool     // Target is a result key
	Model  bool     // it must give a mechanism
	Path   []string // the key of the block that names it
}

// Entry is a registered kind with its types erased, as the study uses it.
type Entry struct {
	Name, Doc string
	Method    string
	Version   int
	Fields    []schema.Field

	Decode   func(*schema.Node) (any, fault.List)
	ID       func(spec any) string
	Refs     func(spec any) []Ref
	Files    func(spec any) []string
	Check    func(spec any) fault.Problems
	Compute  func(ctx context.Context, spec any, in Inputs) (any, error)
	Encode   func(value any) ([]byte, error)
	Restore  func(data []byte) (any, error)
	Results  func(spec, value any) []Result
	Present  func(spec, value any, sheet *paper.Sheet)
	Sampler  func(ctx context.Context, spec any, in Inputs) (Sampler, error) // nil: not sampled
	Findings func(spec, value any) []Finding
	About    func(spec, value any) (About, bool)
	Once     bool
	Gives    []Gift
	Model    bool // its value gives a mechanism
}

var registry = map[string]*Entry{}

// Register adds a kind. It panics when the kind contradicts itself (a fault of
// the program, found by every test that imports this package).
func Register[S, R any](k Kind[S, R]) {
	if k.Name == "" || k.Doc == "" || k.Version < 1 || k.Compute == nil || k.Present == nil {
		panic(fmt.Sprintf("kind %q: name, doc, version, compute and present are needed", k.Name))
	}
	if registry[k.Name] != nil {
		panic(fmt.Sprintf("kind %q is registered twice", k.Name))
	}
	if err := schema.Check(k.Fields, new(S)); err != nil {
		panic(fmt.Sprintf("kind %q: %v", k.Name, err))
	}
	e := &Entry{Name: k.Name, Doc: k.Doc, Method: k.Method, Version: k.Version, Fields: k.Fields, Gives: k.Gives, Once: k.Once}
	var r R
	_, e.Model = any(r).(modeller)
	e.Decode = func(n *schema.Node) (any, fault.List) {
		s := new(S)
		return s, schema.Decode(n, k.Fields, s)
	}
	e.ID = func(spec any) string { return orZero(k.ID, spec.(*S)) }
	e.Refs = func(spec any) []Ref { return orZero(k.Refs, spec.(*S)) }
	e.Files = func(spec any) []string { return orZero(k.Files, spec.(*S)) }
	e.Check = func(spec any) fault.Problems { return orZero(k.Check, spec.(*S)) }
	e.Compute = func(ctx context.Context, spec any, in Inputs) (any, error) { return k.Compute(ctx, spec.(*S), in) }
	e.Encode = json.Marshal
	e.Restore = func(data []byte) (any, error) {
		var r R
		err := json.Unmarshal(data, &r)
		return r, err
	}
	e.Results = func(spec, value any) []Result {
		if k.Results == nil {
			return nil
		}
		return k.Results(spec.(*S), value.(R))
	}
	e.Present = func(spec, value any, sheet *paper.Sheet) { k.Present(spec.(*S), value.(R), sheet) }
	if k.Sampler != nil {
		e.Sampler = func(ctx context.Context, spec any, in Inputs) (Sampler, error) {
			return k.Sampler(ctx, spec.(*S), in)
		}
	}
	e.Findings = func(spec, value any) []Finding {
		if k.Findings == nil {
			return nil
		}
		return k.Findings(spec.(*S), value.(R))
	}
	e.About = func(spec, value any) (About, bool) {
		if k.About == nil {
			return About{}, false
		}
		return k.About(spec.(*S), value.(R)), true
	}
	registry[k.Name] = e
}

// modeller is a value that gives a mechanism to the blocks that name its own.
type modeller interface{ Mechanism() *kinetics.Mechanism }

func orZero[S, T any](f func(S) T, s S) T {
	var zero T
	if f == nil {
		return zero
	}
	return f(s)
}

// Find returns the kind of that name, or nil.
func Find(name string) *Entry { return registry[name] }

// Names lists the registered kinds in order.
func Names() []string {
	names := make([]string, 0, len(registry))
	for n := range registry {
		names = append(names, n)
	}
	sort.Strings(names)
	return names
}

// Models lists the kinds that give a mechanism.
func Models() []string {
	var names []string
	for _, n := range Names() {
		if registry[n].Model {
			names = append(names, n)
		}
	}
	return names
}
