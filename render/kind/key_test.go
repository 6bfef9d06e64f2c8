package kind

import "testing"

func TestKeys(t *testing.T) {
	for _, tt := range []struct{ text, canonical string }{
		{"cold/amount/A@2 h", "cold/amount/A@t=7200"},
		{"cold/amount/A@120 min", "cold/amount/A@t=7200"},
		{" cold / amount / A @ 120 min", "cold/amount/A@t=7200"},
		{"addition/barrier/TSa@-78 °C", "addition/barrier/TSa@T=195.15"},
		{"addition/barrier/TSa@\u221278 °C", "addition/barrier/TSa@T=195.15"},
		{"addition/barrier/TSa@195.15 K", "addition/barrier/TSa@T=195.15"},
		{"other/note#limits/fast-exchange@end", "limits/fast-exchange@end"},
		{"limits/kinetic-ratio/A:B", "limits/kinetic-ratio/A:B"},
	} {
		k, err := ParseKey(tt.text)
		if err != nil {
			t.Errorf("%q: %v", tt.text, err)
			continue
		}
		if got := k.Canonical(); got != tt.canonical {
			t.Errorf("%q is %q, want %q", tt.text, got, tt.canonical)
		}
		again, err := ParseKey(k.String())
		if err != nil || again != k {
			t.Errorf("%q written and read again: %v, %v", tt.text, again, err)
		}
	}
	for _, bad := range []string{"", "one", "a//b", "#a/b", " # a/b", "a/b/c/d", "a/b@", "/b/c"} {
		if k, err := ParseKey(bad); err == nil {
			t.Errorf("%q was read as %v", bad, k)
		}
	}
}

func FuzzParseKey(f *testing.F) {
	for _, s := range []string{"cold/amount/A@2 h", "n#a/b/c", "a/b@-78 °C", "@", "#", "a/b/c@@"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		k, err := ParseKey(text)
		if err != nil {
			return
		}
		again, err := ParseKey(k.String())
		if err != nil {
			t.Fatalf("%q reads as %+v, and %q not at all: %v", text, k, k.String(), err)
		}
		if again.Canonical() != k.Canonical() {
			t.Fatalf("%q: %q and then %q", text, k.Canonical(), again.Canonical())
		}
	})
}
