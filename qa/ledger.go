package qa

// TakenAs says what a cell that is not a plain number was taken as.
type TakenAs string

// What a cell in the ledger was taken as (contract: result, "unread").
const (
	TakenMissing    TakenAs = "missing"      // blank or a recognised missing mark
	TakenNonDetect  TakenAs = "non-detect"   // "<0.05"
	TakenExcluded   TakenAs = "excluded"     // left out by the plan, with a reason
	TakenSummary    TakenAs = "summary"      // a foot row: mean, range …
	TakenNumber     TakenAs = "number"       // a number after conversion: text number, "12.3 mm"
	TakenNotANumber TakenAs = "not-a-number" // a problem: the characteristic is undecided until it is settled
)

// Entry is one line of the ledger: a cell that was not taken as a plain number, or a reading left out.
type Entry struct {
	Source         Source   `json:"source"`
	Side           Side     `json:"side,omitempty"`
	Characteristic string   `json:"characteristic,omitempty"`
	TakenAs        TakenAs  `json:"taken_as"`
	Value          *float64 `json:"value,omitempty"`  // the number after conversion
	Reason         string   `json:"reason,omitempty"` // why left out, or what was converted
	Want           string   `json:"want,omitempty"`   // problems: what was expected
	Do             string   `json:"do,omitempty"`     // problems: what the user can do now
}

// Problem says whether the entry stands in the way of a verdict.
func (e Entry) Problem() bool { return e.TakenAs == TakenNotANumber }

// Account is how many cells of a sheet play one part. Over a sheet the counts add up to all cells that hold something,
// and the blank cells of the table besides.
type Account struct {
	File  string `json:"file"`
	Sheet string `json:"sheet,omitempty"`
	As    string `json:"as"` // "readings", "heading", "unit row", "not a reading: ledger" …
	Cells int    `json:"cells"`
}
