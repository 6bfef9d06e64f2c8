// Package course computes what a run does over time: concentrations, conversion,
// yields and ratios through holds and ramps of temperature, doses and removals,
// with the kinetic limit and the equilibrium beside them, and the heat released.
//
// # Units
//
// Concentrations are mol/L in a constant final volume, times s, temperatures K,
// energies J/mol, heat J/L, shares and yields fractions.
//
// # Mathematics
//
// Mass action: dc/dt = N·v + feeds − removals, with v the rate of every step at
// T(t). Rate constants are those of Mechanism.At: at a held temperature as they
// are, in a ramp from Chebyshev series of ln k in 1/T. A series is taken only if
// its last terms have come down to the rounding of ln k; else the range is cut in
// two, and at last constants are computed at every call. Where constants have a
// kink (a sampled transition state that is raised to its side, a step at the
// diffusion limit that changes its downhill direction), the integration restarts.
//
// The run is cut where anything begins, ends or jumps. A part at constant
// temperature in which every step is of first order is solved exactly (package
// firstorder), up to 30 species, beyond which the integrator is quicker; all else
// is integrated (package stiff). Course.Method says which and why. Species
// that no step changes, such as a catalyst written on both sides, are taken into
// the constants; steps for which something is needed that never forms are left
// out.
//
// The kinetic limit is a second network with the same constants, charge, doses
// and removals, without the directions that consume a listed product (negative
// net coefficient). Both are solved together. With x = A/(A+B) of a pair,
//
//	control = (x − x_kin)/(x_eq − x_kin)
//
// where x_eq is at equilibrium at T(t), over the reversible steps, of the
// composition at t. It is printed as found, outside 0 to 1 too. There is no number
// where the two limits lie within 0.02 of each other, where neither product has
// formed, or where a step without return drains a product (Pair.Unreachable).
// The changeover is the first crossing of 0.5. Crossings are narrowed to
// neighbouring numbers on the dense output; a change of sign within rounding of
// zero is none. Ends (Until) are reached by a step of the method itself.
//
// # Definitions
//
// What has not been added is not charged: conversion is 1 − left/charged and yield
// is amount times basis units over charged, both with the charge and the doses
// that came so far. What is removed counts as converted, and not as yield: the
// run warns if that is the basis.
//
// At the time of a jump a result is the state after it, at the temperature of the
// leg that ends there. Points for drawing hold both states.
//
// An end is met where its measure crosses its value, from either side, also by a
// jump. A measure that starts at its value has to leave it first.
//
// The heat released is that of what the steps have made, from enthalpies, not
// from rates times time. The heat left is a linear programme over extents, the
// most that the listed steps can give, wherever equilibrium lies; doses that are
// to come do not count in it (Heat.Dosed tells them apart).
//
// A peak of a product is where its slope turns from above zero to below, or the
// start or end of a part. The highest heat rate is one over the middles and ends
// of the steps of the computation; what comes within a millionth of the programme
// after a part of the run begins does not count.
//
// # Accuracy
//
// The relative tolerance of each step is Run.RTol, the absolute one 1e-12 of it
// and of the largest amount charged (Course.Floor). On the run of the example all
// results were within a tenth of the tolerance from 1e-6 to 1e-11; where a
// concentration falls as exp(−x), its error grows with x. Shares are given once
// the products sum to 1e6 times the floor.
//
// Every sum that no step changes is kept: Course.Balance is the largest relative
// deviation at the points given, doses and removals accounted for. Between the
// ends of steps the dense output keeps it to some 1e-12 only, and points there are
// brought back to the sums by the smallest relative change. Concentrations below
// zero by no more than rounding are kept as they are and the most negative one is
// in Course.Lowest; where a part of the run ends they are set to zero, which adds
// no more than that.
//
// # Errors
//
// ErrRun: the run makes no sense as stated. kinetics.Complaints: the mechanism has
// no constants at a temperature of the programme. stiff.ErrStuck: the integration
// could not go on; the message has the time, the temperature and the fastest
// species. ErrHeat: enthalpies that contradict each other. The error of the
// context. A panic means a fault in the calling code.
//
// # Limits
//
// Constant volume, well mixed, no heat balance back on the temperature. Crossings
// are looked for twice in a step of the integration and four times in each
// doubling of the time since the start of an exact part: two within one interval
// cancel unseen. Enthalpies are constant over temperature. Not a safety
// assessment: listed steps only.
//
// # Sources
//
// From memory, unverified.
//
//   - Rosenbrock method, dense output: see package stiff
//   - exponential of a rate matrix: see package firstorder
//   - Chebyshev series at the extrema: Trefethen, Approximation Theory and
//     Approximation Practice (2013), chapters 2 and 3
//   - simplex rule: Bland, Math. Oper. Res. 2, 103 (1977)
//   - heat accumulation and adiabatic rise: Stoessel, Thermal Safety of Chemical
//     Processes (2008), chapter 2
package course
