package schema

import "strings"

// Nearest returns the known word that an author most likely meant, or "". Words
// that differ only in case, hyphens, underscores and spaces are the same; else
// the distance counts single insertions, deletions, replacements and swaps of
// neighbours (Damerau 1964, Commun. ACM 7, 171; each piece of a word is edited
// once), and may be a third of the length: none for words of one or two letters.
// Of equals the one with the longer common beginning is taken, then the first in
// the alphabet. If none is that near, a word of three letters or more stands for
// the only known one that it begins.
func Nearest(word string, known []string) string {
	best, bestDistance, bestPrefix := "", len(word)+1, 0
	folded := fold(word)
	for _, k := range known {
		f := fold(k)
		longer := max(len(f), len(folded))
		d := 0
		if string(f) != string(folded) {
			limit := min(longer/3, 3)
			if d = distance(folded, f, limit); d > limit {
				continue
			}
		}
		prefix := commonPrefix(word, k)
		if d < bestDistance || d == bestDistance && (prefix > bestPrefix || prefix == bestPrefix && k < best) {
			best, bestDistance, bestPrefix = k, d, prefix
		}
	}
	if best == "" && len(folded) >= 3 {
		for _, k := range known {
			if strings.HasPrefix(string(fold(k)), string(folded)) {
				if best != "" && best != k {
					return ""
				}
				best = k
			}
		}
	}
	return best
}

func fold(word string) []rune {
	return []rune(strings.NewReplacer("_", "-", " ", "-").Replace(strings.ToLower(word)))
}

func commonPrefix(a, b string) int {
	n := 0
	for n < len(a) && n < len(b) && a[n] == b[n] {
		n++
	}
	return n
}

// distance counts the edits from a to b, or returns more than limit.
func distance(a, b []rune, limit int) int {
	if len(a)-len(b) > limit || len(b)-len(a) > limit {
		return limit + 1
	}
	before, above, row := make([]int, len(b)+1), make([]int, len(b)+1), make([]int, len(b)+1)
	for j := range above {
		above[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row[0] = i
		for j := 1; j <= len(b); j++ {
			same := 1
			if a[i-1] == b[j-1] {
				same = 0
			}
			row[j] = min(above[j]+1, row[j-1]+1, above[j-1]+same)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		before, above, row = above, row, before
	}
	return above[len(b)]
}
