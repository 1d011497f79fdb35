// Package dist gives probabilities and quantiles of the normal, Student t, F,
// chi-square and noncentral t distributions, for real degrees of freedom, and the
// integrals behind the power of two one-sided tests (Owen's Q).
//
// Every function names its tail. A small tail is computed directly and never as
// one minus the other tail, so its digits survive however small it is.
//
// Claimed accuracy, held by tables that R and a 60-digit computation made (see
// testdata), for degrees of freedom from 0.5 to 1e6: a relative error of at most
// 5e-14 for probabilities above 1e-25 and 1e-12 down to 1e-300; for quantiles
// with p down to 1e-300, 5e-14 of Student's t and 1e-13 of F. Most values are
// within a few units of the last place. Chi-square keeps 1e-13, its quantile too;
// the noncentral t 2e-13 above 1e-25 and 1e-12 down to 1e-280, its quantile 2e-13;
// Owen's integrals 1e-13 above 1e-14 and StudentBetween 2e-13 above 1e-40 (held by
// 50-digit tables). A probability below the smallest float64
// is returned as 0, a quantile above the largest as an infinity.
//
// An argument that has no answer (a NaN, degrees of freedom that are not
// positive, a p outside 0 to 1) gives NaN. Degrees of freedom may be +Inf for
// Student's t, which is then the normal distribution.
package dist
