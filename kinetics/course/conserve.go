package course

import "math"

// A conserved sum of species and sinks is changed by no step.
type conserved []float64

// conservation returns the sums that no row changes: a basis of the null space,
// one sum by species that elimination leaves free. The rows are small whole
// numbers, so that plain elimination with the largest pivot is exact enough.
func conservation(n int, rows [][]float64) []conserved {
	const zero = 1e-9
	pivotOf := make([]int, n) // row+1 by column
	used := 0
	for col := range n {
		best := -1
		for i := used; i < len(rows); i++ {
			if math.Abs(rows[i][col]) > zero && (best < 0 || math.Abs(rows[i][col]) > math.Abs(rows[best][col])) {
				best = i
			}
		}
		if best < 0 {
			continue
		}
		rows[used], rows[best] = rows[best], rows[used]
		p := rows[used]
		f := p[col]
		for k := range p {
			p[k] /= f
		}
		for i, r := range rows {
			if i == used || r[col] == 0 {
				continue
			}
			f := r[col]
			for k := range r {
				r[k] -= f * p[k]
			}
			r[col] = 0
		}
		used++
		pivotOf[col] = used
	}
	var laws []conserved
	for free := range n {
		if pivotOf[free] > 0 {
			continue
		}
		law := make(conserved, n)
		law[free] = 1
		for col := range n {
			if pivotOf[col] > 0 {
				law[col] = -rows[pivotOf[col]-1][free]
			}
		}
		laws = append(laws, law)
	}
	return laws
}

// deviation returns how far the sums of y are from those of what was put in,
// relative to all of it.
func deviation(laws []conserved, y, in, taken []float64) float64 {
	worst := 0.0
	for _, l := range laws {
		sum, size := 0.0, 0.0
		for s, w := range l {
			sum += w * y[s]
			size += math.Abs(w * y[s])
			if s < len(in) {
				sum -= w * (in[s] - taken[s])
				size += math.Abs(w * in[s])
			}
		}
		if size > 0 {
			worst = math.Max(worst, math.Abs(sum)/size)
		}
	}
	return worst
}

// restore brings the sums of y back to those of what was put in, by the smallest
// change relative to each concentration. Between the ends of its steps the
// integrator keeps them to some 1e-12 only, where a fast exchange is fed.
func restore(laws []conserved, y, in, taken []float64) {
	m := len(laws)
	a := make([][]float64, m) // normal equations and right side
	for i, l := range laws {
		a[i] = make([]float64, m+1)
		for s, w := range l {
			a[i][m] += w * y[s]
			if s < len(in) {
				a[i][m] -= w * (in[s] - taken[s])
			}
			for j := range m {
				a[i][j] += w * laws[j][s] * math.Max(0, y[s])
			}
		}
	}
	for col := range m {
		p := a[col]
		if !(p[col] > 0) { // nothing there to change
			continue
		}
		for i := range m {
			if i == col || a[i][col] == 0 {
				continue
			}
			f := a[i][col] / p[col]
			for k := range a[i] {
				a[i][k] -= f * p[k]
			}
		}
	}
	change := make([]float64, len(y))
	for i, l := range laws {
		if d := a[i][i]; d > 0 {
			for s, w := range l {
				change[s] += w * a[i][m] / d
			}
		}
	}
	for s, c := range y {
		y[s] -= math.Max(0, c) * change[s]
	}
}
