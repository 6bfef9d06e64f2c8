package kinetics

import "math"

// BasisUnits returns how many molecules of the species basis one molecule of
// each species is made of: 2 for a dimer of it, ½ where one molecule falls into two
// equal parts. outside marks the species that hold nothing of it, because they
// are charged in their own right. NaN: it cannot be told from the steps.
//
// What the conservation laws fix is taken from them. Where they leave a choice,
// as between the two parts of a molecule that falls apart, it is the fewest
// molecules that the species can be made from, step by step. Steps that cannot
// all balance (R <=> A beside R <=> B and 2 A <=> B) tell nothing.
func (m *Mechanism) BasisUnits(basis int, outside []bool) []float64 {
	fixed, _ := m.unitsByLaws(basis, outside)
	if _, balance := m.unitsByLaws(basis, make([]bool, len(outside))); !balance {
		for i := range fixed {
			fixed[i] = math.NaN()
		}
		return fixed
	}
	made := m.unitsByMaking(basis, outside)
	for i := range fixed {
		if math.IsNaN(fixed[i]) {
			fixed[i] = made[i]
		}
		if whole := math.Round(fixed[i]); math.Abs(fixed[i]-whole) < 1e-9 {
			fixed[i] = whole
		}
		if !(fixed[i] > 0) || math.IsInf(fixed[i], 0) {
			fixed[i] = math.NaN()
		}
	}
	return fixed
}

// unitsByLaws looks for conserved weights of 1 for the basis and 0 for what is
// outside, and returns those that are the same in all of them; NaN for the
// others. It is not ok if there are no such weights. Entries are small whole
// numbers, so elimination with pivoting is safe.
func (m *Mechanism) unitsByLaws(basis int, outside []bool) (units []float64, ok bool) {
	n := len(m.Species)
	var rows [][]float64
	for _, st := range m.Steps {
		row := make([]float64, n+1)
		for _, t := range st.From {
			row[t.Species] -= float64(t.N)
		}
		for _, t := range st.To {
			row[t.Species] += float64(t.N)
		}
		rows = append(rows, row)
	}
	fix := func(species int, weight float64) {
		row := make([]float64, n+1)
		row[species], row[n] = 1, weight
		rows = append(rows, row)
	}
	fix(basis, 1)
	for i, out := range outside {
		if out && i != basis {
			fix(i, 0)
		}
	}
	const zero = 1e-9
	rank := 0
	for col := 0; col < n && rank < len(rows); col++ {
		best := rank
		for i := rank; i < len(rows); i++ {
			if math.Abs(rows[i][col]) > math.Abs(rows[best][col]) {
				best = i
			}
		}
		if math.Abs(rows[best][col]) < zero {
			continue
		}
		rows[rank], rows[best] = rows[best], rows[rank]
		pivot := rows[rank]
		for k := n; k >= col; k-- {
			pivot[k] /= pivot[col]
		}
		for i, row := range rows {
			if f := row[col]; i != rank && f != 0 {
				for k := col; k <= n; k++ {
					row[k] -= f * pivot[k]
				}
			}
		}
		rank++
	}
	out := make([]float64, n)
	for i := range out {
		out[i] = math.NaN()
	}
	for _, row := range rows[rank:] {
		if math.Abs(row[n]) > zero {
			return out, false // no such weights: what is outside turns into the basis
		}
	}
	for _, row := range rows[:rank] {
		only, others := -1, 0
		for k, x := range row[:n] {
			switch {
			case math.Abs(x) < zero:
			case only < 0:
				only = k
			default:
				others++
			}
		}
		if others == 0 {
			out[only] = row[n]
		}
	}
	return out, true
}

// unitsByMaking follows the steps from what is charged and counts the fewest
// molecules of the basis that one molecule of each species takes.
func (m *Mechanism) unitsByMaking(basis int, outside []bool) []float64 {
	n := len(m.Species)
	least := make([]float64, n)
	for i := range least {
		least[i] = math.Inf(1)
		if outside[i] {
			least[i] = 0
		}
	}
	least[basis] = 1
	makes := func(from, to []Term) bool {
		takes := 0.0
		for _, t := range from {
			takes += float64(t.N) * least[t.Species]
		}
		changed := false
		for _, t := range to {
			if x := takes / float64(t.N); t.Species != basis && x < least[t.Species] {
				least[t.Species], changed = x, true
			}
		}
		return changed
	}
	for range n + 1 {
		changed := false
		for _, st := range m.Steps {
			changed = makes(st.From, st.To) || changed
			if st.Returns {
				changed = makes(st.To, st.From) || changed
			}
		}
		if !changed {
			return least
		}
	}
	for i := range least {
		least[i] = math.NaN() // it gets ever fewer: a species that makes more of itself
	}
	return least
}
