//go:build !linux

package site

// exchange is not to be had: two renames do it.
func exchange(_, _ string) error { return errNoExchange }

// settle does nothing: forcing each file by itself would cost more than the
// publish, and the next publish mends what a power cut damages.
func settle(string) error { return nil }

// apart leaves the question to the rename itself.
func apart(_, _ string) (bool, error) { return false, nil }
