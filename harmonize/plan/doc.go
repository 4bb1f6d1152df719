// Package plan holds the plan: the TOML file in which a spectroscopist says
// what is to be merged and how each table is to be read.
//
// Load reads a plan strictly. An unknown key is an error that names its line
// and the nearest known key; a value that cannot be meant is an error that
// names the line and what would be accepted. All faults of a plan are
// reported together, not only the first.
//
// Every key is declared once, as a field of one of the types of this package,
// with its unit, default and meaning in the field's tags. WriteReference
// prints the reference page from those same tags, so the page cannot fall
// behind the reader.
//
// A plan names conventions in words ("gmat", "heliocentre", "probable"). The
// methods that turn them into the types of epochs and zeropoints live here,
// because here the line number of a wrong word is known. The package opens no
// table and converts no date.
package plan
