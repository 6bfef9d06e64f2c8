package place

import "strconv"

// Form is how a value is written.
type Form int

const (
	Scalar Form = iota // a number, a truth value or a date
	String             // a text, of any of the four kinds
	List               // [ ... ]
	Inline             // { ... }
	Open               // a table made by a header, by dotted keys, or implied by either
	Tables             // an array of tables, made by [[...]] headers
)

// An Entry is one key of a TOML text, or one element of a list, with its place.
// Offsets are in bytes from the start of the text.
type Entry struct {
	Key   string // the key; the ordinal from 1 for an element
	KeyAt int    // where the key first stands; for an element its value, or its key in the [[header]]
	At    int    // where the value starts; for a table made by a header the bracket, for an implied one the key
	End   int    // where the value ends; At for Open and Tables
	Form  Form
	Kids  []*Entry // in the order in which they are first named

	parent *Entry
	index  map[string]*Entry
	headed bool // has a [header] of its own
	dotted bool // made by a dotted key
}

// Kid returns the entry of that key, or nil.
func (e *Entry) Kid(key string) *Entry { return e.index[key] }

// Walk calls visit for every entry below e, in source order, with its path from e.
// The path is good only during the call.
func (e *Entry) Walk(visit func(path []string, e *Entry)) { e.walk(nil, visit) }

func (e *Entry) walk(path []string, visit func([]string, *Entry)) {
	for _, k := range e.Kids {
		p := append(path, k.Key)
		visit(p, k)
		k.walk(p, visit)
	}
}

func (e *Entry) add(k *Entry) *Entry {
	if e.index == nil {
		e.index = map[string]*Entry{}
	}
	k.parent = e
	e.Kids = append(e.Kids, k)
	e.index[k.Key] = k
	return k
}

// path returns the keys from the root.
func (e *Entry) path() []string {
	if e == nil || e.parent == nil {
		return nil
	}
	return append(e.parent.path(), e.Key)
}

// element adds the next element of a list or of an array of tables.
func (e *Entry) element(keyAt, at int, form Form) *Entry {
	return e.add(&Entry{Key: strconv.Itoa(len(e.Kids) + 1), KeyAt: keyAt, At: at, End: at, Form: form})
}

// A Fault is something wrong with a TOML text.
type Fault struct {
	At    int      // byte offset
	First int      // offset of the other place, for a Clash; else -1
	Path  []string // the key at fault, as far as it is known
	Msg   string   // what is wrong, on one line
	Fix   string   // what to write instead
	Clash bool     // the text is well formed, but two keys cannot stand together
}
