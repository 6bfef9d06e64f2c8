package rate

import (
	"errors"
	"fmt"
)

// ErrDomain is matched, with errors.Is, by every error for a number outside the
// range in which a function means something.
var ErrDomain = errors.New("outside the possible range")

// DomainError says which number was outside its range.
type DomainError struct {
	What  string  // "temperature (K)"
	Value float64 // as given
	Fix   string  // what to give instead
}

func (e *DomainError) Error() string {
	return fmt.Sprintf("%s of %g is not possible; %s", e.What, e.Value, e.Fix)
}

// Unwrap returns ErrDomain.
func (e *DomainError) Unwrap() error { return ErrDomain }
