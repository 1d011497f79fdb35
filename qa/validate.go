package qa

import (
	"fmt"
	"math"
	"slices"
	"strings"
)

// PlanFault is one thing wrong with a plan: which key, what was found, what was wanted and what to do.
type PlanFault struct {
	Key   string // as in the plan file: "criterion.alpha", "characteristic 2 (Bore).lower"
	Found string
	Want  string
	Do    string
}

func (f PlanFault) Error() string {
	return fmt.Sprintf("%s: found %s, want %s; %s", f.Key, f.Found, f.Want, f.Do)
}

// Validate lists all that is wrong with the plan by itself, before any file is opened. What needs the readings (a limit that
// only the file has) is found by Compare.
func (p Plan) Validate() []PlanFault {
	v := &validator{}
	if p.Format != PlanFormat {
		v.fault("format", fmt.Sprintf("%q", p.Format), fmt.Sprintf("%q", PlanFormat), "write this as the first line of the plan")
	}
	for _, side := range []Side{Reference, Candidate} {
		v.lot(string(side), p.LotOf(side))
	}
	if r, c := p.Reference, p.Candidate; r.File != "" && r.File == c.File && r.Sheet == c.Sheet && r.Lot == c.Lot {
		v.fault("candidate.lot", fmt.Sprintf("%q, the reference's own lot of the same file", c.Lot), "another lot", "name the candidate lot")
	}
	v.reading(p.Reading)
	v.criterion("criterion", p.Criterion)
	names := map[string]bool{}
	for i, c := range p.Characteristics {
		key := fmt.Sprintf("characteristic %d (%s)", i+1, c.Name)
		if c.Name == "" {
			v.fault(key+".name", "none", "a name", "name the characteristic")
		}
		if names[c.Name] {
			v.fault(key+".name", fmt.Sprintf("%q a second time", c.Name), "each name once", "remove or rename one")
		}
		names[c.Name] = true
		v.characteristic(key, c)
		v.asked(key, p, c)
	}
	if len(p.Characteristics) == 0 {
		v.asked("criterion", p, Characteristic{})
	}
	v.family(p)
	for i, s := range p.Signatures {
		key := fmt.Sprintf("signatures %d.meaning", i+1)
		if s.Meaning == "" {
			v.fault(key, "none", "prepared, reviewed or approved", "state what the signature stands for")
		}
		v.oneOf(key, s.Meaning, "prepared", "reviewed", "approved")
	}
	v.positive("record.quantity_reference", p.Record.QuantityReference)
	v.positive("record.quantity_candidate", p.Record.QuantityCandidate)
	if f := p.Performance; f != nil {
		v.share("performance.coverage", f.Coverage)
		v.share("performance.confidence", f.Confidence)
	}
	if s := p.Sensitivity; s != nil && s.Resamples != 0 && (s.Resamples < fewestResamples || s.Resamples > mostResamples) {
		v.fault("sensitivity.resamples", fmt.Sprint(s.Resamples), fmt.Sprintf("0, or %d to %d", fewestResamples, mostResamples), "correct the plan")
	}
	return v.faults
}

// encodings are the text encodings that a plan may state, in the spellings that are understood.
var encodings = []string{"", "utf-8", "utf8", "utf-16", "utf16", "utf-16le", "utf-16be", "windows-1252", "cp1252", "latin-1", "latin1", "iso-8859-1"}

type validator struct{ faults []PlanFault }

func (v *validator) fault(key, found, want, do string) {
	v.faults = append(v.faults, PlanFault{Key: key, Found: found, Want: want, Do: do})
}

// oneOf accepts the empty text as "left out".
func (v *validator) oneOf(key, value string, allowed ...string) bool {
	if value == "" || slices.Contains(allowed, value) {
		return true
	}
	v.fault(key, fmt.Sprintf("%q", value), strings.Join(allowed, ", "), "choose one of these")
	return false
}

func (v *validator) finite(key string, x *float64) {
	if x != nil && (math.IsNaN(*x) || math.IsInf(*x, 0)) {
		v.fault(key, fmt.Sprint(*x), "a finite number", "correct the plan")
	}
}

func (v *validator) positive(key string, x *float64) {
	if x != nil && (!(*x > 0) || math.IsInf(*x, 0)) {
		v.fault(key, fmt.Sprint(*x), "a number above 0", "correct the plan")
	}
}

func (v *validator) share(key string, x float64) {
	if x != 0 && !(x > 0 && x < 1) {
		v.fault(key, fmt.Sprint(x), "a number above 0 and below 1", "correct the plan")
	}
}

func (v *validator) lot(key string, l LotPlan) {
	if l.File == "" {
		v.fault(key+".file", "none", "the name of the file with the readings, relative to the plan", "name it")
	}
	v.oneOf(key+".values", l.Values, "absolute", "deviation")
}

func (v *validator) reading(r ReadingPlan) {
	v.oneOf("reading.layout", r.Layout, "row-per-part", "column-per-lot", "sheet-per-lot", "row-per-characteristic")
	v.oneOf("reading.decimal", r.Decimal, ".", ",")
	if !slices.Contains(encodings, strings.ToLower(r.Encoding)) {
		v.fault("reading.encoding", fmt.Sprintf("%q", r.Encoding), "utf-8, utf-16 or windows-1252", "choose one of these")
	}
	if r.HeaderRow < 0 {
		v.fault("reading.header_row", fmt.Sprint(r.HeaderRow), "a row number from 1", "correct the plan")
	}
	v.oneOf("reading.non_detect", r.NonDetect, NonDetectExclude, NonDetectLimit, NonDetectHalfLimit, NonDetectZero)
	for i, e := range r.Exclude {
		key := fmt.Sprintf("reading.exclude %d", i+1)
		if strings.TrimSpace(e.Reason) == "" {
			v.fault(key+".reason", "none", "why the cell is left out", "write the reason")
		}
		if e.Cell == "" {
			v.fault(key+".cell", "none", "a cell such as Data!D17", "name the cell")
		}
	}
}

func (v *validator) criterion(key string, c Criterion) {
	v.oneOf(key+".claim", c.Claim, "lots", "sources")
	v.oneOf(key+".groups", c.Groups, "none", "random")
	v.oneOf(key+".overall", c.Overall, "all")
	v.oneOf(key+".second_sample", c.SecondSample, "none", "one")
	if c.Claim == "sources" && c.Groups == "none" {
		v.fault(key+".groups", "none beside the claim sources", "random, which that claim implies", "leave groups out")
	}
	if c.Power != nil && !(*c.Power > 0 && *c.Power < 1) {
		v.fault(key+".power", fmt.Sprint(*c.Power), "a number above 0 and below 1", "correct the plan")
	}
	v.positive(key+".spread_ratio", c.SpreadRatio)
	if c.Margin != nil {
		v.margin(key+".margin", *c.Margin)
	}
}

func (v *validator) characteristic(key string, c Characteristic) {
	v.oneOf(key+".kind", c.Kind, "numeric", "attribute")
	if c.Kind == "attribute" && len(c.Failed) == 0 {
		v.fault(key+".failed", "none", "the words that mark a failed part", "list them, as in failed = [\"NOK\", \"1\"]")
	}
	if c.Kind == "attribute" {
		for _, x := range []struct {
			key    string
			stated bool
		}{
			{"lower", c.Lower != nil},
			{"target", c.Target != nil},
			{"upper", c.Upper != nil},
			{"sd", c.SD != nil},
			{"uncertainty", c.Uncertainty != nil},
			{"spread_ratio", c.SpreadRatio != nil},
			{"method", c.Method != ""},
		} {
			if x.stated {
				v.fault(key+"."+x.key, "it for an attribute, which has no measured values", "it only for kind = \"numeric\"", "remove it")
			}
		}
	}
	if c.Kind != "attribute" && len(c.Failed) > 0 {
		v.fault(key+".failed", fmt.Sprintf("%q without kind = \"attribute\"", c.Failed), "it only for an attribute", "state the kind, or remove it")
	}
	v.finite(key+".lower", c.Lower)
	v.finite(key+".target", c.Target)
	v.finite(key+".upper", c.Upper)
	if w, ok := c.Tolerance(); ok && !(w > 0) {
		v.fault(key+".upper", fmt.Sprint(*c.Upper), fmt.Sprintf("more than the lower limit %v", *c.Lower), "correct the limits")
	}
	v.positive(key+".sd", c.SD)
	if c.Decimals != nil && (*c.Decimals < 0 || *c.Decimals > 12) {
		v.fault(key+".decimals", fmt.Sprint(*c.Decimals), "0 to 12", "correct the plan")
	}
	v.positive(key+".spread_ratio", c.SpreadRatio)
	if u := c.Uncertainty; u != nil && !(u.Reference >= 0 && u.Candidate >= 0 && !math.IsInf(u.Reference+u.Candidate, 0)) {
		v.fault(key+".uncertainty", fmt.Sprint(*u), "two standard uncertainties from 0", "correct the plan")
	}
	if c.Margin != nil {
		v.margin(key+".margin", *c.Margin)
	}
}
