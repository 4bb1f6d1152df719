// Package tables reads published tables as they stand in their files: cells
// as text, each with its file, sheet, row and column.
//
// The formats are workbooks (xlsx), cells set apart by commas, semicolons,
// tabs or bars ("delimited"), cells set apart by blanks ("columns"), and
// fixed-width data with a byte-by-byte ReadMe ("fixed"); each may be packed
// with gzip. Text is UTF-8, UTF-16 with a byte-order mark, or Windows-1252.
//
// Nothing is interpreted: numbers, dates and marks are left to packages
// printed and epochs. Nothing is dropped: a row with too few or too many cells
// is an error with its number. Blank lines and comments are no rows. Rows are
// counted as a person counts them in the file, from 1.
//
// Files come from outside: how much a file can unpack to, and how many rows
// and columns a table can have, is bounded.
package tables
