package tables

import (
	"errors"
	"fmt"
	"strings"
)

// The kinds of error about a table; a *CellError unwraps to one of them.
var (
	ErrNoColumn   = errors.New("tables: no such column")
	ErrNoSheet    = errors.New("tables: no such sheet")
	ErrUnreadable = errors.New("tables: unreadable")
	ErrTooLarge   = errors.New("tables: larger than a table of velocities can be")
)

// Place says where a cell stands, as a reader of the file would say it. Parts
// that are not known are empty or 0.
type Place struct {
	File, Sheet string
	Row         int    // from 1
	Column      string // such as `C "Vel."`
}

// String returns the place in words.
func (p Place) String() string {
	parts := []string{p.File}
	if p.Sheet != "" {
		parts = append(parts, fmt.Sprintf("sheet %q", p.Sheet))
	}
	if p.Row > 0 {
		parts = append(parts, fmt.Sprintf("row %d", p.Row))
	}
	if p.Column != "" {
		parts = append(parts, "column "+p.Column)
	}
	return strings.Join(parts, ", ")
}

// CellError is an error about one place of a table.
type CellError struct {
	Place
	Text     string // what was read there
	Problem  string
	Accepted string // what would be accepted
	Kind     error  // one of the sentinels
}

// Error says where, what was read, what is wrong and what would be accepted.
func (e *CellError) Error() string {
	text := e.Place.String()
	if e.Text != "" {
		text += fmt.Sprintf(", reads %q", e.Text)
	}
	text += ": " + e.Problem
	if e.Accepted != "" {
		text += "; accepted: " + e.Accepted
	}
	return text
}

// Unwrap returns the kind of error.
func (e *CellError) Unwrap() error { return e.Kind }
