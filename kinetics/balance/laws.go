package balance

import (
	"fmt"
	"math"
	"slices"

	"saddlebook/kinetics/rate"
)

// largest is the largest whole number kept in a law, so that products of two fit.
const largest = 1<<31 - 1

var errLarge = fmt.Errorf("%w: the stoichiometric numbers are too large to find the conservation laws exactly; write the reactions with smaller ones", rate.ErrDomain)

// laws are the conservation laws Σ row·c = total in whole numbers, each solved
// for one species: law k alone holds species lead[k], at a positive number.
type laws struct {
	lead []int
	row  [][]int64
}

// newLaws returns the laws that net, reactions by species, leaves: its null space.
// Species with a small guess are eliminated first, so that abundant ones lead.
func newLaws(n int, net [][]int64, guess []float64) (*laws, error) {
	order := make([]int, n)
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch {
		case guess[a] < guess[b]:
			return -1
		case guess[a] > guess[b]:
			return 1
		}
		return 0
	})
	m := make([][]int64, len(net))
	for i := range net {
		m[i] = slices.Clone(net[i])
		if err := shorten(m[i]); err != nil {
			return nil, err
		}
	}
	pivot := make([]int, n) // species to the row of m solved for it
	done := 0
	for i := range pivot {
		pivot[i] = -1
	}
	for _, j := range order {
		r := done
		for r < len(m) && m[r][j] == 0 {
			r++
		}
		if r == len(m) {
			continue
		}
		m[done], m[r] = m[r], m[done]
		for i := range m {
			if i != done {
				if err := eliminate(m[i], m[done], j); err != nil {
					return nil, err
				}
			}
		}
		pivot[j] = done
		done++
	}

	l := &laws{}
	for f := range n {
		if pivot[f] >= 0 {
			continue
		}
		common := int64(1)
		for j, r := range pivot {
			if r >= 0 && m[r][f] != 0 {
				p := abs(m[r][j])
				if common = common / gcd(common, p) * p; common > largest {
					return nil, errLarge
				}
			}
		}
		row := make([]int64, n)
		row[f] = common
		for j, r := range pivot {
			if r >= 0 && m[r][f] != 0 {
				row[j] = -m[r][f] * (common / m[r][j])
			}
		}
		if err := shorten(row); err != nil {
			return nil, err
		}
		l.lead, l.row = append(l.lead, f), append(l.row, row)
	}
	return l, nil
}

// swap makes species j the lead of law k, where it stands already.
func (l *laws) swap(k, j int) error {
	if l.row[k][j] < 0 {
		for i := range l.row[k] {
			l.row[k][i] = -l.row[k][i]
		}
	}
	for i := range l.row {
		if i != k {
			if err := eliminate(l.row[i], l.row[k], j); err != nil {
				return err
			}
		}
	}
	l.lead[k] = j
	return nil
}

// eliminate clears species j from row with the help of by, keeping the sign of
// the rest of row.
func eliminate(row, by []int64, j int) error {
	if row[j] == 0 {
		return nil
	}
	a, b := by[j], row[j]
	if a < 0 {
		a, b = -a, -b
	}
	g := gcd(a, abs(b))
	a, b = a/g, b/g
	for i := range row {
		row[i] = a*row[i] - b*by[i] // within int64: all are at most largest
	}
	return shorten(row)
}

func shorten(row []int64) error {
	g := int64(0)
	for _, v := range row {
		g = gcd(g, abs(v))
	}
	for i := range row {
		if g > 1 {
			row[i] /= g
		}
		if abs(row[i]) > largest {
			return errLarge
		}
	}
	return nil
}

func gcd(a, b int64) int64 {
	for b != 0 {
		a, b = b, a%b
	}
	return a
}

func abs(a int64) int64 { return max(a, -a) }

// total returns Σ row·v to nearly twice the digits of a number before it is
// rounded once, so that totals which cancel are right whatever the order.
func total(row []int64, v []float64) float64 {
	var sum, low float64
	for i, n := range row {
		if n == 0 {
			continue
		}
		p := float64(n) * v[i]
		e := math.FMA(float64(n), v[i], -p) // p + e is the product exactly
		s := sum + p
		t := s - sum
		low += (sum - (s - t)) + (p - t) + e // s + this is sum + p exactly
		sum = s
	}
	return sum + low
}
