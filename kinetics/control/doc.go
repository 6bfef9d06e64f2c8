// Package control tells what decides the rate of a mechanism at one composition
// and one temperature: the degree of rate control of every state, reaction
// orders, the apparent activation energy, the resting state, and for a catalytic
// cycle its energetic span beside the exact turnover.
//
// # The point
//
// Every species is held at a stated concentration or free. Free species are at
// their steady state, under the conservation laws that hold among them, with
// stated totals (the total catalyst). With no free species the composition is
// taken as it stands, such as that of a run at some time.
//
// # Units
//
// Energies are J/mol, temperatures K, concentrations mol/L, rates mol/L/s,
// turnovers 1/s; orders, degrees and shares are plain numbers.
//
// # Mathematics
//
// Steady state. Unknowns are x = ln c of the free species and the independent
// net rates ξ of the steps; all net rates v = K ξ, with K a basis of the fluxes
// that leave every free species unchanged. Each step gives one equation between
// its forward rate exp(a), its backward rate exp(b) and its net rate,
//
//	(a − b)/2 = asinh(v exp(−(a + b)/2)/2),
//
// which is v = exp(a) − exp(b) without the difference: a step at equilibrium and
// one that never returns are the same formula, and rates 30 orders of magnitude
// apart keep their digits. Each conservation law gives one more. Independent net
// rates are chosen small, and laws are solved for abundant species, so that
// neither is a difference of large numbers. Newton's method starts from the
// state reduction of the network where it is of first order in the free species
// (exact, without subtraction), else from an integration that has come to rest.
//
// Degrees. X = ∂ ln r/∂(−G/RT) at fixed concentrations, totals and other
// energies, by differentiating the equations above (one adjoint solution); how
// rate constants answer to an energy is asked of Mechanism.Moved, so that any
// rate law of a step will do: a stated rate constant counts as a transition state
// that stays where it is when a species is moved. Factors for a shift of 1 kcal/mol are the quotient
// of two full solutions and no extrapolation. Over transition states X sums to 1
// where the rate is of first order in all rate constants together.
//
// Orders are ∂ ln r/∂ ln c. The apparent activation energy is Arrhenius' one,
// Ea = −R d ln r/d(1/T) = R T² d ln r/dT at fixed concentrations.
//
// Catalytic cycle. Levels are unrolled over one turn from the catalyst; beside
// each stand the reagents not yet used and the products already released, each
// at G + RT ln c. Transition states stand where their rate constants put them,
// degeneracy, transmission and stated rates included. The span of a pair is
// T − I where the transition state follows the intermediate and T − I + ΔG′
// where it precedes it, ΔG′ being the free energy of one turn at these
// concentrations. States off the cycle take the position of the state they
// branch from. A pair across a step without return has no span: nothing comes
// back over it. The turnover of a cycle is
//
//	(kB T/h) (1 − exp(ΔG′/RT))/Σ exp(span/RT)
//
// over all pairs, and the largest span alone gives the approximation
// (kB T/h) exp(−span/RT). A catalyst that joins with itself, or a network with
// more than one cycle, has the full steady state only.
//
// # Errors
//
// What an author can mend is a *PointError: it matches ErrNotStated,
// ErrNoSteadyState, ErrNoRate or ErrCycle. Errors of Mechanism.At pass through.
// A panic means a fault in the calling code: a length or a species number that
// does not fit the mechanism.
//
// # Limits
//
// Ideal solution, well mixed. Where several steady states exist, the one is
// found that the stated totals, charged as they are named, come to rest at.
//
// # Sources
//
// Page numbers and DOIs are from memory, unverified.
//
//   - degree of rate control: Campbell, J. Catal. 204, 520 (2001), doi:10.1006/jcat.2001.3396;
//     of intermediates: Stegelmann, Andreasen, Campbell, J. Am. Chem. Soc. 131, 8077 (2009), doi:10.1021/ja9000097
//   - energetic span, turnover control: Kozuch and Shaik, Acc. Chem. Res. 44, 101 (2011), doi:10.1021/ar1000956
//   - state reduction: Grassmann, Taksar, Heyman, Oper. Res. 33, 1107 (1985), doi:10.1287/opre.33.5.1107
package control
