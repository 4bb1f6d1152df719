package plan

import "sort"

// defaultWithinDays is 43 s, half of the last place of a date printed to
// 0.001 d.
const defaultWithinDays = 0.0005

// DuplicatesWithinDays returns how far apart in days the epochs of one
// exposure in two sources can be; 0 looks for no duplicates.
func (p *Plan) DuplicatesWithinDays() float64 {
	if p.Duplicates.WithinDays == nil {
		return defaultWithinDays
	}
	return *p.Duplicates.WithinDays
}

// Precedence returns the indices of all sources, the best first: those of
// duplicates.precedence, then the rest by year of publication, the latest
// first, and among equals the later in the plan first.
func (p *Plan) Precedence() []int {
	order := make([]int, 0, len(p.Sources))
	listed := make([]bool, len(p.Sources))
	for _, name := range p.Duplicates.Precedence {
		if i := p.sourceNamed(name); i >= 0 && !listed[i] {
			listed[i] = true
			order = append(order, i)
		}
	}
	rest := len(order)
	for i := len(p.Sources) - 1; i >= 0; i-- {
		if !listed[i] {
			order = append(order, i)
		}
	}
	unlisted := order[rest:]
	sort.SliceStable(unlisted, func(a, b int) bool {
		return p.Sources[unlisted[a]].Year > p.Sources[unlisted[b]].Year
	})
	return order
}
