package course

import "saddlebook/kinetics"

// A Course is what a run did.
type Course struct {
	Method   string  // how it was computed, in words for the page
	End      float64 // s
	Ended    int     // the Until that ended it; -1: the programme's end
	Report   []Point // at Run.Report within the run, then the end
	Trace    []Point // for drawing; corners, doses, crossings and peaks are among them
	Pairs    []Pair  // by pair
	Lowest   float64 // the most negative concentration met, mol/L; 0: none
	Floor    float64 // mol/L; amounts near or below it have no digits to rely on
	Balance  float64 // the largest relative deviation of a conservation law
	Warmings []Warming
	Peaks    []Peak // by product, with Run.Peaks
	Pace     []Pace // at steps of the computation, with Run.Peaks
	Warnings []string

	net   *kinetics.Network // names and steps, for the heat
	whole []float64         // charge and all doses
	start []float64         // charge and what is dosed at once at the start
}

// A Warming is the state where a ramp to a higher temperature starts.
type Warming struct {
	T, From, To float64   // s; K
	C           []float64 // mol/L, by species
	Unreacted   float64   // share of the basis put in so far; NaN without one
	Left        []float64 // by species: what is left over what was put in so far; NaN where nothing was
}

// A Point is the state at one time.
type Point struct {
	T, Kelvin  float64
	C          []float64 // mol/L, by species
	Made       []float64 // mol/L, by species: what the steps made so far, net; below zero: used up
	Making     []float64 // mol/L/s: its slope; where something jumps, that after it
	Conversion float64   // of the basis; NaN without one
	Yields     []float64 // by product; NaN without a basis
	Shares     []float64 // by product, of their sum; NaN where none has formed
	Control    []float64 // by pair; NaN where there is no number: Pair says why
	Kinetic    []float64 // by pair: x of the kinetic limit
	Rest       []float64 // by pair: x at equilibrium at this temperature
}

// A Pair is two products that compete.
type Pair struct {
	A, B        int     // products
	Coincide    bool    // the limits differ by less than 0.02 throughout
	Unreachable string  // why equilibrium is not reachable; "" if it is
	Drain       Drain   // what makes it so
	Changeover  float64 // s, first crossing of control 0.5; NaN: none
	Even        float64 // s, first crossing of a ratio of 1; NaN: none
	// the temperatures at both, K; NaN: none
	ChangeoverKelvin, EvenKelvin float64
}

// A Drain is a step without return that keeps a product from equilibrium.
type Drain struct {
	Step        int // -1: none
	Takes, From int // the species it uses up, which reversible steps join with the product's species From; or From itself
}
