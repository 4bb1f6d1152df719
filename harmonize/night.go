package harmonize

import (
	"platemeld/epochs"
	"platemeld/harmonize/plan"
)

// NightVerdict sums up the night test of one source: whether at the site and
// the instant of each row the Sun was down and the star up. It changes no
// reading; it shows which label of a table is wrong.
type NightVerdict struct {
	Source         string
	Failed, Tested int
	Text           string // one sentence
	Doubtful       bool   // another reading of the dates fits the nights much better
}

// testNights applies the night test to the rows of a source that are to be
// merged and have a site, and notes on each failed row what is wrong.
func (c *Collection) testNights(index, rows int, convention epochs.Convention, converter *epochs.Converter, sites []*epochs.Site) {
	limits := nightLimits(c.Plan)
	var tally epochs.NightTally
	measurements := c.Measurements[len(c.Measurements)-rows:]
	for i := range measurements {
		m := &measurements[i]
		if m.Fate != FateMerged || sites[m.Instrument] == nil {
			continue
		}
		result, err := converter.NightTest(convention, m.Stamp, *sites[m.Instrument], limits)
		if err != nil {
			continue // an unusable site was reported where the row was converted
		}
		tally.Add(result)
		m.NightFault = result.String()
	}
	failed, tested := tally.Failed()
	if tested == 0 {
		return
	}
	_, doubtful := tally.Better()
	c.Nights = append(c.Nights, NightVerdict{c.Plan.Sources[index].Name, failed, tested, tally.Verdict(), doubtful})
}

// nightLimits returns the plan's limits of the night.
func nightLimits(p *plan.Plan) epochs.NightLimits {
	limits := epochs.DefaultNightLimits()
	if p.NightTest.SunBelow != nil {
		limits.SunBelowDeg = *p.NightTest.SunBelow
	}
	if p.NightTest.StarAbove != nil {
		limits.StarAboveDeg = *p.NightTest.StarAbove
	}
	return limits
}
