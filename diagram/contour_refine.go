package diagram

import "math"

// refined is f on a grid whose places are at most step apart, or most a tenth of
// what they were. It passes through all values of f and has no highest or lowest
// place that f has not: along both axes in turn by the monotone cubic of Fritsch
// and Butland (SIAM J. Sci. Stat. Comput. 5, 300, 1984).
func (f field) refined(step float64) field {
	const most = 10.0
	denser := func(at []float64) (out []float64, first []int) {
		for i, x := range at {
			if i > 0 {
				n := math.Max(1, math.Min(most, math.Ceil(math.Abs(x-at[i-1])/step)))
				for k := 1.0; k < n; k++ {
					out = append(out, at[i-1]+(x-at[i-1])*k/n)
				}
			}
			first = append(first, len(out))
			out = append(out, x)
		}
		return out, first
	}
	g := field{}
	var firstX, firstY []int
	g.xs, firstX = denser(f.xs)
	g.ys, firstY = denser(f.ys)
	rows := make([][]float64, len(f.ys))
	for i, row := range f.at {
		rows[i] = cubic(f.xs, row, g.xs, firstX)
	}
	g.at = make([][]float64, len(g.ys))
	for i := range g.at {
		g.at[i] = make([]float64, len(g.xs))
	}
	column := make([]float64, len(f.ys))
	for k := range g.xs {
		for i := range rows {
			column[i] = rows[i][k]
		}
		for i, v := range cubic(f.ys, column, g.ys, firstY) {
			g.at[i][k] = v
		}
	}
	return g
}

// cubic gives the values at the places to, of which first[i] is the i-th of at.
// Beside a NaN all are NaN.
func cubic(at, values, to []float64, first []int) []float64 {
	n := len(at)
	slope := func(i int) float64 { return (values[i+1] - values[i]) / (at[i+1] - at[i]) }
	bend := make([]float64, n) // the derivative at each
	for i := range bend {
		switch {
		case i == 0:
			bend[i] = slope(0)
		case i == n-1:
			bend[i] = slope(n - 2)
		default:
			a, b := slope(i-1), slope(i)
			switch {
			case math.IsNaN(a):
				bend[i] = b
			case math.IsNaN(b):
				bend[i] = a
			case a*b > 0:
				h, k := at[i]-at[i-1], at[i+1]-at[i]
				bend[i] = 3 * (h + k) / ((2*k+h)/a + (k+2*h)/b)
			}
		}
	}
	out := make([]float64, len(to))
	for i := 0; i+1 < n; i++ {
		h := at[i+1] - at[i]
		low, high := math.Min(values[i], values[i+1]), math.Max(values[i], values[i+1])
		for k := first[i]; k < first[i+1]; k++ {
			t := (to[k] - at[i]) / h
			v := values[i]*(1+2*t)*(1-t)*(1-t) + values[i+1]*t*t*(3-2*t) + h*t*(1-t)*(bend[i]*(1-t)-bend[i+1]*t)
			out[k] = math.Max(low, math.Min(high, v))
			if k == first[i] {
				out[k] = values[i]
			}
		}
	}
	out[len(out)-1] = values[n-1]
	return out
}
