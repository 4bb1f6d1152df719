// Package printed reads numbers as a century of tables prints them: with all
// kinds of minus signs and decimal marks, with marks of doubt and footnotes
// stuck to them, with their error in the same cell, or with dots and dashes
// where there is no value.
//
// What is understood is a sign, digits and one decimal mark, and the marks
// that Mark lists. A cell that needs more than that is an error with its text,
// never a guess: "O.15" is not 0.15 here.
package printed
