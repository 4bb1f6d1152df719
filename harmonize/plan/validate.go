package plan

import (
	"fmt"
	"math"
	"strings"

	"platemeld/harmonize/tables"
)

// validation gathers the faults of one plan.
type validation struct {
	plan   *Plan
	faults Faults
}

func (v *validation) add(key, format string, arguments ...any) {
	v.faults.List = append(v.faults.List, v.plan.fault(key, format, arguments...))
}

func (v *validation) addError(key string, err error) {
	if err != nil {
		v.add(key, "%v", err)
	}
}

// need reports an absent text.
func (v *validation) need(key, value, meaning string) {
	if strings.TrimSpace(value) == "" {
		v.add(key, "is missing: give %s", meaning)
	}
}

// oneOf reports a word that is not among those accepted; an empty one passes.
func (v *validation) oneOf(key, word string, accepted ...string) {
	if word == "" {
		return
	}
	for _, a := range accepted {
		if word == a {
			return
		}
	}
	hint := ""
	if near := nearest(word, accepted); near != "" {
		hint = fmt.Sprintf("; did you mean %q?", near)
	}
	v.add(key, "reads %q; accepted: %s%s", word, strings.Join(accepted, ", "), hint)
}

func (v *validation) notNegative(key string, value float64) {
	if !(value >= 0) || math.IsInf(value, 0) {
		v.add(key, "reads %v; a number not below 0 is accepted", value)
	}
}

func (p *Plan) validate() error {
	v := &validation{plan: p, faults: Faults{Path: p.Path}}
	v.star()
	v.sites()
	v.instruments()
	v.sources()
	v.duplicates()
	v.fit()
	return v.faults.orNil()
}

func (v *validation) star() {
	s := v.plan.Star
	v.need("star.name", s.Name, "the star's name")
	if s.RA == nil || s.Dec == nil {
		v.add("star", "has no position: give ra and dec, such as ra = \"14 22 31.80\" and dec = \"-12 04 55.1\", or numbers of degrees")
		return
	}
	_, err := s.Direction()
	v.addError("star", err)
}

func (v *validation) sites() {
	seen := map[string]bool{}
	for i, s := range v.plan.Sites {
		key := fmt.Sprintf("site[%d]", i)
		v.need(key+".name", s.Name, "the site's name")
		v.unique(seen, key+".name", s.Name, "site")
		if s.Longitude == nil || s.Latitude == nil {
			v.add(key, "needs longitude (degrees, east positive) and latitude (degrees)")
			continue
		}
		v.addError(key, s.Place().Validate())
	}
}

// unique reports a name that was met before under the same heading.
func (v *validation) unique(seen map[string]bool, key, name, what string) {
	if folded := Fold(name); folded != "" {
		if seen[folded] {
			v.add(key, "the %s name %q is used twice", what, name)
		}
		seen[folded] = true
	}
}

func (v *validation) instruments() {
	if len(v.plan.Instruments) == 0 {
		v.add("instrument", "the plan names no instrument: give at least one [[instrument]] with a name")
	}
	seen := map[string]bool{}
	for i, instrument := range v.plan.Instruments {
		key := fmt.Sprintf("instrument[%d]", i)
		v.need(key+".name", instrument.Name, "the instrument's name")
		v.unique(seen, key+".name", instrument.Name, "instrument")
		for _, alias := range instrument.Aliases {
			v.unique(seen, key+".aliases", alias, "instrument")
		}
		if instrument.Site != "" && v.plan.SiteNamed(instrument.Site) == nil {
			v.add(key+".site", "the site %q is described nowhere; %s", instrument.Site, v.siteNames())
		}
		v.eras(key, instrument)
		v.notNegative(key+".zero_point_error", instrument.ZeroPointError)
		v.notNegative(key+".default_error", instrument.DefaultError)
	}
}

func (v *validation) siteNames() string {
	var names []string
	for _, s := range v.plan.Sites {
		names = append(names, fmt.Sprintf("%q", s.Name))
	}
	if len(names) == 0 {
		return "add a [[site]] of that name"
	}
	return "sites described: " + strings.Join(names, ", ")
}

func (v *validation) eras(key string, instrument Instrument) {
	previous := math.Inf(-1)
	for i, era := range instrument.Eras {
		eraKey := fmt.Sprintf("%s.eras[%d]", key, i)
		v.need(eraKey+".name", era.Name, "the era's name")
		last := i == len(instrument.Eras)-1
		switch {
		case last && era.Until != "":
			v.add(eraKey, "the last era has no end; leave out until, or add the era that follows")
		case !last && era.Until == "":
			v.add(eraKey, "every era but the last needs until, an ISO date or a Julian date")
		case !last:
			end, err := era.end()
			if err != nil {
				v.add(eraKey, "%v", err)
			} else if end <= previous {
				v.add(eraKey, "ends before the era above it; list eras in the order of time")
			} else {
				previous = end
			}
		}
	}
}

func (v *validation) sources() {
	if len(v.plan.Sources) == 0 {
		v.add("source", "the plan names no table: give at least one [[source]] with file, reference, columns, time and velocity")
	}
	seen := map[string]bool{}
	for i := range v.plan.Sources {
		s := &v.plan.Sources[i]
		key := SourceKey(i)
		v.need(key+".name", s.Name, "a short name for the source")
		if strings.ContainsAny(s.Name, ":\n\r\t") {
			v.add(key+".name", "reads %q; a name without colons and line breaks is accepted", s.Name)
		}
		v.unique(seen, key+".name", s.Name, "source")
		v.need(key+".file", s.File, "the table's file")
		v.need(key+".reference", s.Reference, "where the table was published")
		v.oneOf(key+".format", s.Format, tables.Formats()...)
		v.sourceInstrument(key, s)
		v.columns(key, s)
		v.sourceTime(key, s)
		v.sourceVelocity(key, s)
		v.setAside(key, s)
	}
}

func (v *validation) sourceInstrument(key string, s *Source) {
	switch {
	case s.Instrument == "" && s.Columns.Instrument == "":
		v.add(key, "names no instrument: give instrument, or columns.instrument for a column that names it")
	case s.Instrument != "" && s.Columns.Instrument != "":
		v.add(key+".instrument", "both instrument and columns.instrument are given; keep one")
	case s.Instrument != "":
		if _, err := v.plan.InstrumentNamed(s.Instrument); err != nil {
			v.addError(key+".instrument", err)
		}
	}
}

func (v *validation) columns(key string, s *Source) {
	c := s.Columns
	v.need(key+".columns.velocity", c.Velocity, "the name of the velocity column")
	if s.Error.Kind == "none" && c.Error != "" {
		v.add(key+".columns.error", "is given although error.kind is \"none\"")
	}
	if (s.Error.Kind == "standard" || s.Error.Kind == "probable") && c.Error == "" {
		v.add(key+".error.kind", "is %q, but columns.error names no column", s.Error.Kind)
	}
	split := c.Year != "" || c.Month != "" || c.Day != ""
	switch {
	case c.Time != "" && split:
		v.add(key+".columns", "give either time, or year, month and day")
	case c.Time == "" && !(c.Year != "" && c.Month != "" && c.Day != ""):
		v.add(key+".columns", "give time, the name of the date column, or all of year, month and day")
	case split && s.Time.Form != "fields":
		v.add(key+".time.form", "reads %q; a date in year, month and day columns needs \"fields\"", s.Time.Form)
	case !split && s.Time.Form == "fields":
		v.add(key+".time.form", "is \"fields\", so columns needs year, month and day instead of time")
	}
}

func (v *validation) sourceTime(key string, s *Source) {
	v.need(key+".time.form", s.Time.Form, "the form of the dates, such as \"jd\", \"mjd\", \"iso\" or \"civil\"")
	if s.Time.Form == "" {
		return
	}
	if _, err := s.Convention(); err != nil {
		v.addError(key+".time", err)
	}
}

func (v *validation) sourceVelocity(key string, s *Source) {
	v.oneOf(key+".velocity.unit", s.Velocity.Unit, "km/s", "m/s")
	v.oneOf(key+".error.kind", s.Error.Kind, "standard", "probable", "none")
	v.oneOf(key+".error.unit", s.Error.Unit, "km/s", "m/s")
	v.notNegative(key+".error.floor", s.Error.Floor)
	v.need(key+".velocity.frame", s.Velocity.Frame, "\"observatory\", \"geocentric\", \"heliocentric\", \"barycentric\" or \"lsr\"")
	if s.Velocity.Frame != "" {
		_, err := s.Published(0)
		v.addError(key+".velocity", err)
	}
}

func (v *validation) setAside(key string, s *Source) {
	for i, rule := range s.SetAside {
		ruleKey := fmt.Sprintf("%s.set_aside[%d]", key, i)
		v.need(ruleKey+".reason", rule.Reason, "why the rows are kept out")
		byColumn := rule.Column != ""
		if byColumn == (len(rule.Rows) > 0) {
			v.add(ruleKey, "give either rows, a list of row numbers, or column and equals")
		}
		if !byColumn && rule.Equals != "" {
			v.add(ruleKey+".equals", "needs column, the name of the column to look in")
		}
	}
}

func (v *validation) duplicates() {
	d := v.plan.Duplicates
	if d.WithinDays != nil {
		v.notNegative("duplicates.within_days", *d.WithinDays)
	}
	listed := map[string]bool{}
	for i, name := range d.Precedence {
		key := fmt.Sprintf("duplicates.precedence[%d]", i)
		if v.plan.sourceNamed(name) < 0 {
			v.add(key, "%q is the name of no source; sources: %s", name, strings.Join(v.plan.sourceNames(), ", "))
		}
		v.unique(listed, key, name, "source")
	}
}

func (v *validation) fit() {
	f := v.plan.Fit
	if f.Trend < 0 || f.Trend > 3 {
		v.add("fit.trend", "reads %d; 0, 1, 2 or 3 is accepted", f.Trend)
	}
	v.notNegative("fit.period", f.Period)
	if n := len(f.PeriodRange); n != 0 {
		if n != 2 || !(f.PeriodRange[0] > 0 && f.PeriodRange[1] > f.PeriodRange[0]) || math.IsInf(f.PeriodRange[1], 0) {
			v.add("fit.period_range", "reads %v; two numbers of days, the shorter first, are accepted", f.PeriodRange)
		}
		if f.Period != 0 {
			v.add("fit.period_range", "both period and period_range are given; keep one")
		}
	}
	if f.Harmonics < 0 || f.Harmonics > 20 {
		v.add("fit.harmonics", "reads %d; 1 to 20 is accepted", f.Harmonics)
	} else if f.Harmonics > 0 && f.Period == 0 && len(f.PeriodRange) == 0 {
		v.add("fit.harmonics", "needs a period or a period_range")
	}
	if _, err := f.LossChoice(); err != nil {
		v.addError("fit.loss", err)
	}
	v.oneOf("fit.gauge", f.Gauge, "reference", "mean", "published")
	v.gauge()
}

func (v *validation) gauge() {
	f := v.plan.Fit
	if f.ReferenceInstrument == "" {
		if f.Gauge == "reference" {
			v.add("fit.gauge", "is \"reference\", so reference_instrument must name one")
		}
	} else if f.Gauge != "" && f.Gauge != "reference" {
		v.add("fit.reference_instrument", "is given although gauge is %q", f.Gauge)
	} else if _, err := v.plan.zeroPointNamed(f.ReferenceInstrument); err != nil {
		v.addError("fit.reference_instrument", err)
	}
	if f.Gauge != "published" {
		return
	}
	for _, instrument := range v.plan.Instruments {
		if instrument.ZeroPoint != nil {
			return
		}
	}
	v.add("fit.gauge", "is \"published\", but no instrument has a zero_point")
}
