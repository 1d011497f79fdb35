// Package desk is what the desktop knows: one State of plain values, a method an act of the user, and the views that say
// what the screens show as text. No window and no file: whatever was read or written comes in as an argument, so that an
// afternoon's acts can be replayed in a test.
package desk

import (
	"lotpair/qa"
)

// State is everything on the desk. It is passed and returned by value; what it points to is never written in place.
type State struct {
	Open     bool      // whether a comparison lies on the desk
	Path     string    // the file that was opened, as the user named it
	Record   qa.Record // plan, readings, result and trail; the result is empty while Compared is false
	Compared bool
	Drafting bool      // the criterion is being written: no comparison was made yet
	Seen     bool      // a reading was seen while the criterion was written
	Files    []qa.File // whose bytes are kept for a comparison that is being prepared
	Sheet    *Sheet    // the file that is looked at before anything is taken from it; nil while none is
	Workbook Workbook  // the signed or exported file, empty while there is none
	Selected int       // the characteristic looked at: its place in the result
	Sorted   Sorting
	Looking  Look     // how the bench looks at it
	Job      Job      // what is being done, empty while nothing is
	Problem  Problem  // what went wrong last, empty while nothing did
	Said     string   // what was done last, for the foot
	Typing   *qa.Plan // the plan before what is being typed; nil while nothing is
	Past     []moment // before each act that can be undone, the last one last
	Future   []moment // after each act that was undone
	Acts     []string
	Number   int // of the acts that changed the record or left the window: each is kept in the register
}

// View is how the record is looked at: what a program that was killed finds again.
type View struct {
	Known    bool
	Selected int
	Sorted   Sorting
	Looking  Look
}

// View is how the record is looked at now.
func (s State) View() View {
	return View{Known: true, Selected: s.Selected, Sorted: s.Sorted, Looking: s.Looking}
}

// Workbook is the file that holds the record, and what verification found of it.
type Workbook struct {
	Path       string
	SHA256     string // of its bytes, where they are kept
	Opened     bool   // the record came from this file: nothing in it is changed here
	State      string // "intact", "changed", …; "" for a workbook just exported
	Trusted    bool   // whether every signer was established with trusted certificates
	Judged     bool   // whether there are trusted certificates at all
	Signatures []Signature
	Missing    []string // required meanings that nobody has signed
	Reasons    []string // what verification came upon, a sentence each

	Agreement   string   // what the recomputation and the sheets gave, in words
	Otherwise   bool     // this version computes another result than the one that made the record
	Differences []string // where the recomputation or the sheets differ from the record
	Supersedes  []string // the earlier records in whose place this one stands, the last first
}

// Signature is one signature of a workbook as verification reports it.
type Signature struct {
	Signer, Title, Organization string
	Meaning, Reason             string
	Disposition                 string
	Time                        string
	Valid, CoversAll            bool
	Trusted                     *bool // nil where no certificates are trusted
	Doubt                       string
	Fingerprint                 string
}

// Job is work that runs off the window's thread.
type Job struct {
	Name  string
	Share float64 // done, 0 to 1; below 0 where it is not known
}

// Problem is an error where it happened.
type Problem struct {
	Place string // what was being done
	Text  string // what was found, wanted, and what to do
}

// did is the state with one more act in its log.
func (s State) did(act string) State {
	s.Acts = append(append([]string{}, s.Acts...), act)
	return s
}

// acted is the state with one more act that is to be kept.
func (s State) acted(act string) State {
	s.Number++
	return s.did(act)
}

// Last is the act done last, as it is kept.
func (s State) Last() string {
	if len(s.Acts) == 0 {
		return ""
	}
	return s.Acts[len(s.Acts)-1]
}

// Characteristic is the comparison that is looked at; false where there is none.
func (s State) Characteristic() (qa.Comparison, bool) {
	if !s.Compared || s.Selected < 0 || s.Selected >= len(s.Record.Result.Characteristics) {
		return qa.Comparison{}, false
	}
	return s.Record.Result.Characteristics[s.Selected], true
}

// Closed says whether the record may no longer be changed here: it came from a workbook, or was signed.
func (s State) Closed() bool { return s.Workbook.Opened || len(s.Workbook.Signatures) > 0 }
