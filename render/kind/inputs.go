package kind

import (
	"errors"
	"fmt"

	"saddlebook/kinetics"
	"saddlebook/kinetics/spread"
)

// Inputs is all that a block may see of the rest of the notebook. Its
// functions answer only for what the block named in Refs and Files.
type Inputs struct {
	Value func(target string) (any, error)     // what the named block computed
	Read  func(reading string) (Result, error) // a result that the block named
	Draws func(reading string) (Draws, error)  // how that result answers to the stated errors
	File  func(name string) ([]byte, error)    // a file beside the note
}

// Draws is how one result answers to the stated errors of the energies behind
// it: one sampling or two, or none when no energy has an error.
type Draws struct {
	Cases []Draw
	None  string   // why there is no draw, where it is not that no energy has an error
	Exact []string // the states without an error that the result answers to

	Fast   []string // the steps that its mechanism keeps fast
	Slowed float64  // what the result comes to when these are ten times slower; NaN where that gives no number
}

// A Draw is one sampling of one result.
type Draw struct {
	Case   spread.Case
	Values []float64 // base quantities; NaN where a draw gave no number
	Raised float64   // the share of draws in which a transition state was raised to its higher side
}

// ErrNotComputed says that a block behind this one failed, and has its own
// diagnostic: nothing more is to be said here.
var ErrNotComputed = errors.New("a block that this one needs was not computed")

// Mechanism returns the mechanism that the named block gives.
func (in Inputs) Mechanism(target string) (*kinetics.Mechanism, error) {
	v, err := in.Value(target)
	if err != nil {
		return nil, err
	}
	m, ok := v.(modeller)
	if !ok {
		return nil, fmt.Errorf("block %q gives no mechanism", target)
	}
	return m.Mechanism(), nil
}
