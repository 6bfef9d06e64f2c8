// Package stiff integrates mass-action systems whose rates lie many decades
// apart. It knows species by number only: names, energies and units belong to
// the caller.
//
// # Mathematics
//
// Concentrations y follow y' = N v(y, t) + feed - out*y, with N the net
// stoichiometry and v the rate of each reaction, k(t) times the product of its
// reactants. Two reactions that undo each other are one channel, whose net rate
// is formed before anything is added up.
//
// Steps are those of Rodas5P, a linearly implicit (Rosenbrock) method of order
// 5 with eight stages, one factorisation of 1/(gamma h) - J a step, an error
// estimate of order 4 and dense output of order 5. It is L-stable and
// stiffly accurate. J comes from the stoichiometry; the derivative in time of
// rate constants that change enters as the method asks, and the run restarts at
// every corner of a programme, end of a feed, removal or jump. The error of
// every component, and of every sensitivity, is held below
// ATol + RTol*|y| in each step. The next step follows from the last two errors.
//
// Large systems. Where a factorisation takes at least about five times as long
// as a solution with its factors (from some hundred species of a sparse
// network, some fifteen of a full one), and RTol is 1e-4 or finer, steps are
// those of the numerical differentiation formulas of orders 1 to 5: about two
// right sides and solutions a step, and a factorisation only where the length
// of the step changes. They work at 0.03 of the tolerance, so that both methods
// end about as near to the solution. The Rosenbrock method serves runs with
// events or sensitivities, and takes over, to the end of the piece, where step
// after step fails. Stats.Multistep tells which steps were whose.
//
// Linear algebra. Species are put in an order of little fill once; pivots stay
// on the diagonal of a fixed sparse pattern, and a factorisation only multiplies
// and subtracts. A factorisation whose pivots turn out too small (autocatalysis)
// is done again in a full matrix with row exchange.
//
// Fast exchange. When the step is long against a fast exchange, more digits
// cancel in the pivots of 1/(gamma h) - J than the tolerance allows: its slow
// part is lost in rounding, and mass and slow rates with it. The rows are then
// summed, in the whole numbers of the stoichiometry and before any rate is
// multiplied in, so that each fast channel stands in one row and the other rows
// hold slow rates only: elimination of N in the order of speed. Rate constants
// from 1e-12 to 1e13 1/s in one system cost no digits.
//
// Conservation. Every linear sum that no reaction changes (found by eliminating
// N) is kept by the method up to rounding. What rounding leaves is taken out
// after each step by the smallest change, relative to each concentration, that
// restores all sums; with feeds, the sums grow by exactly what is fed. A step
// that breaks a sum by more than RTol, and the absolute tolerances of its species,
// is taken again, shorter.
//
// Concentrations below zero. A step that leaves one below -ATol (and below
// rounding of the largest) is rejected and taken again, shorter. Smaller ones
// are kept and reported as they are: to cut them off would add mass. The most
// negative one of a run is in Stats.
//
// Sensitivities follow each stage with the same factorisation and with the
// derivative of J, so that dy/dp is the derivative of the numerical solution.
//
// Events are looked for on the dense output, in four parts of every step, and
// then reached by steps of the method that end there (Newton), so that the
// state reported is as accurate as any other and G is zero to rounding.
//
// # Usage
//
// NewSystem checks and compiles reactions. Solve runs a Problem and returns the
// state at given times. For many runs, or to look at every step, keep a Solver
// and give Run a visitor. Steps allocate nothing (a new set of fast channels, a
// few times in a run, does); equal input gives equal bytes.
//
// Choose ATol for the smallest concentration that matters: below it, digits are
// not controlled. The error at a given time is often far smaller than RTol,
// because the system forgets; it can be larger where errors grow (ignition,
// autocatalysis).
//
// # Limits
//
// Where an exchange is fast, the amounts in it come from sums: they are good to
// rounding of the largest member of the sum. A catalyst at 1e-11 of its substrate
// so has six digits, at 1e-6 all that the tolerance asks for.
//
// Well mixed, constant volume, mass action in whole orders up to MaxOrder; a
// reaction may not use up what is not in its rate. Two crossings of an event
// within a quarter of a step cancel unseen; an event that only touches zero, or
// stands at zero from the start, is not reported. Beyond a few hundred species,
// systems that need row exchange in every step are slow: it is done in a full
// matrix. Below about RTol 1e-10 the stiff parts of a solution converge with
// order 3 to 4 by the Rosenbrock method, and steps become many.
//
// # Errors
//
// ErrInput: the caller can mend it, and the message says how. ErrStuck, as
// StuckError: no step could be taken, or the limit of steps was reached; the
// error has the time reached, the number of steps and the fastest reaction, and
// the solver the last state within tolerance. Also the error of the context.
//
// # References
//
//   - Steinebach, BIT Numer. Math. 63, 27 (2023): Rodas5P.
//   - Hairer and Wanner, Solving Ordinary Differential Equations II, 2nd ed.
//     (1996), chapters IV.7 and IV.8: Rosenbrock methods, control of the step.
//   - Shampine and Reichelt, SIAM J. Sci. Comput. 18, 1 (1997): numerical
//     differentiation formulas.
//   - Markowitz, Management Sci. 3, 255 (1957), and Tinney and Walker, Proc. IEEE
//     55, 1801 (1967): order of elimination.
//   - Mazzia and Magherini, Test Set for Initial Value Problem Solvers, release
//     2.4 (2008): test problems.
package stiff
