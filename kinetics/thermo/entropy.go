package thermo

// PlusEntropy returns the energy with its entropy raised by ds, in J/mol/K: it
// falls by T·ds at every temperature. An energy that is not given by an
// enthalpy and an entropy comes back as it is.
func (e Energy) PlusEntropy(ds float64) Energy {
	if e.Heat == nil {
		return e
	}
	h := *e.Heat
	h.S += ds
	e.Heat = &h
	return e
}
