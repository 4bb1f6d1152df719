package plan

import (
	"errors"
	"fmt"
	"regexp"
	"sort"
	"strconv"
	"strings"
)

// ErrPlan is what every error about a plan's content unwraps to.
var ErrPlan = errors.New("plan: not usable")

// Fault is one thing wrong with a plan.
type Fault struct {
	Line int    // counted from 1
	Key  string // such as "source[1].time.form", numbers from 0
	Text string // what is wrong, and what would be accepted
}

// Faults are all things found wrong with one plan, in the order of its lines.
type Faults struct {
	Path string
	List []Fault
}

// Error lists every fault on a line of its own.
func (f *Faults) Error() string {
	lines := make([]string, len(f.List))
	for i, fault := range f.List {
		lines[i] = fmt.Sprintf("%s, line %d, %s: %s", f.Path, fault.Line, countedFromOne(fault.Key), fault.Text)
	}
	return strings.Join(lines, "\n")
}

var numberInKey = regexp.MustCompile(`\[\d+\]`)

// countedFromOne writes a key as a person counts: "source[1].time" is the time
// of source 2.
func countedFromOne(key string) string {
	return numberInKey.ReplaceAllStringFunc(key, func(number string) string {
		n, err := strconv.Atoi(strings.Trim(number, "[]"))
		if err != nil {
			return number
		}
		return fmt.Sprintf(" %d", n+1)
	})
}

// Unwrap returns ErrPlan.
func (f *Faults) Unwrap() error { return ErrPlan }

// orNil returns f as an error, or nil when nothing was found.
func (f *Faults) orNil() error {
	if len(f.List) == 0 {
		return nil
	}
	sort.SliceStable(f.List, func(i, j int) bool { return f.List[i].Line < f.List[j].Line })
	return f
}
