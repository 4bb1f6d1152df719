package harmonize

import (
	"fmt"

	"platemeld/epochs"
	"platemeld/harmonize/plan"
	"platemeld/harmonize/tables"
)

// Measurement is one row of a source: one velocity at one epoch as published,
// what it was converted to, and what became of it.
type Measurement struct {
	Source int          // index into the plan's sources
	Place  tables.Place // file, sheet and row
	Raw    Printed      // the cells as printed

	Instrument int // index into the plan's instruments; -1 when the row names none
	ZeroPoint  int // index into the plan's zero points; -1 before the epoch is known

	Stamp        epochs.Stamp
	Epoch        epochs.Epoch
	PublishedKms float64                    // as printed, in km/s
	Velocity     epochs.BarycentricVelocity // referred to the barycentre
	SigmaKms     float64                    // standard error; 0 = the row has none
	ErrorFrom    ErrorOrigin

	NightFault string // what the night test says against the epoch, "" = nothing

	Fate        Fate
	Reason      string // why the row was set aside
	DuplicateOf int    // index of the measurement used instead; -1 = none
}

// Printed holds the cells of a row as printed, joined by a blank where a date
// is split over columns. Cells that the plan does not name are empty.
type Printed struct {
	Time, Velocity, Error, Instrument, Star, Exposure, Remark string
}

// Fate says what became of a row.
type Fate int

// The fates of a row.
const (
	FateMerged     Fate = iota // in the merged series
	FateSetAside               // kept out by the plan, or without a value
	FateDuplicate              // the same exposure is in the series from another source
	FateUnreadable             // a Problem tells why; nothing can be merged
)

// String returns the fate as the ledger writes it.
func (f Fate) String() string {
	switch f {
	case FateMerged:
		return "merged"
	case FateSetAside:
		return "set aside"
	case FateDuplicate:
		return "duplicate"
	default:
		return "unreadable"
	}
}

// ErrorOrigin says where a measurement's standard error comes from.
type ErrorOrigin int

// The origins of a standard error.
const (
	ErrorFitted   ErrorOrigin = iota // none printed or assumed: the instrument's fitted scatter
	ErrorStandard                    // printed as a standard error
	ErrorProbable                    // printed as a probable error
	ErrorDefault                     // none printed: the instrument's default
)

// String returns the origin as the ledger writes it.
func (o ErrorOrigin) String() string {
	switch o {
	case ErrorStandard:
		return "standard error"
	case ErrorProbable:
		return "probable error / 0.6745"
	case ErrorDefault:
		return "instrument's default"
	default:
		return "instrument's scatter"
	}
}

// ID returns the name by which the results call a measurement: the source's
// name and the row in its file, such as "plates1908:17".
func (m *Measurement) ID(p *plan.Plan) string {
	return fmt.Sprintf("%s:%d", p.Sources[m.Source].Name, m.Place.Row)
}

// setAside records why the row is kept out.
func (m *Measurement) setAside(reason string) {
	m.Fate, m.Reason = FateSetAside, reason
}
