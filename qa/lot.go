package qa

// Side says which of the two lots something belongs to.
type Side string

// The two sides of a comparison.
const (
	Reference Side = "reference"
	Candidate Side = "candidate"
)

// Lot is one side's readings as taken from the files, a series a characteristic.
type Lot struct {
	Name   string   `json:"lot"`    // as written in the file, or as the plan calls it
	Source string   `json:"source"` // supplier, machine, site, process: free text
	Files  []File   `json:"files"`
	Rows   int      `json:"rows"` // rows (parts) of the lot found in the files
	Series []Series `json:"series"`
}

// Series is what a lot holds of one characteristic, in the order of the file.
// Its cells reconcile: Rows = used + left out + Missing + NonDetects + Unread + Repeats.
type Series struct {
	Characteristic string    `json:"characteristic"`
	Rows           int       `json:"rows"`
	Readings       []Reading `json:"readings"` // used and left out
	Missing        int       `json:"missing"`  // blank cells and recognised missing marks
	NonDetects     int       `json:"non_detects"`
	Unread         int       `json:"unread"`                    // cells that hold something that is not a number
	ExcludedUnread int       `json:"excluded_unread,omitempty"` // left out by the plan without having been a number
	Repeats        int       `json:"repeats,omitempty"`         // repeat readings beyond the first of each part, averaged into it

	NonDetected []NonDetect `json:"non_detected,omitempty"` // every cell below or above a limit, also those that count as a reading
}

// Of returns the lot's series of the named characteristic.
func (l Lot) Of(characteristic string) Series {
	for i := range l.Series {
		if l.Series[i].Characteristic == characteristic {
			return l.Series[i]
		}
	}
	return Series{Characteristic: characteristic}
}

// Values are the readings that take part in the test, in the order of the file; a fresh slice.
func (s Series) Values() []float64 {
	v := make([]float64, 0, len(s.Readings))
	for _, r := range s.Readings {
		if r.Used() {
			v = append(v, r.Value)
		}
	}
	return v
}

// Excluded counts what was left out with a reason.
func (s Series) Excluded() int {
	n := s.ExcludedUnread
	for _, r := range s.Readings {
		if !r.Used() {
			n++
		}
	}
	return n
}

// used are the readings that take part in the test; not to be changed.
func (s Series) used() []Reading {
	left := s.leftOut()
	if left == 0 {
		return s.Readings[:len(s.Readings):len(s.Readings)]
	}
	out := make([]Reading, 0, len(s.Readings)-left)
	for _, r := range s.Readings {
		if r.Used() {
			out = append(out, r)
		}
	}
	return out
}

// leftOut counts the readings that take no part in the test.
func (s Series) leftOut() int {
	n := 0
	for i := range s.Readings {
		if !s.Readings[i].Used() {
			n++
		}
	}
	return n
}

// Readings is everything that was taken from the files for one comparison: what importers hand over and Compare spends.
type Readings struct {
	Reference       Lot              `json:"reference"`
	Candidate       Lot              `json:"candidate"`
	Characteristics []Characteristic `json:"characteristics"` // in the plan's order, limits merged from plan and file
	Ledger          []Entry          `json:"ledger"`
	Account         []Account        `json:"account"`
	Warnings        []Warning        `json:"warnings"` // of the reading: hidden rows, limits that differ …
	Said            []string         `json:"said"`     // what was detected or done by default, a sentence each
}
