// Package stats computes the numbers behind a comparison of two groups of
// readings: summaries, Welch's estimate of the difference of two means, two
// one-sided tests, the ratio of standard deviations, and a few checks on one
// group (outlier, runs, lag-1 correlation, resolution, capability).
//
// Design, FractionDesign and Size plan a study: its power, and its sample size.
//
// It takes float64 and returns structs; it knows no names, units or verdicts.
// No function changes its input. Readings must be finite numbers.
package stats

import "errors"

// ErrTooFew says that a group has fewer readings than the method needs.
var ErrTooFew = errors.New("too few readings")

// ErrConstant says that the readings vary too little for the method: they are
// all equal, or equal within the rounding of the numbers themselves.
var ErrConstant = errors.New("readings are constant")
