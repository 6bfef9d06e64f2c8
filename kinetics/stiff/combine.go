package stiff

// The sums over earlier stages. The u of all stages of one component lie side
// by side, maxStages apart from the next component, so that one pass over the
// components stores the newest u (in b) and forms
//
//	arg = y + sum a_j u_j,  acc = sum c_j u_j
//
// with c already divided by the step. One function for each number of stages:
// the loop over stages is what costs, and the compiler does not unroll it.
func combine(m int, b, y, arg, acc, u []float64, a, c *[maxStages]float64, follows bool) {
	y, arg, acc = y[:len(b)], arg[:len(b)], acc[:len(b)]
	u = u[:maxStages*len(b)]
	switch m {
	case 1:
		a0, c0 := a[0], c[0]
		for i, x := range b {
			u[maxStages*i] = x
			arg[i] = y[i] + a0*x
			acc[i] = c0 * x
		}
	case 2:
		a0, a1, c0, c1 := a[0], a[1], c[0], c[1]
		for i, x := range b {
			p := (*[maxStages]float64)(u[maxStages*i:])
			p[1] = x
			arg[i] = y[i] + a0*p[0] + a1*x
			acc[i] = c0*p[0] + c1*x
		}
	case 3:
		a0, a1, a2, c0, c1, c2 := a[0], a[1], a[2], c[0], c[1], c[2]
		for i, x := range b {
			p := (*[maxStages]float64)(u[maxStages*i:])
			p[2] = x
			arg[i] = y[i] + (a0*p[0] + a1*p[1]) + a2*x
			acc[i] = (c0*p[0] + c1*p[1]) + c2*x
		}
	case 4:
		a0, a1, a2, a3, c0, c1, c2, c3 := a[0], a[1], a[2], a[3], c[0], c[1], c[2], c[3]
		for i, x := range b {
			p := (*[maxStages]float64)(u[maxStages*i:])
			p[3] = x
			arg[i] = y[i] + ((a0*p[0] + a1*p[1]) + (a2*p[2] + a3*x))
			acc[i] = (c0*p[0] + c1*p[1]) + (c2*p[2] + c3*x)
		}
	case 5:
		a0, a1, a2, a3, a4 := a[0], a[1], a[2], a[3], a[4]
		c0, c1, c2, c3, c4 := c[0], c[1], c[2], c[3], c[4]
		if follows {
			for i, x := range b {
				p := (*[maxStages]float64)(u[maxStages*i:])
				p[4] = x
				arg[i] += x
				acc[i] = (c0*p[0] + c1*p[1]) + (c2*p[2] + c3*p[3]) + c4*x
			}
			return
		}
		for i, x := range b {
			p := (*[maxStages]float64)(u[maxStages*i:])
			p[4] = x
			arg[i] = y[i] + ((a0*p[0] + a1*p[1]) + (a2*p[2] + a3*p[3]) + a4*x)
			acc[i] = (c0*p[0] + c1*p[1]) + (c2*p[2] + c3*p[3]) + c4*x
		}
	case 6:
		c0, c1, c2, c3, c4, c5 := c[0], c[1], c[2], c[3], c[4], c[5]
		for i, x := range b {
			p := (*[maxStages]float64)(u[maxStages*i:])
			p[5] = x
			arg[i] += x
			acc[i] = (c0*p[0] + c1*p[1]) + (c2*p[2] + c3*p[3]) + (c4*p[4] + c5*x)
		}
	case 7:
		c0, c1, c2, c3, c4, c5, c6 := c[0], c[1], c[2], c[3], c[4], c[5], c[6]
		for i, x := range b {
			p := (*[maxStages]float64)(u[maxStages*i:])
			p[6] = x
			arg[i] += x
			acc[i] = ((c0*p[0] + c1*p[1]) + (c2*p[2] + c3*p[3])) + ((c4*p[4] + c5*p[5]) + c6*x)
		}
	}
}
