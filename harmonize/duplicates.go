package harmonize

import (
	"fmt"
	"math"
	"sort"
)

// SettleDuplicates sets aside every row whose exposure is in the collection
// from a better source, with a pointer to the row that is used instead. It
// returns how many rows were set aside for each pair of sources.
//
// Two rows are one exposure when they come from different sources and the
// same spectrograph and their barycentric times differ by no more than the
// plan's tolerance. Sources are gone through in the plan's order of
// precedence; each row that is already used can answer for one row of a
// source only, unless it is a mean of several, and the closest pairs are
// joined first. Within one source no
// two rows are joined, except those that repeat date and velocity to the
// letter, of which the first is used.
func (c *Collection) SettleDuplicates() []DuplicateCount {
	d := duplicateSearch{collection: c, within: c.Plan.DuplicatesWithinDays(), used: map[string][]int{}, counts: map[[2]int]int{}}
	d.repeats()
	if d.within > 0 {
		for _, source := range c.Plan.Precedence() {
			d.settleSource(source)
		}
	}
	return d.table()
}

// DuplicateCount says how many rows of one source gave way to another's.
type DuplicateCount struct {
	SetAside, Used string // names of the sources
	Rows           int
}

type duplicateSearch struct {
	collection *Collection
	within     float64          // days
	used       map[string][]int // by spectrograph, measurements in use, in order of time
	counts     map[[2]int]int   // rows by source set aside and source used
}

// repeats settles rows that a source prints twice.
func (d *duplicateSearch) repeats() {
	type printedRow struct {
		source, instrument int
		time, velocity     string
		bjd                float64
	}
	first := map[printedRow]int{}
	for i := range d.collection.Measurements {
		m := &d.collection.Measurements[i]
		if m.Fate != FateMerged {
			continue
		}
		key := printedRow{m.Source, m.Instrument, m.Raw.Time, m.Raw.Velocity, m.Epoch.BJD.Float()}
		if winner, ok := first[key]; ok {
			d.settle(i, winner)
			continue
		}
		first[key] = i
	}
}

// settleSource joins the rows of one source to those already in use, and puts
// the rest of them in use.
func (d *duplicateSearch) settleSource(source int) {
	rows := map[string][]int{}
	var spectrographs []string
	for i := range d.collection.Measurements {
		m := &d.collection.Measurements[i]
		if m.Source != source || m.Fate != FateMerged {
			continue
		}
		name := d.collection.Plan.SpectrographOf(m.Instrument)
		if rows[name] == nil {
			spectrographs = append(spectrographs, name)
		}
		rows[name] = append(rows[name], i)
	}
	for _, name := range spectrographs {
		d.join(rows[name], d.used[name])
		for _, i := range rows[name] {
			if d.collection.Measurements[i].Fate == FateMerged {
				d.used[name] = append(d.used[name], i)
			}
		}
		used := d.used[name]
		sort.SliceStable(used, func(a, b int) bool { return d.bjd(used[a]) < d.bjd(used[b]) })
	}
}

func (d *duplicateSearch) bjd(i int) float64 { return d.collection.Measurements[i].Epoch.BJD.Float() }

// join sets aside those rows that have a partner among used, closest first.
func (d *duplicateSearch) join(rows, used []int) {
	type pair struct {
		row, winner int
		apart       float64
	}
	var pairs []pair
	for _, row := range rows {
		t := d.bjd(row)
		from := sort.Search(len(used), func(k int) bool { return d.bjd(used[k]) >= t-2*d.within })
		for _, winner := range used[from:] {
			if d.bjd(winner) > t+2*d.within {
				break
			}
			apart := math.Abs(d.collection.Measurements[row].Epoch.BJD.Sub(d.collection.Measurements[winner].Epoch.BJD.JD))
			if apart <= d.within {
				pairs = append(pairs, pair{row, winner, apart})
			}
		}
	}
	sort.SliceStable(pairs, func(a, b int) bool { return pairs[a].apart < pairs[b].apart })
	taken := map[int]bool{}
	for _, p := range pairs {
		if !taken[p.winner] && d.collection.Measurements[p.row].Fate == FateMerged {
			taken[p.winner] = !d.isMean(p.winner)
			d.settle(p.row, p.winner)
		}
	}
}

func (d *duplicateSearch) isMean(i int) bool {
	return d.collection.Plan.Sources[d.collection.Measurements[i].Source].Means
}

// settle sets a row aside for the one that is used.
func (d *duplicateSearch) settle(row, winner int) {
	m := &d.collection.Measurements[row]
	w := &d.collection.Measurements[winner]
	m.Fate, m.DuplicateOf = FateDuplicate, winner
	m.Reason = fmt.Sprintf("same exposure as %s, %.1f s apart", w.ID(d.collection.Plan), math.Abs(m.Epoch.BJD.Sub(w.Epoch.BJD.JD))*86400)
	d.counts[[2]int{m.Source, w.Source}]++
}

// table lists the counts in the order of the plan.
func (d *duplicateSearch) table() []DuplicateCount {
	var list []DuplicateCount
	sources := d.collection.Plan.Sources
	for from := range sources {
		for to := range sources {
			if n := d.counts[[2]int{from, to}]; n > 0 {
				list = append(list, DuplicateCount{SetAside: sources[from].Name, Used: sources[to].Name, Rows: n})
			}
		}
	}
	return list
}
