package control_test

import (
	"fmt"
	"testing"

	"saddlebook/kinetics/control"
)

// The states that share the total of a catalyst.
func TestStatesOf(t *testing.T) {
	species := []level{{"S", 0}, {"P", 0}, {"cat", 0}, {"int", 0}, {"dim", 0}, {"L", 0}, {"pre", 0}, {"dead", 0}}
	cycle := []way{{"a", "cat + S <=> int", 20}, {"b", "int <=> cat + P", 20}}
	for _, c := range []struct {
		name, of string
		steps    []way
		want     string
	}{
		{"a cycle", "cat", cycle, "[[2 3]]"},
		{"from another of its states", "int", cycle, "[[2 3]]"},
		{"a dimer", "cat", append(cycle[:2:2], way{"c", "2 cat <=> dim", 20}), "[[2 3 4]]"},
		{"a ligand that leaves", "cat", append(cycle[:2:2], way{"d", "pre <=> cat + L", 20}), "[[2 3 6]]"},
		{"the ligand", "L", append(cycle[:2:2], way{"d", "pre <=> cat + L", 20}), "[[5 6]]"},
		{"a catalyst that dies", "cat", append(cycle[:2:2], way{"e", "int -> dead", 20}), "[[2 3 7]]"},
		{"two of one size", "int", []way{{"f", "int <=> cat + L", 20}}, "[[2 3] [3 5]]"},
		{"only with the product", "S", cycle, "[]"},
		{"nothing kept", "cat", []way{{"g", "cat <=> 2 cat", 20}}, "[]"},
	} {
		m := mechanism(t, 298.15, species, c.steps)
		if got := fmt.Sprint(control.StatesOf(m, index(t, m, c.of), []int{1})); got != c.want {
			t.Errorf("%s: %s, want %s", c.name, got, c.want)
		}
	}
}
