package plan

import (
	"fmt"
	"io"
	"reflect"
	"strings"
)

// referenceWidth is the width of the reference page in characters.
const referenceWidth = 80

// WriteReference writes the page that documents every key of a plan, at most
// 80 characters wide.
func WriteReference(w io.Writer) error {
	var page strings.Builder
	page.WriteString("THE PLAN\n\n")
	page.WriteString(wrap("A plan is a TOML file. It names one star, the places and instruments, "+
		"and one block for each published table that says how the table is to be read. "+
		"An unknown key is an error. File names are relative to the plan.", ""))
	page.WriteString("\nAt the top\n")
	writeKeys(&page, reflect.TypeFor[Plan]())
	walkTables(func(path []string, field reflect.StructField, t reflect.Type) {
		name := "[" + strings.Join(path, ".") + "]"
		if field.Type.Kind() == reflect.Slice {
			name = "[" + name + "]"
		}
		need := ""
		if field.Tag.Get("need") == "required" {
			need = " (required)"
		}
		fmt.Fprintf(&page, "\n%s%s\n", name, need)
		page.WriteString(wrap(field.Tag.Get("doc"), "  "))
		writeKeys(&page, t)
	})
	_, err := io.WriteString(w, page.String())
	return err
}

func writeKeys(page *strings.Builder, t reflect.Type) {
	for _, field := range keyFields(t) {
		if tableType(field.Type) != nil {
			continue // has a section of its own
		}
		traits := []string{valueWord(field.Type)}
		if unit := field.Tag.Get("unit"); unit != "" {
			traits = append(traits, unit)
		}
		switch {
		case field.Tag.Get("need") == "required":
			traits = append(traits, "required")
		case field.Tag.Get("default") != "":
			traits = append(traits, "default: "+field.Tag.Get("default"))
		default:
			traits = append(traits, "optional")
		}
		page.WriteString(wrap(field.Tag.Get("toml")+" ("+strings.Join(traits, "; ")+")", "  "))
		page.WriteString(wrap(field.Tag.Get("doc"), "      "))
	}
}

// valueWord names what kind of value a key takes.
func valueWord(t reflect.Type) string {
	switch t.Kind() {
	case reflect.Pointer:
		return valueWord(t.Elem())
	case reflect.Slice:
		return "list of " + valueWord(t.Elem()) + "s"
	case reflect.String:
		return "text"
	case reflect.Bool:
		return "true or false"
	case reflect.Int, reflect.Uint64:
		return "whole number"
	case reflect.Interface:
		return "text or number"
	default:
		return "number"
	}
}

// wrap breaks text into lines of the page's width, each behind indent.
func wrap(text, indent string) string {
	var out, line strings.Builder
	for _, word := range strings.Fields(text) {
		if line.Len() > 0 && len(indent)+line.Len()+1+len(word) > referenceWidth {
			out.WriteString(indent + line.String() + "\n")
			line.Reset()
		}
		if line.Len() > 0 {
			line.WriteByte(' ')
		}
		line.WriteString(word)
	}
	out.WriteString(indent + line.String() + "\n")
	return out.String()
}
