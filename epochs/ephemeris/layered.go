package ephemeris

import "errors"

// Source is anything that gives states: *Chebyshev and *SPK do.
type Source interface {
	At(day, fraction float64) (State, error)
}

// Layered asks its sources in their order and takes the first that covers the
// instant.
type Layered []Source

// At returns the state from the first source that covers an instant of TDB, a
// Julian date in two parts. When none does the error wraps ErrRange; any other
// error of a source is returned at once.
func (l Layered) At(day, fraction float64) (State, error) {
	err := ErrRange
	for _, source := range l {
		var state State
		if state, err = source.At(day, fraction); err == nil || !errors.Is(err, ErrRange) {
			return state, err
		}
	}
	return State{}, err
}
