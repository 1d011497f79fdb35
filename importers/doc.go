// Package importers turns files into readings: a plan file into a qa.Plan, a workbook or text file into the two lots that the
// plan names. Every cell of a sheet that is read ends in exactly one part: a reading, an entry of the ledger, or a cell with
// another part to play that is counted. Nothing is dropped, converted or guessed in silence; what stands in the way of an
// unambiguous reading is refused with the place, what was found, what was wanted and what to do.
//
//	Open          bytes -> Book: every cell as text, kind and address, nothing parsed; the kind of file by what it holds
//	OpenText      the clipboard's text -> Book
//	LoadPlan      bytes -> qa.Plan, checked to the last key
//	Read          plan and files -> qa.Readings
//	Inspect       one file -> how it would be read, and a plan to start from
//	Under         the same under a watch: progress is told, and the reading can be stopped
//	ParseNumber   the text of one cell -> a number, or a Problem
package importers
