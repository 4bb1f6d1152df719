package plan

import (
	"reflect"
	"strings"

	"github.com/agnivade/levenshtein"
)

// keyType returns the type that holds the keys of a table of the plan, named
// by its keys without numbers, or nil.
func keyType(table []string) reflect.Type {
	at := reflect.TypeFor[Plan]()
	for _, key := range table {
		field, ok := fieldByKey(at, key)
		if !ok {
			return nil
		}
		at = tableType(field.Type)
		if at == nil {
			return nil
		}
	}
	return at
}

// tableType returns the struct behind a field that is a table or an array of
// tables, or nil for a plain value.
func tableType(t reflect.Type) reflect.Type {
	if t.Kind() == reflect.Slice || t.Kind() == reflect.Pointer {
		t = t.Elem()
	}
	if t.Kind() == reflect.Struct {
		return t
	}
	return nil
}

func fieldByKey(t reflect.Type, key string) (reflect.StructField, bool) {
	for _, field := range keyFields(t) {
		if field.Tag.Get("toml") == key {
			return field, true
		}
	}
	return reflect.StructField{}, false
}

// keyFields returns the fields of a table's type that are keys of the plan.
func keyFields(t reflect.Type) []reflect.StructField {
	var fields []reflect.StructField
	for field := range t.Fields() {
		if key := field.Tag.Get("toml"); key != "" && key != "-" {
			fields = append(fields, field)
		}
	}
	return fields
}

// adviseKey says what could have been meant by an unknown key: the nearest
// key of the same table, or a table that has this very key.
func adviseKey(path []string) string {
	table, key := path[:len(path)-1], path[len(path)-1]
	at := keyType(table)
	if at == nil && len(table) > 0 {
		return adviseKey(table)
	}
	var names []string
	for _, field := range keyFields(at) {
		names = append(names, field.Tag.Get("toml"))
	}
	where := "at the top of the plan"
	if len(table) > 0 {
		where = "in [" + strings.Join(table, ".") + "]"
	}
	if home := tableWithKey(key); home != "" {
		return "there is no such key " + where + "; [" + home + "] has one"
	}
	if near := nearest(key, names); near != "" {
		return "there is no such key " + where + "; did you mean \"" + near + "\"?"
	}
	return "there is no such key " + where + "; keys there: " + strings.Join(names, ", ")
}

// tableWithKey returns the first table that has the key, or "".
func tableWithKey(key string) string {
	found := ""
	walkTables(func(path []string, _ reflect.StructField, t reflect.Type) {
		if _, ok := fieldByKey(t, key); ok && found == "" {
			found = strings.Join(path, ".")
		}
	})
	return found
}

// walkTables visits every table of the plan in the order of declaration.
func walkTables(visit func(path []string, field reflect.StructField, t reflect.Type)) {
	var walk func(path []string, t reflect.Type)
	walk = func(path []string, t reflect.Type) {
		for _, field := range keyFields(t) {
			if inner := tableType(field.Type); inner != nil {
				here := append(append([]string{}, path...), field.Tag.Get("toml"))
				visit(here, field, inner)
				walk(here, inner)
			}
		}
	}
	walk(nil, reflect.TypeFor[Plan]())
}

// nearest returns the name closest to word, or "" when none is close: at
// most half of the letters, and no more than three, may differ.
func nearest(word string, names []string) string {
	best, bestDistance := "", 1+min(3, max(1, len(word)/2))
	for _, name := range names {
		if d := levenshtein.ComputeDistance(strings.ToLower(word), strings.ToLower(name)); d < bestDistance {
			best, bestDistance = name, d
		}
	}
	return best
}
