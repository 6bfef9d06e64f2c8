package firstorder

import "math"

// lnAdd returns ln(exp(a) + exp(b)).
func lnAdd(a, b float64) float64 {
	if a < b {
		a, b = b, a
	}
	if math.IsInf(b, -1) {
		return a
	}
	return a + math.Log1p(math.Exp(b-a))
}

// rest returns, in rows, where each state ends: the distribution at infinite time,
// from the logarithms of the rate constants, which may be beyond any number.
func rest(n int, ln []float64) []float64 {
	reach := closure(n, ln)
	// A state is in a closed set if all that it reaches leads back to it.
	set := make([]int, n) // the lowest state of its closed set; -1: passed through
	var passed, sets []int
	for i := range n {
		set[i] = i
		for j := n - 1; j >= 0; j-- {
			switch {
			case i == j || !reach[i*n+j]:
			case !reach[j*n+i]:
				set[i] = -1
			case set[i] >= 0:
				set[i] = min(set[i], j)
			}
		}
		switch set[i] {
		case -1:
			passed = append(passed, i)
		case i:
			sets = append(sets, i)
		}
	}
	out := make([]float64, n*n)
	within := make([][]float64, len(sets)) // ln of the shares within each closed set
	for s, first := range sets {
		var members []int
		for i := range n {
			if set[i] == first {
				members = append(members, i)
			}
		}
		within[s] = make([]float64, n)
		for i := range n {
			within[s][i] = math.Inf(-1)
		}
		for k, x := range steady(n, ln, members) {
			within[s][members[k]] = x
		}
		for _, i := range members {
			for _, j := range members {
				out[i*n+j] = math.Exp(within[s][j])
			}
		}
	}
	ends := absorbed(n, ln, passed, sets, set)
	for k, i := range passed {
		for s := range sets {
			for j := range n {
				out[i*n+j] += math.Exp(ends[k][s] + within[s][j])
			}
		}
	}
	for i := range n {
		tidy(out[i*n : (i+1)*n])
	}
	return out
}

func closure(n int, ln []float64) []bool {
	reach := make([]bool, n*n)
	for i, x := range ln {
		reach[i] = !math.IsInf(x, -1)
	}
	for k := range n {
		for i := range n {
			if !reach[i*n+k] {
				continue
			}
			for j := range n {
				reach[i*n+j] = reach[i*n+j] || reach[k*n+j]
			}
		}
	}
	return reach
}

// steady returns ln of the steady distribution of a closed set of states, which all
// reach one another: the states are taken out from the last to the second, then
// put back.
func steady(n int, ln []float64, members []int) []float64 {
	m := len(members)
	q := make([][]float64, m)
	for a, i := range members {
		q[a] = make([]float64, m)
		for b, j := range members {
			q[a][b] = ln[i*n+j]
		}
	}
	for k := m - 1; k > 0; k-- {
		out := math.Inf(-1)
		for j := range k {
			out = lnAdd(out, q[k][j])
		}
		for i := range k {
			q[i][k] -= out
			for j := range k {
				if i != j {
					q[i][j] = lnAdd(q[i][j], q[i][k]+q[k][j])
				}
			}
		}
	}
	share, all := make([]float64, m), 0.0
	for k := 1; k < m; k++ {
		share[k] = math.Inf(-1)
		for i := range k {
			share[k] = lnAdd(share[k], share[i]+q[i][k])
		}
		all = lnAdd(all, share[k])
	}
	for k := range share {
		share[k] -= all
	}
	return share
}

// absorbed returns, for each state that is passed through, ln of the shares in
// which it ends in the closed sets.
func absorbed(n int, ln []float64, passed, sets, set []int) [][]float64 {
	m := len(passed)
	q := make([][]float64, m) // ln of the rates to other such states, then to the sets
	for a, i := range passed {
		q[a] = make([]float64, m+len(sets))
		for b := range q[a] {
			q[a][b] = math.Inf(-1)
		}
		for b, j := range passed {
			q[a][b] = ln[i*n+j]
		}
		for j := range n {
			for s, first := range sets {
				if set[j] == first {
					q[a][m+s] = lnAdd(q[a][m+s], ln[i*n+j])
				}
			}
		}
	}
	left := func(j, k int) bool { return j < k || j >= m }
	for k := m - 1; k >= 0; k-- {
		out := math.Inf(-1)
		for j, x := range q[k] {
			if left(j, k) {
				out = lnAdd(out, x)
			}
		}
		for j := range q[k] {
			if left(j, k) {
				q[k][j] -= out
			}
		}
		for i := range k {
			for j, x := range q[k] {
				// From i to k and back to i is no change: it is dropped, not subtracted.
				if left(j, k) && i != j {
					q[i][j] = lnAdd(q[i][j], q[i][k]+x)
				}
			}
		}
	}
	ends := make([][]float64, m)
	for k := range m {
		ends[k] = q[k][m:]
		for j := range k {
			for s := range sets {
				ends[k][s] = lnAdd(ends[k][s], q[k][j]+ends[j][s])
			}
		}
	}
	return ends
}
