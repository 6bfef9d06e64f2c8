package course

// A Run is one set of conditions. Times are s, temperatures K, concentrations
// mol/L; species are numbered as in the mechanism. Volume is constant: what is
// dosed adds its amount to the concentration in the final volume.
type Run struct {
	Charge    []float64 // at time 0, by species
	Programme []Leg
	Doses     []Dose
	Removals  []Removal
	Until     []Until // the first that is met ends the run

	Basis    int       // the species that yields and conversion refer to; -1: none
	PerBasis []float64 // by product: basis units in one molecule of it; nil: 1 each
	Products []Product
	Pairs    [][2]int // of Products, whose ratio and control are wanted; nil: every pair

	Report []float64 // s, ascending: where results are wanted; times after the end are left out
	Trace  int       // how many points for drawing besides; 0: none
	Peaks  bool      // whether Course.Peaks and Course.Pace are wanted

	RTol float64 // 0: 1e-9
}

// A Leg is a stretch of the programme: a hold at To, or a ramp from where the
// last leg ended to To.
type Leg struct {
	Ramp  bool    // the first leg is a hold
	To    float64 // K
	Lasts float64 // s, > 0
}

// A Dose adds Amount (mol/L) of a species from From on: at once if Lasts is 0,
// else evenly.
type Dose struct {
	Species     int
	Amount      float64
	From, Lasts float64
}

// A Removal takes a species away: at the instant From, all but the fraction
// Leaves, if K is 0; else by first order with K (1/s) from From to To.
type Removal struct {
	Species  int
	From, To float64
	Leaves   float64
	K        float64
}

// An Until ends the run when Of reaches Value.
type Until struct {
	Of    Measure
	Index int // of a species, product or pair, as Of needs
	Value float64
}

// A Measure is what an Until watches.
type Measure int

// The measures.
const (
	Conversion Measure = iota // of the basis, a fraction
	Amount                    // of species Index, mol/L
	Yield                     // of product Index, a fraction
	Ratio                     // of pair Index
)

// A Product is a sum of species under one name.
type Product struct {
	Name    string
	Members []int
}
