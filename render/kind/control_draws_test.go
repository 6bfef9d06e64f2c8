package kind

import "testing"

// Draws of a large mechanism leave out how every state decides.
func TestLarge(t *testing.T) {
	for _, tt := range []struct {
		states, temperatures int
		want                 bool
	}{{8, 1, false}, {30, 1, false}, {30, 3, true}, {60, 1, true}} {
		if got := large(tt.states, tt.temperatures); got != tt.want {
			t.Errorf("%d states at %d temperatures: %t", tt.states, tt.temperatures, got)
		}
	}
}
