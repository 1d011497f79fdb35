// Package dist gives probabilities and quantiles of the normal, Student t, F,
// chi-square and noncentral t distributions, for real degrees of freedom, and the
// integrals behind the power of two one-sided tests (Owen's Q).
//
// Every function names its tail. A small tail is computed directly and never as
// one minus the other tail, so its digits survive however small it is.
//
// Claimed accuracy, held by tables of 50 digits and more made by other formulas and
// by tables of R (see testdata; `go run ./cmd/dev accuracy` prints the worst error of
// each region), for degrees of freedom from 0.5 to 1e9. Relative errors are at most:
//
//	normal               2e-15, tails down to 1e-298
//	Student's t, F       1e-13 above 1e-100, 2e-13 down to 1e-300
//	chi-square           5e-14 above 1e-25 and df up to 1e6, else 1e-12
//	quantiles            t and chi-square 5e-14, F 1e-13, normal 2e-15; p from 1e-300
//	noncentral t         2e-13 above 1e-25, 1e-12 down to 1e-239; ncp up to 1000
//	its quantile         2e-13, p from 1e-250; ncp up to 100, df up to 1e6
//	Owen's Q             1e-13 above 1e-14
//	StudentBetween       2e-13 above 1e-40, 1e-12 above 1e-60
//
// Most values are within a few units of the last place. A probability below the
// smallest float64 is returned as 0, a quantile above the largest as an infinity.
//
// An argument that has no answer (a NaN, degrees of freedom that are not
// positive, a p outside 0 to 1) gives NaN. Degrees of freedom may be +Inf for
// Student's t, which is then the normal distribution.
package dist
