package tables

import "strings"

// readColumns reads cells set apart by blanks.
func readColumns(name string, content []byte, o Options) (*Table, error) {
	split := func(l line) ([]string, error) { return strings.Fields(l.text), nil }
	names, rest, err := splitHeader(name, dataLines(decoded(content), o), o, split)
	if err != nil {
		return nil, err
	}
	return textTable(name, names, rest, split)
}
