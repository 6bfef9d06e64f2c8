package kinetics

import (
	"errors"
	"reflect"
	"strings"
	"testing"
	"unicode/utf8"
)

var parseNames = []string{"R", "X", "A", "B", "A2", "H2O", "Cu(I)", "I'", "enone 3", "Na⁺", "a-b"}

func TestParseReaction(t *testing.T) {
	for _, tt := range []struct {
		text     string
		from, to []Term
		returns  bool
	}{
		{"R + X <=> A", []Term{{0, 1}, {1, 1}}, []Term{{2, 1}}, true},
		{"R+X⇌A", []Term{{0, 1}, {1, 1}}, []Term{{2, 1}}, true},
		{"2 A <=> A2", []Term{{2, 2}}, []Term{{4, 1}}, true},
		{"A + A <=> A2", []Term{{2, 2}}, []Term{{4, 1}}, true},
		{"A -> B", []Term{{2, 1}}, []Term{{3, 1}}, false},
		{" A→B ", []Term{{2, 1}}, []Term{{3, 1}}, false},
		{"enone 3 + 2  H2O -> Cu(I) + I'", []Term{{8, 1}, {5, 2}}, []Term{{6, 1}, {7, 1}}, false},
		{"Na⁺ + a-b <=> A", []Term{{9, 1}, {10, 1}}, []Term{{2, 1}}, true},
		{"X + A -> X + B", []Term{{1, 1}, {2, 1}}, []Term{{1, 1}, {3, 1}}, false},
		{"A -> 2 B + 2 X + R", []Term{{2, 1}}, []Term{{3, 2}, {1, 2}, {0, 1}}, false},
	} {
		t.Run(tt.text, func(t *testing.T) {
			from, to, returns, err := ParseReaction(tt.text, parseNames)
			if err != nil {
				t.Fatal(err)
			}
			if !reflect.DeepEqual(from, tt.from) || !reflect.DeepEqual(to, tt.to) || returns != tt.returns {
				t.Errorf("got %v, %v, %v; want %v, %v, %v", from, to, returns, tt.from, tt.to, tt.returns)
			}
		})
	}
}

func TestParseReactionErrors(t *testing.T) {
	for _, tt := range []struct {
		text, want string
		at         int
		unknown    string
	}{
		{"", "has no arrow", 0, ""},
		{"A + B", "has no arrow", 5, ""},
		{"A = B", `"=" in reaction`, 2, ""},
		{"A <-> B", `"<->" in reaction`, 2, ""},
		{"A -> B -> X", "more than one arrow", 7, ""},
		{"⇌ A", "nothing on its left side", 0, ""},
		{"A ⇌ ", "nothing on its right side", 3, ""},
		{"A + <=> B", "no species beside it", 3, ""},
		{"0 A -> B", `number "0" makes no sense`, 0, ""},
		{"A -> 99999999999999999999 B", "makes no sense", 5, ""},
		{"A ⇌ Q", `"Q" in reaction`, 4, "Q"},
		{"A ⇌ 2  Q", `"Q" in reaction`, 7, "Q"},
		{"2A -> B", `"2A" in reaction`, 0, "2A"},
		{"A -> A", "the same on both sides", 0, ""},
		{"A + B <=> B + A", "the same on both sides", 0, ""},
		{"4 A -> B", "4 molecules meet on the left side", 0, ""},
		{"B <=> 4 A", "4 molecules meet on the right side", 5, ""},
	} {
		t.Run(tt.text, func(t *testing.T) {
			_, _, _, err := ParseReaction(tt.text, parseNames)
			var e *ReactionError
			if !errors.As(err, &e) {
				t.Fatalf("error %v is no *ReactionError", err)
			}
			if !strings.Contains(e.Msg, tt.want) || e.At != tt.at || e.Unknown != tt.unknown || e.Fix == "" {
				t.Errorf("got %q at %d, unknown %q, fix %q; want %q at %d, unknown %q", e.Msg, e.At, e.Unknown, e.Fix, tt.want, tt.at, tt.unknown)
			}
		})
	}
}

func TestNameFault(t *testing.T) {
	for _, name := range []string{"R", "TS2'", "Cu(I)", "H2O", "enone 3", "Na⁺", "1,2-adduct", "2A", "A-"} {
		if f := NameFault(name); f != "" {
			t.Errorf("%q: %s", name, f)
		}
	}
	for _, name := range []string{"", " A", "A ", "Na+", "a/b", "a@b", "a:b", "a{b", "a}b", "a|b", "a->b", "2 A", "A→B", "a\nb"} {
		if NameFault(name) == "" {
			t.Errorf("%q passes as a name", name)
		}
	}
}

func FuzzParseReaction(f *testing.F) {
	for _, s := range []string{"R + X <=> A", "2 A ⇌ A2", "A -> B", "A →", "+", "0 A -> B", "A -> 2 2 B", "<=>", "enone 3 -> Na⁺"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		from, to, returns, err := ParseReaction(text, parseNames)
		if err != nil {
			var e *ReactionError
			if !errors.As(err, &e) {
				t.Fatalf("error %T", err)
			}
			if e.At < 0 || e.At > utf8.RuneCountInString(text) || e.Msg == "" || e.Fix == "" {
				t.Fatalf("error at %d of %q: %s; %s", e.At, text, e.Msg, e.Fix)
			}
			return
		}
		arrow := " -> "
		if returns {
			arrow = " <=> "
		}
		again := sideText(from, parseNames) + arrow + sideText(to, parseNames)
		from2, to2, returns2, err := ParseReaction(again, parseNames)
		if err != nil || !reflect.DeepEqual(from, from2) || !reflect.DeepEqual(to, to2) || returns != returns2 {
			t.Fatalf("%q reads differently as %q: %v", text, again, err)
		}
	})
}

func TestParseSum(t *testing.T) {
	got, err := ParseSum(" R + 2 X ", parseNames)
	if err != nil || !reflect.DeepEqual(got, []Term{{0, 1}, {1, 2}}) {
		t.Errorf("got %v, %v", got, err)
	}
	for text, want := range map[string]string{"": "has nothing in it", "R + Q": `"Q" in sum "R + Q"`, "R +": `a + in sum "R +"`} {
		var e *ReactionError
		if _, err := ParseSum(text, parseNames); !errors.As(err, &e) || !strings.Contains(e.Msg, want) || e.Fix == "" {
			t.Errorf("%q: error %v, want %q", text, err, want)
		}
	}
}
