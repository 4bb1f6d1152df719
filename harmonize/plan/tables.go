package plan

import "platemeld/harmonize/tables"

// TableOptions returns how the source's file is to be read.
func (s *Source) TableOptions(p *Plan) tables.Options {
	o := tables.Options{
		Format: s.Format, Sheet: s.Sheet, HeaderRow: s.HeaderRow, ColumnNames: s.ColumnNames,
		Table: s.Table, Delimiter: s.Delimiter, Comment: s.Comment,
	}
	if s.ReadMe != "" {
		o.ReadMe = p.File(s.ReadMe)
	}
	return o
}
