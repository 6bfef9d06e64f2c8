// Package kind holds the block kinds of a notebook: the registry, the shared
// language of keys and results, and one self-registering file per kind.
//
// A kind says which fields its block has, which blocks it depends on, what it
// computes, which results that makes, how they are presented and how they
// answer to shifted energies. It knows no places and no HTML: study joins the
// places, paper makes the HTML.
package kind
