// Package harmonize turns the tables of a plan into one merged series.
//
// The way is one: Collect reads every row of every source and converts its
// date to BJD_TDB and its velocity to the barycentre; SettleDuplicates keeps
// one row of each exposure; Merge estimates the zero points and weighs the
// rows. Each stage can be had alone: a check stops after the first, a look at
// the zero points before the series is written.
//
// What enters is a validated plan and the files that it names. What leaves is
// a Series whose rows each point back to their printed cell. Velocities are
// in km/s, positive receding; times are BJD_TDB.
//
// No row is lost: every row of every table is a Measurement with a Fate,
// merged or set aside for a stated reason, and Merge refuses to return a
// series in which the numbers do not add up. A cell that cannot be read is
// neither: it is a Problem with its place, all problems of all tables are
// gathered, and nothing is merged until they are mended in the table or the
// plan.
//
// The package writes no file and prints nothing: package bundle writes, and
// the command prints.
package harmonize
