package plan

import (
	"bytes"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"github.com/pelletier/go-toml/v2"
)

// Load reads and validates the plan in a file. Every fault found in it is
// returned together as *Faults, which unwraps to ErrPlan.
func Load(path string) (*Plan, error) {
	text, err := os.ReadFile(path)
	if err != nil {
		return nil, fmt.Errorf("plan: %w", err)
	}
	return Parse(path, text)
}

// Parse reads and validates the text of a plan; path names it in messages and
// is what the files of its sources are relative to.
func Parse(path string, text []byte) (*Plan, error) {
	p := &Plan{Path: path, Text: bytes.Clone(text)}
	decoder := toml.NewDecoder(bytes.NewReader(text)).DisallowUnknownFields()
	if err := decoder.Decode(p); err != nil {
		return nil, decodeFaults(path, err)
	}
	p.lines = indexLines(p.Text)
	if err := p.validate(); err != nil {
		return nil, err
	}
	return p, nil
}

// File returns the place of a file that the plan names.
func (p *Plan) File(name string) string {
	if filepath.IsAbs(name) {
		return name
	}
	return filepath.Join(filepath.Dir(p.Path), name)
}

// FaultAt returns an error about one key of the plan, with its line. Key is
// written as in "source[2].columns.velocity", numbers from 0.
func (p *Plan) FaultAt(key, format string, arguments ...any) error {
	return &Faults{Path: p.Path, List: []Fault{p.fault(key, format, arguments...)}}
}

func (p *Plan) fault(key, format string, arguments ...any) Fault {
	return Fault{Line: p.lines.line(key), Key: key, Text: fmt.Sprintf(format, arguments...)}
}

func decodeFaults(path string, err error) error {
	var strict *toml.StrictMissingError
	if errors.As(err, &strict) {
		faults := &Faults{Path: path}
		for _, missing := range strict.Errors {
			line, _ := missing.Position()
			faults.List = append(faults.List, Fault{Line: line, Key: strings.Join(missing.Key(), "."), Text: adviseKey(missing.Key())})
		}
		return faults.orNil()
	}
	var wrong *toml.DecodeError
	if errors.As(err, &wrong) {
		line, column := wrong.Position()
		key := strings.Join(wrong.Key(), ".")
		if key == "" {
			key = fmt.Sprintf("column %d", column)
		}
		text := strings.TrimPrefix(wrong.Error(), "toml: ")
		if accepted := acceptedAt(wrong.Key()); accepted != "" {
			text += "; " + accepted + " is accepted here"
		}
		return &Faults{Path: path, List: []Fault{{Line: line, Key: key, Text: text}}}
	}
	return fmt.Errorf("%w: %s: %w", ErrPlan, path, err)
}

// acceptedAt says what kind of value a key takes.
func acceptedAt(path toml.Key) string {
	if len(path) == 0 {
		return ""
	}
	t := keyType(path[:len(path)-1])
	if t == nil {
		return ""
	}
	field, ok := fieldByKey(t, path[len(path)-1])
	if !ok {
		return ""
	}
	if tableType(field.Type) != nil {
		return "a table"
	}
	return valueWord(field.Type)
}
