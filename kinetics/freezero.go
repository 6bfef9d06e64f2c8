package kinetics

import "math"

// freeZeros returns the species at constant zero whose energy is free to choose.
// Each conservation law lets the energies be shifted along it without a change
// of any barrier or equilibrium, and so lets one energy be set to zero. Species
// are taken in order as long as the steps among the others have the rank of all
// steps: then some shift sets all the chosen ones at once.
func (m *Mechanism) freeZeros() map[int]bool {
	free := map[int]bool{}
	rank := m.rankWithout(free)
	for i := range m.Species {
		if !m.setsZero(i) {
			continue
		}
		free[i] = true
		if m.rankWithout(free) < rank {
			delete(free, i)
		}
	}
	return free
}

// rankWithout returns the rank of the stoichiometry of the steps over the
// species that are not left out.
func (m *Mechanism) rankWithout(out map[int]bool) int {
	var rows [][]float64
	for _, s := range m.Steps {
		row := make([]float64, len(m.Species))
		for _, t := range s.From {
			row[t.Species] -= float64(t.N)
		}
		for _, t := range s.To {
			row[t.Species] += float64(t.N)
		}
		for i := range out {
			row[i] = 0
		}
		rows = append(rows, row)
	}
	rank := 0
	for col := 0; col < len(m.Species) && rank < len(rows); col++ {
		best := rank
		for r := rank; r < len(rows); r++ {
			if math.Abs(rows[r][col]) > math.Abs(rows[best][col]) {
				best = r
			}
		}
		if math.Abs(rows[best][col]) < 1e-9 {
			continue
		}
		rows[rank], rows[best] = rows[best], rows[rank]
		for r := rank + 1; r < len(rows); r++ {
			f := rows[r][col] / rows[rank][col]
			for c := col; c < len(rows[r]); c++ {
				rows[r][c] -= f * rows[rank][c]
			}
		}
		rank++
	}
	return rank
}
