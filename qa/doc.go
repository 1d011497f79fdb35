// Package qa is the domain of Lotpair: plain values and pure functions that say whether a candidate lot is equivalent to a
// reference lot within a margin fixed beforehand. It knows no file format, no clock, no user and no screen.
//
// The words, one for one thing (ISO 3534-1/-2, ISO 9000, ASTM E2935, 21 CFR Part 11; the others are our own):
//
//	lot             units made or supplied under like conditions (ISO 3534-2)
//	reference       the lot taken as known good (ASTM E2935)
//	candidate       the lot that must show itself as good (ASTM E2935)
//	characteristic  what is measured on a unit, with unit, specification limits and target (ISO 3534-2)
//	reading         one measured value with the file, sheet and cell it came from
//	criterion       objective, margin, alpha and method: what must hold for the verdict
//	margin          the largest difference that does not matter in use: the equivalence limit of ASTM E2935
//	ledger          every cell not taken as a plain number and every reading left out, with the reason
//	verdict         what the criterion says of the readings
//	record          plan, readings, ledger, result and trail of one comparison (ISO 9000)
//	trail           who did what when, each entry holding the digest of the one before (21 CFR 11.10(e))
//
// A reading goes one way: cell, Reading, Lot, Result, Record. Differences are always candidate minus reference.
// No NaN and no infinity leaves this package: a value that does not exist is nil, with a warning that names it.
package qa
