package desk

import (
	"strings"

	"lotpair/qa"
)

// FootView is what the foot says and offers.
type FootView struct {
	Next       string // the one next thing to do
	Said       string // what was done last, or who has signed
	Export     string // the label of the button; "" where there is nothing to export
	Sign       string // the label of the button; "" where there is nothing to sign
	Meaning    string // what would be signed
	Signatures string // the label of the button that lists them; "" where there are none and nothing is wrong
	Seal       string // the label of the button that fixes the criterion
	Amend      string // the label of the button that changes a sealed criterion, with a reason
	Take       string // the label of the button that opens the kept file to take its readings
	Compare    string // the label of the button that compares again
	SavePlan   string // the label of the button that writes the plan to a file
}

// Foot says the one next thing to do.
func (s State) Foot() FootView { return s.FootBy(nil) }

// FootBy says the same with what was planned before.
func (s State) FootBy(m *Planner) FootView {
	if !s.Open {
		return FootView{Next: "Next: begin a comparison, or open a record, a plan or a workbook."}
	}
	if s.Drafting {
		return s.draftFoot(m)
	}
	if !s.Compared {
		v := FootView{Next: "Next: compare again.", Compare: "Compare"}
		if s.Sealed() && !s.Closed() {
			v.Amend = "Amend"
		}
		return v
	}
	v := FootView{Said: s.Said}
	if s.Sealed() && !s.Closed() {
		v.Amend = "Amend"
	}
	w := s.Workbook
	if !w.Opened && len(w.Signatures) == 0 {
		v.Export = "Export workbook"
	}
	if n := len(w.Signatures); n > 0 {
		v.Signatures = qa.Count(n, "signature", "signatures")
		if v.Said == "" {
			v.Said = signedBy(w.Signatures)
		}
	} else if len(w.Reasons) > 0 {
		v.Signatures = "What was found"
	}
	if m := s.nextMeaning(); m != "" {
		v.Meaning, v.Sign = m, "Sign as "+m
	}
	v.Next = s.next(v)
	return v
}

// draftFoot says the one next thing to do before a comparison was made.
func (s State) draftFoot(m *Planner) FootView {
	v := FootView{Said: s.Said}
	faults := s.faults(m)
	if len(s.Record.Plan.Characteristics) > 0 {
		v.SavePlan = "Save as plan"
	}
	if s.Sealed() {
		v.Amend = "Amend"
	}
	switch {
	case s.Sealed() && s.Missing() == "":
		v.Next, v.Take = "Next: take the readings.", "Take the readings"
	case s.Sealed():
		v.Next = "Next: bring in the readings of the " + string(s.Missing()) + "."
	case len(s.Record.Plan.Characteristics) == 0:
		v.Next = "Next: bring a file in and take its headings and limits, or add a characteristic."
	case len(faults) > 0:
		v.Next = "Next: " + faults[0]
	default:
		v.Next, v.Seal = "Next: seal the criterion. It can be amended later, with a reason that stays in the record.", "Seal criterion"
	}
	return v
}

// next is the sentence of the foot.
func (s State) next(v FootView) string {
	w := s.Workbook
	switch w.State {
	case "changed", "disagrees", "unreadable":
		return "Next: find the original file; this one is not as it was signed."
	}
	look := ""
	if n, first := s.toLookAt(); n > 0 && len(w.Signatures) == 0 {
		look = "look at " + qa.Count(n, "finding", "findings")
		switch {
		case first == "":
			look += " on how the files were read"
		case n == 1:
			look += " on " + first
		default:
			look += ", first on " + first
		}
		look += ", then "
	}
	switch {
	case v.Sign == "":
		return "Nothing is left to do: the record is complete."
	case len(w.Signatures) > 0:
		return "Next: sign as " + v.Meaning + "."
	case v.Export != "" && w.Path == "":
		return "Next: " + look + "export or sign."
	}
	return "Next: " + look + "sign as " + v.Meaning + "."
}

// toLookAt counts the warnings of all characteristics and of the reading of the files, and names the first characteristic
// that has one.
func (s State) toLookAt() (n int, first string) {
	n = len(s.Record.Result.Warnings)
	for _, c := range s.Record.Result.Characteristics {
		if len(c.Warnings) > 0 && first == "" {
			first = c.Name
		}
		n += len(c.Warnings)
	}
	return n, first
}

// nextMeaning is the first required meaning that no valid signature has; "" where none is missing or the file is unsound.
func (s State) nextMeaning() string {
	switch s.Workbook.State {
	case "changed", "disagrees", "unreadable":
		return ""
	}
	has := map[string]bool{}
	for _, g := range s.Workbook.Signatures {
		if g.Valid {
			has[g.Meaning] = true
		}
	}
	for _, r := range s.Record.Plan.RequiredMeanings() {
		if !has[r.Meaning] {
			return r.Meaning
		}
	}
	return ""
}

func signedBy(all []Signature) string {
	var out []string
	for _, g := range all {
		t := g.Meaning + " by " + g.Signer + ", " + timeText(g.Time)
		if !g.Valid {
			t += ", not valid"
		}
		out = append(out, t)
	}
	return "Signed: " + strings.Join(out, "; ") + "."
}

// Signatures lists the signatures and what is wrong, a paragraph each.
func (s State) Signatures() []string {
	w := s.Workbook
	var out []string
	if w.State != "" {
		out = append(out, "State: "+StateText(w)+".")
	}
	for _, g := range w.Signatures {
		who := g.Signer
		for _, more := range []string{g.Title, g.Organization} {
			if more != "" {
				who += ", " + more
			}
		}
		t := "Signed as " + g.Meaning + " by " + who + ", " + timeText(g.Time) + "."
		if g.Reason != "" {
			t += " Reason: " + g.Reason + "."
		}
		if g.Disposition != "" {
			t += " Disposition: " + g.Disposition + "."
		}
		switch {
		case !g.Valid:
			t += " Not valid."
		case !g.CoversAll:
			t += " Valid, but does not cover everything."
		default:
			t += " Valid; covers everything."
		}
		switch {
		case !g.Valid:
		case g.Trusted == nil:
			t += " Whether the signer is who they say is not known."
		case *g.Trusted:
			t += " Trusted here."
		default:
			t += " NOT trusted here" + after(": ", g.Doubt) + "."
		}
		out = append(out, t+" Certificate sha-256 "+g.Fingerprint+".")
	}
	for _, m := range w.Missing {
		out = append(out, "Missing: signed as "+m+".")
	}
	out = append(append(append(out, w.Reasons...), w.Differences...), w.Supersedes...)
	if w.Agreement != "" && (w.State == "intact" || w.State == "incomplete") {
		out = append(out, strings.ToUpper(w.Agreement[:1])+w.Agreement[1:]+".")
	}
	return out
}

func after(mark, text string) string {
	if text == "" {
		return ""
	}
	return mark + text
}
