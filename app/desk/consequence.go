package desk

import (
	"fmt"

	"lotpair/importers"
	"lotpair/qa"
)

// Consequences say what a criterion comes to, a line a characteristic: the margin in the unit, what it permits, how many parts
// it needs. What stands in the way is said first. At most so many lines are said.
func Consequences(p qa.Plan, most int) []string {
	var out []string
	for _, f := range p.Validate() {
		switch {
		case importers.StillToCome(f):
		case lacksMargin(f):
			return []string{noMargin}
		default:
			out = append(out, f.Error())
		}
	}
	p = Settled(p)
	for i, c := range p.Characteristics {
		if len(out) >= most {
			return append(out, fmt.Sprintf("and %s more", qa.Count(len(p.Characteristics)-i, "characteristic", "characteristics")))
		}
		out = append(out, c.Name+": "+consequence(planned(p, c)))
	}
	return out
}

// consequence says what a margin means for one characteristic.
func consequence(p Planned) string {
	if p.Fault != "" {
		return p.Fault
	}
	text := p.Margin
	if w, ok := p.Characteristic.Tolerance(); ok && w > 0 && (p.Lower != nil || p.Upper != nil) {
		text += fmt.Sprintf(", %s %% of the tolerance each side", qa.Fixed(100*max(absolute(p.Lower), absolute(p.Upper))/w, 1))
	}
	if m := p.Permits; m != nil {
		text += fmt.Sprintf("; a mean there leaves Ppk %s, %s outside the limits", qa.Fixed(m.Ppk, 2), qa.ShareText(m.Outside))
	}
	switch {
	case p.N > 0:
		text += fmt.Sprintf("; %d parts a lot", p.N)
	case p.SD == 0:
		text += "; with a planned sd it is said how many parts show it"
	}
	return text
}
