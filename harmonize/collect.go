package harmonize

import (
	"context"
	"fmt"
	"math"

	"platemeld/epochs"
	"platemeld/harmonize/plan"
	"platemeld/harmonize/tables"
)

// Collection is every row of every source of a plan.
type Collection struct {
	Plan         *plan.Plan
	Measurements []Measurement // all rows, by source and row
	Problems     Problems
	Remarks      []Remark
	Nights       []NightVerdict // of the sources whose instruments have a site
}

// Remark is something worth knowing about a source that stands in nobody's
// way: a hidden row, a sheet's title lines, a date taken at the Earth's
// centre for want of a site.
type Remark struct {
	Source string // "" = the whole merge
	Text   string
	Rows   int // how many rows it is about, 0 = not counted
}

// Progress is told how far a stage has come; done and total count rows or
// sources, as the stage says. It may be nil.
type Progress func(stage string, done, total int)

func (p Progress) report(stage string, done, total int) {
	if p != nil {
		p(stage, done, total)
	}
}

// Collect reads every source of the plan, converts every date to BJD_TDB and
// every velocity to the barycentre. What cannot be read is gathered in
// Problems; the error is for a plan that allows no conversion at all, or a
// cancelled context.
func Collect(ctx context.Context, p *plan.Plan, progress Progress) (*Collection, error) {
	converter, err := newConverter(p)
	if err != nil {
		return nil, err
	}
	c := &Collection{Plan: p}
	for i := range p.Sources {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		progress.report("reading", i, len(p.Sources))
		c.readSource(ctx, i, converter)
	}
	progress.report("reading", len(p.Sources), len(p.Sources))
	return c, ctx.Err()
}

// readSource reads and converts one source.
func (c *Collection) readSource(ctx context.Context, index int, converter *epochs.Converter) {
	source := &c.Plan.Sources[index]
	table, err := tables.Read(c.Plan.File(source.File), source.TableOptions(c.Plan))
	if err != nil {
		c.addProblem(source, tables.Place{File: source.File, Sheet: source.Sheet}, fmt.Errorf("source %q: %w", source.Name, err))
		return
	}
	for _, note := range table.Notes {
		c.Remarks = append(c.Remarks, Remark{Source: source.Name, Text: note.String()})
	}
	for _, assumed := range source.Assumed() {
		c.Remarks = append(c.Remarks, Remark{Source: source.Name, Text: "assumed " + assumed})
	}
	reader, errs := newRowReader(c.Plan, index, table, converter)
	for _, err := range errs {
		c.addProblem(source, tables.Place{File: table.File, Sheet: table.Sheet}, err)
	}
	if len(errs) > 0 {
		return
	}
	for row := range table.Rows {
		if row%1024 == 0 && ctx.Err() != nil {
			return
		}
		measurement, problems := reader.read(row)
		for _, problem := range problems {
			measurement.Fate = FateUnreadable
			c.addProblem(source, measurement.Place, problem)
		}
		c.Measurements = append(c.Measurements, measurement)
	}
	c.remarkOn(index, len(table.Rows))
	c.testNights(index, len(table.Rows), reader.convention, converter, reader.sites)
}

func (c *Collection) addProblem(source *plan.Source, place tables.Place, err error) {
	c.Problems = append(c.Problems, Problem{Source: source.Name, Place: place, Err: err})
}

// remarkOn sums up what the conversions of a source's last rows flagged.
func (c *Collection) remarkOn(index, rows int) {
	source := &c.Plan.Sources[index]
	flags := map[epochs.EpochFlag]int{}
	for _, m := range c.Measurements[len(c.Measurements)-rows:] {
		if m.Fate != FateMerged {
			continue
		}
		for bit := epochs.EpochFlag(1); bit != 0 && bit <= m.Epoch.Flags; bit <<= 1 {
			if m.Epoch.Flags&bit != 0 {
				flags[bit]++
			}
		}
	}
	c.remarkOnSun(source, c.Measurements[len(c.Measurements)-rows:])
	for bit := epochs.EpochFlag(1); len(flags) > 0; bit <<= 1 {
		if n := flags[bit]; n > 0 {
			c.Remarks = append(c.Remarks, Remark{Source: source.Name, Text: bit.String(), Rows: n})
			delete(flags, bit)
		}
	}
}

// remarkOnSun says by how much heliocentric velocities were moved: the Sun's
// motion about the barycentre is periodic and looks like a long orbit.
func (c *Collection) remarkOnSun(source *plan.Source, measurements []Measurement) {
	least, most := math.Inf(1), math.Inf(-1)
	for i := range measurements {
		if m := &measurements[i]; m.Fate == FateMerged && m.Velocity.Terms.SunMs != 0 {
			least, most = math.Min(least, m.Velocity.Terms.SunMs), math.Max(most, m.Velocity.Terms.SunMs)
		}
	}
	if least <= most {
		c.Remarks = append(c.Remarks, Remark{Source: source.Name,
			Text: fmt.Sprintf("heliocentric velocities moved to the barycentre by %+.1f to %+.1f m/s", least, most)})
	}
}
