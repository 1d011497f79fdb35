package importers

import (
	"fmt"
	"strings"

	"lotpair/qa"
)

// Problem is one cell that stands in the way: where, what was found there, what was wanted and what the user can do.
type Problem struct {
	Code string // one of the codes below
	qa.Source
	Want string
	Do   string
}

// Error is the problem on one line.
func (p *Problem) Error() string {
	text := fmt.Sprintf("found %s, want %s; %s", quoted(p.Text), p.Want, p.Do)
	if p.File == "" {
		return text
	}
	return p.String() + ": " + text
}

// The codes of problems: what a cell of measurements can hold that is not a number.
const (
	NotANumber          = "not-a-number"          // text that is no number
	DecimalAmbiguous    = "decimal-ambiguous"     // 40,012: a decimal comma or a thousands mark
	OutOfRange          = "out-of-range"          // 1e400: no finite double
	NotFinite           = "not-finite"            // NaN, Infinity
	OtherUnit           = "other-unit"            // 12.3 in under a heading in mm
	ErrorValue          = "error-value"           // #DIV/0!
	BooleanValue        = "boolean"               // TRUE
	DateValue           = "date"                  // a number that a spreadsheet made a date
	FormulaWithoutValue = "formula-without-value" // never calculated
)

// catalogue says what to do about each code.
var catalogue = map[string]string{
	NotANumber:          "correct the cell, or name it under exclude with a reason",
	DecimalAmbiguous:    `state decimal = "," or decimal = "." under [reading]`,
	OutOfRange:          "correct the cell, or name it under exclude with a reason",
	NotFinite:           "correct the cell, or name it under exclude with a reason",
	OtherUnit:           "write the reading in the unit of its column, or name the cell under exclude with a reason",
	ErrorValue:          "correct the formula, or name the cell under exclude with a reason",
	BooleanValue:        "correct the cell, or name it under exclude with a reason",
	DateValue:           "the number was made a date: write it again from the original, or name the cell under exclude with a reason",
	FormulaWithoutValue: "open the file in the spreadsheet program, calculate and save it, or name the cell under exclude with a reason",
}

func problem(code, text, want string) *Problem {
	return &Problem{Code: code, Source: qa.Source{Text: text}, Want: want, Do: catalogue[code]}
}

// quoted is a found text for a message: quoted and cut at 40 characters.
func quoted(s string) string {
	if r := []rune(s); len(r) > 40 {
		s = string(r[:39]) + "…"
	}
	return fmt.Sprintf("%q", s)
}

// Fault is one thing wrong with a plan, by itself or in the light of the files it names.
type Fault struct {
	Place string // "plan.toml:12", "reading.exclude 1", "hub-shell.xlsx!Data!D17"
	Line  int    // of the plan file; 0 where not known
	Text  string // found …, want …; do …
}

// PlanError is all that is wrong with a plan: a usage error (exit code 2).
type PlanError struct{ Faults []Fault }

// Error is one line a fault.
func (e *PlanError) Error() string { return faultLines(e.Faults) }

// FileError says that a file cannot be opened or understood (exit code 3).
type FileError struct {
	Faults []Fault
	Err    error // what lies beneath, may be nil
}

// Error is one line a fault.
func (e *FileError) Error() string { return faultLines(e.Faults) }

// Unwrap is the error beneath.
func (e *FileError) Unwrap() error { return e.Err }

func faultLines(faults []Fault) string {
	lines := make([]string, len(faults))
	for i, f := range faults {
		lines[i] = f.Place + ": " + f.Text
	}
	return strings.Join(lines, "\n")
}

func planError(place, format string, args ...any) *PlanError {
	return &PlanError{Faults: []Fault{{Place: place, Text: fmt.Sprintf(format, args...)}}}
}

func fileError(place, format string, args ...any) *FileError {
	return &FileError{Faults: []Fault{{Place: place, Text: fmt.Sprintf(format, args...)}}}
}
