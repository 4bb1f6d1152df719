package harmonize

import (
	"errors"
	"strings"

	"platemeld/harmonize/tables"
)

// ErrProblems is what the error about unreadable input unwraps to.
var ErrProblems = errors.New("harmonize: the input cannot be merged as it is")

// Problem is one thing in the input that stands in the way of a merge.
type Problem struct {
	Source string       // the source's name in the plan
	Place  tables.Place // the cell, as far as it is known
	Err    error        // says where, what was read and what would be accepted
}

// Problems are all things found in the input of one plan, in the order of
// sources and rows. As an error it unwraps to ErrProblems.
type Problems []Problem

// Error lists every problem on a line of its own.
func (p Problems) Error() string {
	lines := make([]string, len(p))
	for i, problem := range p {
		lines[i] = problem.Err.Error()
	}
	return strings.Join(lines, "\n")
}

// Unwrap returns ErrProblems.
func (p Problems) Unwrap() error { return ErrProblems }
