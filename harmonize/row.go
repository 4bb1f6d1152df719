package harmonize

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"platemeld/epochs"
	"platemeld/harmonize/plan"
	"platemeld/harmonize/printed"
	"platemeld/harmonize/tables"
)

// probableErrorFactor is the probable error of a normal distribution of unit
// standard deviation, its upper quartile (R: qnorm(0.75)).
const probableErrorFactor = 0.6744897501960817

// rowReader reads the rows of one source in their order.
type rowReader struct {
	plan       *plan.Plan
	index      int // of the source
	source     *plan.Source
	table      *tables.Table
	at         columnPlaces
	convention epochs.Convention
	stamps     *epochs.StampReader
	converter  *epochs.Converter
	style      printed.Style
	velocity   epochs.PublishedVelocity // frame and convention; the number is filled in row by row
	toKms      float64                  // of the velocity column
	errorKms   float64                  // of the error column
	kind       string                   // of error
	aside      []string                 // reason by row of the table, "" = none
	sites      []*epochs.Site           // by instrument of the plan, nil = none
	zeroAt     []int                    // first zero point of each instrument
}

// columnPlaces holds the table's column for each meaning, -1 = none.
type columnPlaces struct {
	time, year, month, day, hour, minute, second      int
	velocity, err, instrument, star, exposure, remark int
}

// newRowReader finds the columns and units that the plan names. All that is
// wrong with the source as a whole is returned together.
func newRowReader(p *plan.Plan, index int, table *tables.Table, converter *epochs.Converter) (*rowReader, []error) {
	source := &p.Sources[index]
	r := &rowReader{plan: p, index: index, source: source, table: table, converter: converter,
		style: printed.Style{DecimalComma: source.DecimalComma, Missing: source.Missing}, kind: source.ErrorKind()}
	var errs []error
	note := func(err error) {
		if err != nil {
			errs = append(errs, fmt.Errorf("source %q: %w", source.Name, err))
		}
	}
	note(r.findColumns())
	var err error
	if r.convention, err = source.Convention(); err == nil {
		r.stamps, err = r.convention.NewStampReader()
	}
	note(err)
	r.velocity, err = source.Published(0)
	note(err)
	r.velocity.RemovePerspective = p.Star.RemovePerspective
	if len(errs) > 0 {
		return nil, errs // units and rules need the columns
	}
	r.toKms, err = unitFactor(source.Velocity.Unit, "velocity.unit", table.Columns[r.at.velocity])
	note(err)
	r.errorKms = r.toKms
	if r.at.err >= 0 {
		r.errorKms, err = unitFactor(source.Error.Unit, "error.unit", table.Columns[r.at.err])
		note(err)
		if source.Error.Unit == "" && table.Columns[r.at.err].Unit == "" {
			r.errorKms = r.toKms
		}
	}
	note(r.findSetAside())
	r.findInstruments()
	return r, errs
}

// findColumns looks up every column that the plan names.
func (r *rowReader) findColumns() error {
	c := r.source.Columns
	var errs []error
	find := func(name string) int {
		if name == "" {
			return -1
		}
		i, err := r.table.Column(name)
		if err != nil {
			errs = append(errs, err)
			return -1
		}
		return i
	}
	r.at = columnPlaces{
		time: find(c.Time), year: find(c.Year), month: find(c.Month), day: find(c.Day),
		hour: find(c.Hour), minute: find(c.Minute), second: find(c.Second),
		velocity: find(c.Velocity), err: find(c.Error), instrument: find(c.Instrument),
		star: find(c.Star), exposure: find(c.Exposure), remark: find(c.Remark),
	}
	return errors.Join(errs...)
}

// unitFactor returns the factor from a column's unit to km/s. The plan's word
// must not contradict the table's.
func unitFactor(word, key string, column tables.Column) (float64, error) {
	stated := map[string]string{"km/s": "km/s", "m/s": "m/s", "km s-1": "km/s", "m s-1": "m/s", "km.s-1": "km/s", "m.s-1": "m/s"}[strings.TrimSpace(column.Unit)]
	if word == "" {
		word = stated
	}
	if stated != "" && word != stated {
		return 0, fmt.Errorf("%s: the plan says %q, but the table states %q for column %q", key, word, stated, column.Name)
	}
	if word == "m/s" {
		return 1e-3, nil
	}
	return 1, nil
}

// findSetAside marks the rows that the plan keeps out. A rule that fits no
// row is an error: it was meant for some row, and that row would be merged.
func (r *rowReader) findSetAside() error {
	r.aside = make([]string, len(r.table.Rows))
	byNumber := make(map[int]int, len(r.table.Rows))
	for i, row := range r.table.Rows {
		byNumber[row.Number] = i
	}
	var errs []error
	for k, rule := range r.source.SetAside {
		if rule.Column == "" {
			for _, number := range rule.Rows {
				i, ok := byNumber[number]
				if !ok {
					errs = append(errs, fmt.Errorf("set_aside %d: %s has no data row %d; its rows are %s", k+1, r.source.File, number, r.rowRange()))
					continue
				}
				r.aside[i] = rule.Reason
			}
			continue
		}
		column, err := r.table.Column(rule.Column)
		if err != nil {
			errs = append(errs, fmt.Errorf("set_aside %d: %w", k+1, err))
			continue
		}
		matched := 0
		for i, row := range r.table.Rows {
			if strings.TrimSpace(row.Cells[column].Text) == strings.TrimSpace(rule.Equals) {
				r.aside[i] = rule.Reason
				matched++
			}
		}
		if matched == 0 {
			errs = append(errs, fmt.Errorf("set_aside %d: no row has the text %q in column %q", k+1, rule.Equals, rule.Column))
		}
	}
	return errors.Join(errs...)
}

func (r *rowReader) rowRange() string {
	if len(r.table.Rows) == 0 {
		return "none"
	}
	return fmt.Sprintf("%d to %d", r.table.Rows[0].Number, r.table.Rows[len(r.table.Rows)-1].Number)
}

// findInstruments prepares the sites and zero points of the plan's
// instruments.
func (r *rowReader) findInstruments() {
	r.sites = make([]*epochs.Site, len(r.plan.Instruments))
	r.zeroAt = make([]int, len(r.plan.Instruments))
	for i, instrument := range r.plan.Instruments {
		if s := r.plan.SiteNamed(instrument.Site); s != nil {
			place := s.Place()
			r.sites[i] = &place
		}
	}
	for k, z := range r.plan.ZeroPoints() {
		if z.Era == 0 {
			r.zeroAt[z.Instrument] = k
		}
	}
}

// read reads and converts one row, an index into the table's rows. Every
// fault of the row is returned.
func (r *rowReader) read(row int) (Measurement, []error) {
	m := Measurement{Source: r.index, Instrument: -1, ZeroPoint: -1, DuplicateOf: -1, Place: r.table.Place(row, 0), Raw: r.printed(row)}
	m.Place.Column = ""
	stamp, stampErr := r.stamp(row) // always read: split dates refer to the row above
	if reason := r.aside[row]; reason != "" {
		m.setAside(reason)
		return m, nil
	}
	if r.at.star >= 0 && !r.plan.IsStar(m.Raw.Star) {
		m.setAside(fmt.Sprintf("another star: %q", m.Raw.Star))
		return m, nil
	}
	var errs []error
	velocity, err := r.number(row, r.at.velocity)
	switch {
	case err != nil:
		errs = append(errs, err)
	case velocity.Missing:
		m.setAside("no velocity printed")
		return m, nil
	}
	if m.Raw.Time == "" {
		m.setAside("no date printed")
		return m, nil
	}
	if stampErr != nil {
		errs = append(errs, r.cellError(row, r.timeColumn(), m.Raw.Time, stampErr))
	}
	if m.Instrument, err = r.instrument(row); err != nil {
		errs = append(errs, err)
	}
	if err := r.standardError(row, &m, velocity); err != nil {
		errs = append(errs, err)
	}
	if len(errs) > 0 {
		return m, errs
	}
	m.Stamp, m.PublishedKms = stamp, velocity.Value*r.toKms
	if math.Abs(m.PublishedKms) > fastestKms {
		return m, []error{r.cellError(row, r.at.velocity, m.Raw.Velocity, fmt.Errorf("that is %g km/s, faster than %d km/s; state velocity.unit as it is", m.PublishedKms, fastestKms))}
	}
	if err := r.convert(&m); err != nil {
		return m, []error{r.cellError(row, r.timeColumn(), m.Raw.Time, err)}
	}
	return m, nil
}

// fastestKms is beyond any star's velocity; a larger one has a wrong unit.
const fastestKms = 1000

// convert takes the measurement to the barycentre.
func (r *rowReader) convert(m *Measurement) (err error) {
	site := r.sites[m.Instrument]
	published := r.velocity
	published.Kms = m.PublishedKms
	if m.Epoch, m.Velocity, err = r.converter.Convert(m.Stamp, published, site); err != nil {
		return err
	}
	if r.source.Velocity.KeepHeliocentric {
		m.Velocity.Kms, m.Velocity.Terms.SunMs, m.Velocity.Terms.CrossMs = m.PublishedKms, 0, 0
	}
	m.ZeroPoint = r.zeroAt[m.Instrument] + r.plan.EraAt(m.Instrument, m.Epoch.BJD.Float())
	return nil
}

// printed returns the row's cells as printed.
func (r *rowReader) printed(row int) Printed {
	p := Printed{Time: r.text(row, r.at.time), Velocity: r.text(row, r.at.velocity), Error: r.text(row, r.at.err),
		Instrument: r.text(row, r.at.instrument), Star: r.text(row, r.at.star),
		Exposure: r.text(row, r.at.exposure), Remark: r.text(row, r.at.remark)}
	if r.at.time < 0 {
		f := r.fields(row)
		p.Time = strings.Join(strings.Fields(strings.Join([]string{f.Year, f.Month, f.Day, f.Hour, f.Minute, f.Second}, " ")), " ")
	}
	return p
}

func (r *rowReader) text(row, column int) string {
	if column < 0 {
		return ""
	}
	return strings.TrimSpace(r.table.Rows[row].Cells[column].Text)
}

func (r *rowReader) fields(row int) epochs.Fields {
	return epochs.Fields{Year: r.text(row, r.at.year), Month: r.text(row, r.at.month), Day: r.text(row, r.at.day),
		Hour: r.text(row, r.at.hour), Minute: r.text(row, r.at.minute), Second: r.text(row, r.at.second)}
}

// timeColumn is the column that a fault of the date is reported at.
func (r *rowReader) timeColumn() int {
	if r.at.time >= 0 {
		return r.at.time
	}
	return r.at.day
}

// stamp reads the row's date.
func (r *rowReader) stamp(row int) (epochs.Stamp, error) {
	if r.at.time < 0 {
		return r.stamps.ReadFields(r.fields(row))
	}
	cell := r.table.Rows[row].Cells[r.at.time]
	serial := cell.Kind == tables.KindDate || (r.source.Time.Form == "spreadsheet" && cell.Kind == tables.KindNumber)
	if serial {
		return r.stamps.ReadSerial(cell.Text, cell.Date1904)
	}
	return r.stamps.Read(cell.Text)
}

// number reads the number in a cell.
func (r *rowReader) number(row, column int) (printed.Number, error) {
	cell := r.table.Rows[row].Cells[column]
	style := r.style
	if cell.Kind == tables.KindNumber {
		style.DecimalComma = false // a workbook's stored number
	}
	n, err := printed.ReadNumber(cell.Text, style)
	if err != nil {
		return n, r.cellError(row, column, cell.Text, err)
	}
	return n, nil
}

func (r *rowReader) cellError(row, column int, text string, err error) error {
	return fmt.Errorf("%s, reads %q: %w", r.table.Place(row, column), text, err)
}

// instrument returns the row's instrument in the plan.
func (r *rowReader) instrument(row int) (int, error) {
	name := r.source.Instrument
	if name == "" {
		name = r.text(row, r.at.instrument)
		if name == "" {
			return -1, r.cellError(row, r.at.instrument, name, errors.New("the row names no instrument"))
		}
	}
	i, err := r.plan.InstrumentNamed(name)
	if err != nil {
		return -1, r.cellError(row, max(r.at.instrument, 0), name, err)
	}
	return i, nil
}

// standardError fills in the standard error of the row's velocity: as
// printed, from the probable error, or the instrument's default. An error of
// zero or a blank one counts as none.
func (r *rowReader) standardError(row int, m *Measurement, velocity printed.Number) error {
	value := math.NaN()
	switch {
	case r.kind == "none":
	case r.at.err >= 0:
		n, err := r.number(row, r.at.err)
		if err != nil {
			return err
		}
		if !n.Missing {
			value = n.Value * r.errorKms
		}
		if value < 0 {
			return r.cellError(row, r.at.err, m.Raw.Error, errors.New("an error is not negative; list texts that mean \"no value\" under missing"))
		}
	case velocity.HasError:
		value = velocity.Error * r.toKms
	}
	floor := r.source.Error.Floor
	switch {
	case value > 0 && r.kind == "probable":
		m.SigmaKms, m.ErrorFrom = math.Hypot(value/probableErrorFactor, floor), ErrorProbable
	case value > 0:
		m.SigmaKms, m.ErrorFrom = math.Hypot(value, floor), ErrorStandard
	case m.Instrument >= 0 && r.plan.Instruments[m.Instrument].DefaultError > 0:
		m.SigmaKms, m.ErrorFrom = math.Hypot(r.plan.Instruments[m.Instrument].DefaultError, floor), ErrorDefault
	}
	return nil
}
