// Package exports turns a record into files and back: the workbook that is the record, its JSON, its signatures, and the
// verification that recomputes it.
//
// The workbook is written from one plain model of its sheets (rows.go), so that verification can lay the sheets that the
// record must give beside the sheets that the file holds, cell by cell. The record itself travels in the workbook as a
// custom XML part under the same signatures (record.go).
package exports
