package plan

import (
	"fmt"
	"strings"
)

// Fold returns a name in the form in which names are compared: lower case,
// with runs of blanks as one blank.
func Fold(name string) string {
	return strings.Join(strings.Fields(strings.ToLower(name)), " ")
}

// SourceKey returns the key of source i, from 0, as messages name it.
func SourceKey(i int) string { return fmt.Sprintf("source[%d]", i) }

// SiteNamed returns the site of a name, or nil.
func (p *Plan) SiteNamed(name string) *Site {
	for i := range p.Sites {
		if Fold(p.Sites[i].Name) == Fold(name) {
			return &p.Sites[i]
		}
	}
	return nil
}

// InstrumentNamed returns the index of the instrument that goes by a name or
// an alias. Its error lists the names there are and the nearest.
func (p *Plan) InstrumentNamed(name string) (int, error) {
	var names []string
	for i, instrument := range p.Instruments {
		for _, known := range append([]string{instrument.Name}, instrument.Aliases...) {
			if Fold(known) == Fold(name) {
				return i, nil
			}
			names = append(names, known)
		}
	}
	hint := ""
	if near := nearest(name, names); near != "" {
		hint = fmt.Sprintf("; did you mean %q?", near)
	}
	return -1, fmt.Errorf("the instrument %q is described nowhere; instruments: %s%s", name, strings.Join(names, ", "), hint)
}

// SpectrographOf returns the folded name of the spectrograph of instrument i:
// rows of instruments with the same one can be the same exposure.
func (p *Plan) SpectrographOf(i int) string {
	if s := p.Instruments[i].Spectrograph; s != "" {
		return Fold(s)
	}
	return Fold(p.Instruments[i].Name)
}

// IsStar reports whether a name in a star column is that of the plan's star.
func (p *Plan) IsStar(name string) bool {
	for _, known := range append([]string{p.Star.Name}, p.Star.Aliases...) {
		if Fold(known) == Fold(name) {
			return true
		}
	}
	return false
}

func (p *Plan) sourceNames() []string {
	names := make([]string, len(p.Sources))
	for i, s := range p.Sources {
		names[i] = s.Name
	}
	return names
}

func (p *Plan) sourceNamed(name string) int {
	for i, s := range p.Sources {
		if Fold(s.Name) == Fold(name) {
			return i
		}
	}
	return -1
}

// SourceNamed returns the source of a name. Its error lists the names there
// are.
func (p *Plan) SourceNamed(name string) (*Source, error) {
	if i := p.sourceNamed(name); i >= 0 {
		return &p.Sources[i], nil
	}
	return nil, fmt.Errorf("the plan has no source %q; sources: %s", name, strings.Join(p.sourceNames(), ", "))
}
