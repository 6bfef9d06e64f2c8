package unit

import (
	"cmp"
	"slices"
	"strconv"
	"strings"
)

// suggest is the remedy for a unit that is not known: the nearest units of the
// wanted kinds, filled up to two with the usual ones.
func suggest(text string, want []Dim) string {
	known := Known(want...)
	if same := sameButCase(text, known); len(same) > 0 {
		return choice(same)
	}
	near := nearest(text, known)
	for _, d := range want {
		k, _ := d.kind()
		for _, u := range k.units {
			if len(near) < 2 && !slices.Contains(near, u) && u != "%" {
				near = append(near, u)
			}
		}
	}
	switch {
	case len(near) > 0:
		return choice(near)
	case len(want) > 0:
		return likeThese(want)
	}
	return `write a unit such as "kcal/mol", "°C", "h" or "M"`
}

func sameButCase(text string, known []string) (same []string) {
	for _, k := range known {
		if strings.EqualFold(k, text) {
			same = append(same, k)
		}
	}
	return same
}

// nearest returns up to two symbols that the text begins, or that are a few
// slips of the hand away, the nearest first.
func nearest(text string, known []string) []string {
	typed := []rune(strings.ToLower(text))
	if len(typed) < 2 || len(typed) > 40 {
		return nil
	}
	away := make(map[string]int)
	var near []string
	for _, k := range known {
		symbol := []rune(strings.ToLower(k))
		n := slips(typed, symbol)
		if n <= max(1, len(typed)/3) && n < len(symbol) || strings.HasPrefix(string(symbol), string(typed)) {
			away[k] = n
			near = append(near, k)
		}
	}
	slices.SortStableFunc(near, func(a, b string) int { return cmp.Compare(away[a], away[b]) })
	return near[:min(2, len(near))]
}

// slips counts the letters to insert, drop or replace to get from a to b.
func slips(a, b []rune) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i, x := range a {
		before := row[0]
		row[0] = i + 1
		for j, y := range b {
			replaced := before
			if x != y {
				replaced++
			}
			before = row[j+1]
			row[j+1] = min(replaced, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}

// likeThese is a remedy by example, for up to two of the wanted kinds.
func likeThese(want []Dim) string {
	var examples []string
	for _, d := range want {
		if e := d.Example(); e != "" && len(examples) < 2 && !slices.Contains(examples, strconv.Quote(e)) {
			examples = append(examples, strconv.Quote(e))
		}
	}
	if len(examples) == 0 {
		examples = []string{`"18.4 kcal/mol"`, `"2 h"`}
	}
	return "write it as in " + strings.Join(examples, " or ")
}

// choice words a remedy: write "a" or "b".
func choice(symbols []string) string {
	quotes := make([]string, len(symbols))
	for i, s := range symbols {
		quotes[i] = strconv.Quote(s)
	}
	return "write " + strings.Join(quotes, " or ")
}

// list names the wanted kinds: "an energy per mole or a temperature".
func list(want []Dim) string {
	var names []string
	for _, d := range want {
		if name := d.String(); !slices.Contains(names, name) {
			names = append(names, name)
		}
	}
	return strings.Join(names, " or ")
}
