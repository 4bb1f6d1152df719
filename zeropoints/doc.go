// Package zeropoints estimates, in one joint fit, the zero point and jitter of
// every instrument that measured a star's radial velocity.
//
// Velocity i of instrument k is modelled as
//
//	v = signal(t) + zero_k + noise,  var(noise) = sigma² + jitter_k² + (slope sigma_t)²
//
// The signal is a constant, a polynomial trend and one periodic term with
// harmonics, of a period that is given, or searched for with the zero points
// free. It is there only so that the zero points come out right.
//
// All velocities are in km/s, positive receding, times in days of BJD_TDB. A
// zero point is what is subtracted from an instrument's velocities. Which
// common level they refer to is the gauge's choice: a reference instrument,
// the weighted mean, or published zero points.
//
// Outliers neither move zero points nor inflate jitters: the location is an
// M-estimate by the chosen loss, and each jitter solves the score equation of
// restricted likelihood (REML) with the loss's bounded score in place of the
// residual (Richardson and Welsh 1995, Biometrics 51, 1429). For the Gaussian
// loss that is REML itself: an instrument of five rows is not given too small
// a jitter for the zero point that was fitted to it. A jitter of zero is an
// answer; then an upper limit is given.
//
// Rows without a published error have the jitter alone for an error, so that
// it must not be zero. If more than half of an instrument's velocities were
// rounded to the same number its jitter is that of the normal distribution;
// if its rows are fewer than three, or all equal, it is the median scatter of
// the other instruments, and if there is none no error has a scale; findings say
// either.
//
// What cannot be known is said: the rank of the design is looked at before
// any number is given, and a zero point that the data do not tie to the
// common level is called unanchored.
//
// Nothing is random, nothing depends on the order of rows beyond rounding,
// and the cost is linear in their number. The package handles one star; a
// network of stars is not in it yet.
package zeropoints
