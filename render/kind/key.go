package kind

import (
	"errors"
	"fmt"
	"strings"

	"saddlebook/kinetics/unit"
)

// A Key names one result: ID/Quantity/Item@Condition. Note is empty for a
// result of the same note, else it stands before a #: other-note#ID/....
type Key struct{ Note, ID, Quantity, Item, Condition string }

// String writes the key as an author would type it.
func (k Key) String() string {
	var b strings.Builder
	if k.Note != "" {
		b.WriteString(k.Note + "#")
	}
	b.WriteString(k.Local())
	return b.String()
}

// Local is the key without its note.
func (k Key) Local() string {
	s := k.ID + "/" + k.Quantity
	if k.Item != "" {
		s += "/" + k.Item
	}
	if k.Condition != "" {
		s += "@" + k.Condition
	}
	return s
}

// In returns the key as read from the block itself: Quantity/Item@Condition.
func (k Key) In() string { return strings.TrimPrefix(k.Local(), k.ID+"/") }

// Canonical is the same for every way of writing the same key: a condition
// that is a temperature or a time counts by its value, so @2 h and @120 min
// are one.
func (k Key) Canonical() string {
	k.Condition = canonicalCondition(k.Condition)
	k.Note = ""
	return k.Local()
}

func canonicalCondition(c string) string {
	c = strings.TrimSpace(c)
	if q, err := unit.Parse(c, unit.Unit{}, unit.Temperature, unit.Time); err == nil && q.Unit.Symbol != "" {
		name := "t"
		if q.Unit.Dim == unit.Temperature {
			name = "T"
		}
		return fmt.Sprintf("%s=%.9g", name, q.SI)
	}
	return c
}

// ConditionText is how a temperature or time stands in a key: typed with a
// keyboard minus and one space.
func ConditionText(q unit.Quantity) string {
	return q.String()
}

// ErrKey marks a key that cannot be read.
var ErrKey = errors.New("the key cannot be read")

// ParseKey reads ID/Quantity/Item@Condition, with an optional note and # before it.
func ParseKey(text string) (Key, error) {
	var k Key
	rest := strings.TrimSpace(text)
	if note, after, ok := strings.Cut(rest, "#"); ok {
		if k.Note, rest = strings.TrimSpace(note), after; k.Note == "" {
			return k, fmt.Errorf("%w: no note stands before # in %q", ErrKey, text)
		}
	}
	if at := strings.LastIndex(rest, "@"); at >= 0 {
		k.Condition, rest = strings.TrimSpace(rest[at+1:]), rest[:at]
		if k.Condition == "" {
			return k, fmt.Errorf("%w: nothing stands after @", ErrKey)
		}
	}
	parts := strings.Split(rest, "/")
	for i := range parts {
		parts[i] = strings.TrimSpace(parts[i])
	}
	if len(parts) < 2 {
		return k, fmt.Errorf("%w: %q names a block and none of its results", ErrKey, text)
	}
	if len(parts) > 3 {
		return k, fmt.Errorf("%w: %q has %d parts, and ID/quantity/item are three", ErrKey, text, len(parts))
	}
	for _, p := range parts {
		if p == "" {
			return k, fmt.Errorf("%w: %q has an empty part", ErrKey, text)
		}
	}
	k.ID, k.Quantity = parts[0], parts[1]
	if len(parts) == 3 {
		k.Item = parts[2]
	}
	return k, nil
}
