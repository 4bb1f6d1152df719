package plan

import (
	"fmt"
	"strings"

	"github.com/pelletier/go-toml/v2/unstable"
)

// lineIndex finds the line on which a key of the plan stands. A key is
// written with its tables and their numbers, from 0: "source[2].time.form".
type lineIndex map[string]int

// line returns the line of key, or of the innermost table around it that is
// written down, or 1.
func (x lineIndex) line(key string) int {
	for key != "" {
		if line, ok := x[key]; ok {
			return line
		}
		cut := strings.LastIndexAny(key, ".[")
		if cut < 0 {
			break
		}
		key = key[:cut]
	}
	return 1
}

// indexLines reads the positions of all keys of a well-formed document.
func indexLines(text []byte) lineIndex {
	index := lineIndex{}
	parser := unstable.Parser{}
	parser.Reset(text)
	counts := map[string]int{} // tables seen so far under each [[name]]
	table := ""
	for parser.NextExpression() {
		node := parser.Expression()
		switch node.Kind {
		case unstable.Table:
			name, line := keyText(&parser, node.Key())
			table = numbered(name, counts, false)
			index[table] = line
		case unstable.ArrayTable:
			name, line := keyText(&parser, node.Key())
			table = numbered(name, counts, true)
			index[table] = line
		case unstable.KeyValue:
			indexKeyValue(&parser, index, table, node)
		}
	}
	return index
}

// numbered puts the number of the current element behind each array of
// tables in a dotted name; a new element of the last one is counted first.
func numbered(name string, counts map[string]int, newElement bool) string {
	parts := strings.Split(name, ".")
	path := ""
	for i, part := range parts {
		if path != "" {
			path += "."
		}
		path += part
		if i == len(parts)-1 && newElement {
			counts[path]++
		}
		if n := counts[path]; n > 0 {
			path = fmt.Sprintf("%s[%d]", path, n-1)
		}
	}
	return path
}

func indexKeyValue(parser *unstable.Parser, index lineIndex, table string, node *unstable.Node) {
	name, line := keyText(parser, node.Key())
	if table != "" {
		name = table + "." + name
	}
	index[name] = line
	indexValue(parser, index, name, node.Value())
}

// indexValue goes on into arrays and inline tables.
func indexValue(parser *unstable.Parser, index lineIndex, name string, value *unstable.Node) {
	children := value.Children()
	switch value.Kind {
	case unstable.Array:
		for i := 0; children.Next(); i++ {
			indexValue(parser, index, fmt.Sprintf("%s[%d]", name, i), children.Node())
		}
	case unstable.InlineTable:
		for children.Next() {
			indexKeyValue(parser, index, name, children.Node())
		}
	}
}

func keyText(parser *unstable.Parser, key unstable.Iterator) (name string, line int) {
	var parts []string
	for key.Next() {
		if line == 0 {
			line = parser.Shape(key.Node().Raw).Start.Line
		}
		parts = append(parts, string(key.Node().Data))
	}
	return strings.Join(parts, "."), line
}
