package site

import (
	"errors"
	"fmt"
)

var (
	// ErrRefused matches every error that is a decision of this package and
	// not a failure of the machine.
	ErrRefused = errors.New("refused")
	// ErrBusy matches the refusal of a target that another publish holds.
	ErrBusy = errors.New("another publish is at work")
)

// refusal is an error for the user: what, why, and what to do.
type refusal struct {
	what, why, fix string
	busy           bool
	cause          error
}

func (r *refusal) Error() string { return fmt.Sprintf("%s: %s; %s", r.what, r.why, r.fix) }

func (r *refusal) Is(target error) bool {
	return target == ErrRefused || r.busy && target == ErrBusy
}

func (r *refusal) Unwrap() error { return r.cause }
