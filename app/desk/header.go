package desk

import (
	"path"
	"strings"
	"time"

	"lotpair/qa"
)

// HeaderView is what the head of the window says.
type HeaderView struct {
	Title, Supports string
	Right, Note     string
	Alarm           bool // Right must not be overlooked
}

// Header says what is compared, what for, and what is known of the criterion and of the file.
func (s State) Header() HeaderView {
	if !s.Open {
		return HeaderView{Title: "Lotpair", Supports: "is a candidate lot equivalent to a reference lot?"}
	}
	v := HeaderView{Title: s.Record.Plan.Title, Supports: "supports " + s.Record.Plan.Supports}
	if v.Title == "" && s.Path == "" {
		v.Title = "Comparison without a title"
	} else if v.Title == "" {
		v.Title = base(s.Path)
	}
	if s.Record.Plan.Supports == "" {
		v.Supports = "supports: not stated"
	}
	if s.Drafting {
		return s.draftHeader(v)
	}
	seal, note := sealText(s.Record.Result.Seal)
	v.Right, v.Note = seal, note
	if w := s.Workbook; w.State != "" {
		v.Right, v.Alarm = StateText(w), w.State != "intact" || w.Otherwise || w.Judged && !w.Trusted
		v.Note = seal
	}
	return v
}

// draftHeader says what is known of the criterion before a comparison was made.
func (s State) draftHeader(v HeaderView) HeaderView {
	if s.Sealed() {
		v.Right, v.Note = sealText(s.Record.Result.Seal)
		return v
	}
	v.Right, v.Note = "criterion not sealed", "no readings opened yet"
	if s.Seen {
		v.Note = "readings were looked at: the record will say so"
	}
	return v
}

// sealText says what is known of the time at which the criterion was fixed.
func sealText(x qa.Seal) (text, note string) {
	if x.Time == "" {
		return "criterion not sealed beforehand", "criterion sha-256 " + shortDigest(x.Digest)
	}
	text = "criterion sealed " + timeText(x.Time)
	switch {
	case x.Amended > 0:
		note = "amended since: " + qa.Count(x.Amended, "time", "times")
	case x.Readings == "unopened":
		note = "before the readings were opened"
	case x.Readings == "opened":
		note = "after the readings were opened"
	default:
		note = "whether the readings were opened before is not known"
	}
	return text, note
}

// StateText says what verification found of a workbook: the word of the console, then what it means.
func StateText(w Workbook) string {
	s := w.State
	switch s {
	case "intact":
	case "incomplete":
		if len(w.Missing) > 0 {
			s += ": not signed as " + strings.Join(w.Missing, ", ")
		}
	case "changed":
		return "changed: not as it was signed"
	case "disagrees":
		return "disagrees: its readings give another result"
	default:
		return s
	}
	if w.Otherwise {
		s += "; this version computes another result"
	}
	switch {
	case w.Trusted:
		s += "; every signer is trusted here"
	case w.Judged:
		s += "; a signer is NOT trusted here"
	default:
		s += "; who signed is not established"
	}
	return s
}

// shortDigest shows enough of a digest to tell two apart: its first and its last characters.
func shortDigest(d string) string {
	if len(d) < 16 {
		return d
	}
	return d[:4] + " " + d[4:8] + " … " + d[len(d)-4:]
}

// timeText writes a time as people do, with its offset: "1 Dec 2026 09:12 +01:00". What is no time stays as it is.
func timeText(s string) string {
	t, err := time.Parse(time.RFC3339, s)
	if err != nil {
		return s
	}
	return t.Format("2 Jan 2006 15:04 -07:00")
}

// base is the last element of a path of any system.
func base(p string) string { return path.Base(strings.ReplaceAll(p, `\`, "/")) }
