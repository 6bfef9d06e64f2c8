// Package skeleton reads a molfile and lays its coordinates out as a skeletal
// formula. It gives plain geometry and knows nothing of figures.
//
// # What is read
//
// Connection tables of version V2000 and V3000, as the published CTfile formats
// describe them (Dalby et al., J. Chem. Inf. Comput. Sci. 32, 244 (1992)): one
// molecule, up to MaxAtoms atoms. Elements, D and T, R groups, short names of groups
// in place of an element (Ph, OMe, Boc, or an alias), charges, radicals, isotopes, stated
// valences; single, double, triple and aromatic bonds, dative (9) and hydrogen (10)
// bonds, wedges, wavy bonds, crossed double bonds, bonds to the middle of several
// atoms. What only a search query, a polymer or a reaction can hold is refused; what
// is read over without harm stands in Molecule.Notes.
//
// # Coordinates
//
// They are taken as they are: no atom is moved. One scale brings the median bond
// to its length; where labels need more room, all bonds grow together, up to three
// times. Atoms without places (all in one point) are refused. Depth below 5 % of the
// larger extent in the plane is dropped; more is refused, since a view of a
// body is no skeletal formula.
//
// # Hydrogens
//
// An atom with e outer electrons after its charge has a valence of e up to 4 and of 8 − e
// above; from the third period on P, S and their like may go up by two, and N may
// have five bonds. Missing bonds up to the next such valence are hydrogens, less
// one for a doublet and two for a singlet or triplet. Bonds to metals use up valence but
// never call for a higher one; dative and hydrogen bonds count nothing. Other elements,
// and short names, get none. A stated valence wins over all this.
//
// Carbon is lettered only where it has a charge, a radical, a mass or no neighbour,
// or where two equal bonds meet in a straight line.
//
// # Units
//
// Layout is in em of the label type; Molecule.Draw gives lengths in the unit of its
// size, x to the right, y down.
package skeleton
