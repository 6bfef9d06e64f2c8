// Package firstorder gives the exact time course of a network of first-order
// exchanges at constant temperature, at any time and without steps.
//
// # Mathematics
//
// Amounts follow c' = cQ, with Q[i][j] the rate constant from state i to state j
// and Q[i][i] minus all that leaves i, so that c(t) = c(0) exp(Qt). States that no
// exchange connects are solved apart.
//
// The matrices P = exp(Q·2ᵏ) are made once, for every k from where 2ᵏ is short
// against the fastest rate to where P no longer changes. A time is a sum of such
// powers of two, so that c(t) takes one product of a vector and a matrix for each
// 1 in the binary digits of t, and a short series for what is left below.
//
// The first P is the Taylor series of exp((Q + a)h), a the largest rate out of a
// state; each next one is the square of the last. After each of them every row is
// divided by its sum, which is 1. No number is ever negative and none is
// subtracted, so there is no cancellation: each P has every entry to a few
// roundings per squaring, and the small ones as well as the large. Without the
// division an error would double with every squaring; with it, what rounding does
// to the large entries of a row cannot reach the small ones, which are the slow
// rates. This is the sense of state reduction without subtraction (Grassmann,
// Taksar, Heyman), carried to finite times.
//
// A sum over eigenvalues and eigenvectors is not used, although detailed balance
// would allow a symmetric one. Its terms have both signs: what forms over m steps
// grows like tᵐ, and at short times comes out as the rounding of terms as large as
// the charge. Nor would it cover steps without return, where eigenvectors can
// coincide.
//
// The rest at t = +Inf is found apart, by state reduction with logarithms: the
// shares in which the states that are passed through end in each closed set, times
// the steady distribution within it.
//
// # Errors of the result
//
// Every amount above 1e-260 of the charge is right to 2e-12 of itself or better in
// the tests, with rates from 1e-12 to 1e13 1/s side by side and times up to 1e15 s,
// against numbers of 320 bits; 1e-10 is promised. Amounts below that lose digits and
// then are 0. None is negative. The sum over connected states is kept to rounding.
// An error ε of a rate constant, such as ln k is rounded with, appears in the
// amounts a few times, and λtε times where all that is left has decayed as exp(−λt).
//
// A way that takes longer than 1e290 times the fastest step counts at t = +Inf
// alone.
//
// # Cost
//
// New takes n³ products for each squaring, some 90 of them for 25 decades; At at
// most 53 n². Networks up to some 30 states, asked for 60 times, are quicker here
// than with the integrator of package stiff at a tolerance of 1e-9 (BenchmarkCourse);
// MaxStates is where it ends.
//
// # Units
//
// Rate constants are 1/s, as natural logarithms, and times s. Amounts may have any
// one unit.
//
// # Errors
//
// New returns ErrDomain for an impossible network. A panic means a fault in the
// calling code: lengths that do not fit, a time below zero.
//
// # Sources
//
// From memory, unverified.
//
//   - Grassmann, Taksar and Heyman, Oper. Res. 33, 1107 (1985): state reduction
//   - O'Cinneide, Numer. Math. 65, 109 (1993): entries of a stationary distribution
//     are as well known as the rates, whatever their spread
//   - Jensen, Skand. Aktuarietidskr. 36, 87 (1953): the shift by a, uniformisation
//   - Moler and Van Loan, SIAM Rev. 45, 3 (2003): scaling and squaring
//   - Bateman, Proc. Camb. Philos. Soc. 15, 423 (1910): the tests
package firstorder
