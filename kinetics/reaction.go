package kinetics

import (
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"
)

// MaxMolecules is the largest number of molecules that one elementary step
// brings together.
const MaxMolecules = 3

// ReactionError is a reaction that cannot be read.
type ReactionError struct {
	Text    string
	At      int    // rune offset in Text of what is wrong
	Msg     string // what is wrong, the value quoted
	Fix     string // what to write instead
	Unknown string // the name, when a species is not known; the caller may suggest one
}

func (e *ReactionError) Error() string { return e.Msg + "; " + e.Fix }

// arrows are what may stand between the sides. The longer ones come first, so
// that one is not read as a part of another.
var arrows = []struct {
	text    string
	returns bool
}{{"<=>", true}, {"⇌", true}, {"->", false}, {"→", false}}

// ParseReaction reads "R + X <=> A" (reversible, also ⇌) or "2 A -> A2" (no
// return, also →). A positive whole number and a space before a name is its
// stoichiometric number. A species may stand on both sides, such as a catalyst,
// but something must change. Terms are numbered by species; the same species
// twice on one side becomes one term. The error is a *ReactionError.
func ParseReaction(text string, species []string) (from, to []Term, returns bool, err error) {
	at, width := -1, 0
	const fix = "write <=> for a reversible step or -> for one without return"
	for i := 0; i < len(text); {
		n := 0
		for _, wrong := range []string{"<->", "-->", "<==>", "<-->"} {
			if strings.HasPrefix(text[i:], wrong) {
				return nil, nil, false, reactionError(text, i, fmt.Sprintf("%q in reaction %q is not an arrow of a step", wrong, text), fix)
			}
		}
		for _, a := range arrows {
			if strings.HasPrefix(text[i:], a.text) {
				n = len(a.text)
				if at < 0 {
					at, width, returns = i, n, a.returns
				} else {
					return nil, nil, false, reactionError(text, i, fmt.Sprintf("reaction %q has more than one arrow", text), "write one step for each arrow")
				}
				break
			}
		}
		i += max(n, 1)
	}
	if at < 0 {
		for _, wrong := range []string{"=>", "<-", "=", "←", "↔", "⇄", "⇔"} {
			if i := strings.Index(text, wrong); i >= 0 {
				return nil, nil, false, reactionError(text, i, fmt.Sprintf("%q in reaction %q is not an arrow of a step", wrong, text), fix)
			}
		}
		return nil, nil, false, reactionError(text, len(text), fmt.Sprintf("reaction %q has no arrow", text), fix)
	}
	if from, err = parseSide(text, 0, at, "reaction", " on its left side", species); err != nil {
		return nil, nil, false, err
	}
	if to, err = parseSide(text, at+width, len(text), "reaction", " on its right side", species); err != nil {
		return nil, nil, false, err
	}
	if n := Molecules(from); n > MaxMolecules {
		return nil, nil, false, reactionError(text, 0, tooMany(n, "left"), splitStep)
	}
	if n := Molecules(to); returns && n > MaxMolecules {
		return nil, nil, false, reactionError(text, at+width, tooMany(n, "right"), splitStep)
	}
	if sameSide(from, to) {
		return nil, nil, false, reactionError(text, 0, fmt.Sprintf("reaction %q has the same on both sides", text), "write what the step turns into what; give two names to two states")
	}
	return from, to, returns, nil
}

const splitStep = "write it as several elementary steps of up to three molecules"

func tooMany(n int, side string) string {
	return fmt.Sprintf("%d molecules meet on the %s side, and an elementary step has at most %d", n, side, MaxMolecules)
}

// ParseSum reads a sum of species such as "R + X" or "2 A". The error is a
// *ReactionError.
func ParseSum(text string, species []string) ([]Term, error) {
	return parseSide(text, 0, len(text), "sum", " in it", species)
}

// parseSide reads text[start:end], one side of a reaction or a sum by itself;
// what and where name it in messages.
func parseSide(text string, start, end int, what, where string, species []string) ([]Term, error) {
	if strings.TrimSpace(text[start:end]) == "" {
		return nil, reactionError(text, start, fmt.Sprintf("%s %q has nothing%s", what, text, where), "name at least one species")
	}
	var terms []Term
	for offset := start; ; {
		stop := end
		if i := strings.IndexByte(text[offset:end], '+'); i >= 0 {
			stop = offset + i
		}
		part := text[offset:stop]
		name := strings.TrimSpace(part)
		at := offset + strings.Index(part, name)
		if name == "" {
			return nil, reactionError(text, offset, fmt.Sprintf("a + in %s %q has no species beside it", what, text),
				"name a species on both sides of each +, and write a charge as ⁺, such as Na⁺")
		}
		count := 1
		if digits, rest, ok := strings.Cut(name, " "); ok && isDigits(digits) {
			n, err := strconv.Atoi(digits)
			if err != nil || n < 1 {
				return nil, reactionError(text, at, fmt.Sprintf("stoichiometric number %q makes no sense", digits), "give a whole number, 1 or more")
			}
			count = n
			trimmed := strings.TrimSpace(rest)
			at += len(digits) + 1 + strings.Index(rest, trimmed)
			name = trimmed
		}
		k := -1
		for i, s := range species {
			if s == name {
				k = i
				break
			}
		}
		if k < 0 {
			e := reactionError(text, at, fmt.Sprintf("%q in %s %q is not a species of this mechanism", name, what, text), fmt.Sprintf("declare the species %q, or correct the name", name))
			if isDigits(name) {
				e.Fix = "give a species after the stoichiometric number"
			}
			e.Unknown = name
			return nil, e
		}
		terms = addTerm(terms, k, count)
		if stop == end {
			return terms, nil
		}
		offset = stop + 1
	}
}

func isDigits(s string) bool {
	for _, r := range s {
		if r < '0' || r > '9' {
			return false
		}
	}
	return s != ""
}

func addTerm(terms []Term, species, n int) []Term {
	for i := range terms {
		if terms[i].Species == species {
			// Far more than can meet is refused anyway: keep the sum from overflowing.
			terms[i].N = min(terms[i].N+n, 1<<20)
			return terms
		}
	}
	return append(terms, Term{Species: species, N: min(n, 1<<20)})
}

// Molecules returns how many molecules one side has.
func Molecules(side []Term) int {
	n := 0
	for _, t := range side {
		n += t.N
	}
	return n
}

func sameSide(a, b []Term) bool {
	if len(a) != len(b) {
		return false
	}
	for _, t := range a {
		if countOf(b, t.Species) != t.N {
			return false
		}
	}
	return true
}

func countOf(side []Term, species int) int {
	for _, t := range side {
		if t.Species == species {
			return t.N
		}
	}
	return 0
}

func reactionError(text string, at int, msg, fix string) *ReactionError {
	return &ReactionError{Text: text, At: utf8.RuneCountInString(text[:at]), Msg: msg, Fix: fix}
}

// NameFault returns what keeps name from being a name of a species or a step,
// or "".
func NameFault(name string) string {
	switch {
	case name == "":
		return "it is empty"
	case strings.TrimSpace(name) != name:
		return "it begins or ends with a space"
	case !utf8.ValidString(name):
		return "it is not UTF-8 text"
	}
	if i := strings.IndexAny(name, "+/@:{}|#\n\r\t"); i >= 0 {
		return fmt.Sprintf("it has %q in it", name[i])
	}
	for _, a := range arrows {
		if strings.Contains(name, a.text) {
			return fmt.Sprintf("it has the arrow %q in it", a.text)
		}
	}
	if digits, _, ok := strings.Cut(name, " "); ok && isDigits(digits) {
		return "it begins with a stoichiometric number"
	}
	return ""
}
