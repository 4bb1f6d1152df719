package bundle

import (
	"fmt"
	"math"
	"sort"
	"strings"
	"unicode/utf8"

	"platemeld/harmonize"
	"platemeld/harmonize/plan"
	"platemeld/zeropoints"
)

// summaryWidth is the width of a summary in characters.
const summaryWidth = 80

// Summary returns the printed account of a merge, at most 80 characters wide:
// what was read, what was set aside and why, the zero points and jitters, the
// star's signal, and what a human must look at.
func Summary(s *harmonize.Series) string {
	var b strings.Builder
	title := s.Plan.Title
	if title == "" {
		title = s.Plan.Star.Name
	}
	b.WriteString(title + "\n\n")
	b.WriteString(sourceSection(s.Collection))
	b.WriteString(duplicateSection(s.Plan, s.Duplicates))
	b.WriteString(ZeroPointTable(s))
	b.WriteString(signalSection(s))
	b.WriteString(Findings(s))
	b.WriteString(nightSection(s.Collection))
	b.WriteString(remarkSection(s.Collection))
	return b.String()
}

// Reading returns what a summary says before anything is fitted: what was read,
// what was set aside and what was noticed on the way.
func Reading(c *harmonize.Collection, duplicates []harmonize.DuplicateCount) string {
	return sourceSection(c) + duplicateSection(c.Plan, duplicates) + nightSection(c) + remarkSection(c)
}

func sourceSection(c *harmonize.Collection) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%-36s %8s %8s %10s\n", "SOURCES", "rows", "merged", "set aside")
	total, totalMerged := 0, 0
	reasons := map[string]int{}
	for i, source := range c.Plan.Sources {
		rows, merged := 0, 0
		for k := range c.Measurements {
			m := &c.Measurements[k]
			if m.Source != i {
				continue
			}
			rows++
			switch m.Fate {
			case harmonize.FateMerged:
				merged++
			case harmonize.FateSetAside:
				reasons[m.Reason]++
			}
		}
		fmt.Fprintf(&b, "%s %8d %8d %10d\n", pad(source.Name, 36), rows, merged, rows-merged)
		total, totalMerged = total+rows, totalMerged+merged
	}
	fmt.Fprintf(&b, "%-36s %8d %8d %10d\n\n", "together", total, totalMerged, total-totalMerged)
	if len(reasons) > 0 {
		b.WriteString("SET ASIDE\n")
		for _, reason := range sortedKeys(reasons) {
			writeItem(&b, fmt.Sprintf("%6d  ", reasons[reason]), reason)
		}
		b.WriteString("\n")
	}
	return b.String()
}

func duplicateSection(p *plan.Plan, duplicates []harmonize.DuplicateCount) string {
	if len(duplicates) == 0 {
		return ""
	}
	var b strings.Builder
	total := 0
	for _, d := range duplicates {
		total += d.Rows
	}
	fmt.Fprintf(&b, "REPEATED EXPOSURES\n")
	for _, d := range duplicates {
		writeItem(&b, fmt.Sprintf("%6d  ", d.Rows), fmt.Sprintf("rows of %s: the exposure is used from %s", d.SetAside, d.Used))
	}
	rule := "by year of publication, the latest first"
	if len(p.Duplicates.Precedence) > 0 {
		rule = "in the order " + strings.Join(p.Duplicates.Precedence, ", ") + ", then by year"
	}
	writeItem(&b, "        ", fmt.Sprintf("%d in all. Rule: same spectrograph, epochs within %g d; sources are preferred %s.",
		total, p.DuplicatesWithinDays(), rule))
	b.WriteString("\n")
	return b.String()
}

// ZeroPointTable returns the zero points and jitters of a series as a table.
func ZeroPointTable(s *harmonize.Series) string {
	var b strings.Builder
	b.WriteString("ZERO POINTS in km/s, to be subtracted (already done in the merged series)\n")
	fmt.Fprintf(&b, "%-24s %5s %11s %9s %8s  %s\n", "instrument", "rows", "zero point", "error", "jitter", "68% interval")
	for i, z := range s.ZeroPoints {
		fit := s.Solution.ZeroPoints[i]
		value, sigma := fmt.Sprintf("%+11.4f", fit.Kms), fmt.Sprintf("%9.4f", fit.SigmaKms)
		gauge := s.Plan.Gauge()
		switch {
		case !fit.Anchored:
			value, sigma = " unanchored", "        -"
		case gauge.Kind == zeropoints.GaugeReference && fit.Kms == 0 && fit.SigmaKms == 0:
			sigma = "reference"
		}
		jitter := fmt.Sprintf("%8s  %s", short(fit.JitterKms), jitterInterval(fit))
		fmt.Fprintf(&b, "%s %5d %s %s %s\n", pad(z.Name, 24), fit.Rows, value, sigma, jitter)
	}
	b.WriteString("\n")
	return b.String()
}

// jitterInterval returns a jitter's interval in words.
func jitterInterval(z zeropoints.ZeroPoint) string {
	switch {
	case math.IsInf(z.JitterHighKms, 0):
		return "above " + short(z.JitterLowKms)
	case z.JitterIsLimit:
		return "below " + short(z.JitterHighKms)
	}
	return short(z.JitterLowKms) + " to " + short(z.JitterHighKms)
}

// short writes a velocity to 0.1 m/s, or to 10 m/s from 10 km/s on.
func short(kms float64) string {
	if kms >= 10 {
		return fmt.Sprintf("%.2f", kms)
	}
	return fmt.Sprintf("%.4f", kms)
}

func signalSection(s *harmonize.Series) string {
	var b strings.Builder
	b.WriteString("THE STAR'S SIGNAL, fitted only so that the zero points come out right\n")
	for _, term := range s.Solution.Terms {
		decimals := decimalsFor(term.Sigma)
		fmt.Fprintf(&b, "%s %14.*f +- %.*f %s\n", pad(term.Name, 28), decimals, term.Value, decimals, term.Sigma, term.Unit)
	}
	outliers := 0
	for i := range s.Rows {
		if s.Rows[i].RobustWeight < 0.5 {
			outliers++
		}
	}
	writeItem(&b, "", fmt.Sprintf("%d of %d rows have a robust weight below 0.5 (outliers, flagged in the series)", outliers, len(s.Rows)))
	b.WriteString("\n")
	return b.String()
}

// decimalsFor returns how many decimals show a standard error with two
// significant digits.
func decimalsFor(sigma float64) int {
	if !(sigma > 0) || math.IsInf(sigma, 0) {
		return 4
	}
	return min(8, max(0, 1-int(math.Floor(math.Log10(sigma)))))
}

// Findings returns what the fit found that a human must look at, or "".
func Findings(s *harmonize.Series) string {
	if len(s.Solution.Findings) == 0 {
		return ""
	}
	var b strings.Builder
	b.WriteString("TO LOOK AT\n")
	for _, finding := range s.Solution.Findings {
		writeItem(&b, "- ", finding.Text)
	}
	b.WriteString("\n")
	return b.String()
}

// remarkSection lists the remarks, those of one text on several sources
// together.
func remarkSection(c *harmonize.Collection) string {
	if len(c.Remarks) == 0 {
		return ""
	}
	var texts []string
	about := map[string][]string{}
	for _, remark := range c.Remarks {
		if _, known := about[remark.Text]; !known {
			texts = append(texts, remark.Text)
			about[remark.Text] = nil
		}
		switch {
		case remark.Rows > 0:
			about[remark.Text] = append(about[remark.Text], fmt.Sprintf("%s (%d rows)", remark.Source, remark.Rows))
		case remark.Source != "":
			about[remark.Text] = append(about[remark.Text], remark.Source)
		}
	}
	var b strings.Builder
	b.WriteString("REMARKS\n")
	for _, text := range texts {
		switch sources := about[text]; {
		case len(sources) == len(c.Plan.Sources) && len(sources) > 1:
			text += ": all sources"
		case len(sources) > 0:
			text += ": " + strings.Join(sources, ", ")
		}
		writeItem(&b, "- ", text)
	}
	b.WriteString("\n")
	return b.String()
}

// nightSection says how the night test went.
func nightSection(c *harmonize.Collection) string {
	if len(c.Nights) == 0 {
		return ""
	}
	var b strings.Builder
	b.WriteString("NIGHT TEST: Sun down and star up at the site\n")
	tested, passed := 0, 0
	for _, verdict := range c.Nights {
		tested, passed = tested+verdict.Tested, passed+verdict.Tested-verdict.Failed
	}
	writeItem(&b, "- ", fmt.Sprintf("%d of %d rows pass", passed, tested))
	for _, verdict := range c.Nights {
		if verdict.Failed > 0 {
			writeItem(&b, "- ", verdict.Source+": "+verdict.Text)
		}
	}
	b.WriteString("\n")
	return b.String()
}

// writeItem writes text behind a mark, broken at the summary's width, with
// further lines set in as far as the mark is long.
func writeItem(b *strings.Builder, mark, text string) {
	indent := strings.Repeat(" ", len(mark))
	width := 0
	for i, word := range strings.Fields(text) {
		n := utf8.RuneCountInString(word)
		switch {
		case i == 0:
			b.WriteString(mark + word)
			width = len(mark) + n
		case width+1+n > summaryWidth:
			b.WriteString("\n" + indent + word)
			width = len(indent) + n
		default:
			b.WriteString(" " + word)
			width += 1 + n
		}
	}
	b.WriteString("\n")
}

// pad fills a name up to a width in characters, or cuts it with a dot.
func pad(name string, width int) string {
	runes := []rune(name)
	if len(runes) > width {
		return string(runes[:width-1]) + "."
	}
	return name + strings.Repeat(" ", width-len(runes))
}

func sortedKeys(counts map[string]int) []string {
	keys := make([]string, 0, len(counts))
	for key := range counts {
		keys = append(keys, key)
	}
	sort.Strings(keys)
	return keys
}
