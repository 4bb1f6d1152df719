// Package bundle writes the results of a merge: one folder, the bundle, that
// can be handed to somebody else.
//
// A bundle holds merged.csv (the series), zeropoints.csv and
// zeropoints_covariance.csv, ledger.csv (what became of every input row),
// set_aside.csv, summary.txt, plan.toml (the plan as used) and SHA256SUMS.
// Tables are comma-separated with a header of column names that carry their
// units, in UTF-8, lines ended by a line feed; numbers are decimal text, an
// empty cell means that there is no value.
//
// Write builds the bundle in a new folder beside its place and changes the
// two in one step at the end, so that a run that is killed leaves the old
// bundle whole. It refuses to replace a folder that is not a bundle. The same
// series gives the same bytes.
package bundle
