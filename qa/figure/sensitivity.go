package figure

import (
	"math"
	"strings"

	"lotpair/qa"
)

// Sensitivity is the verdict by every way of computing it at the usual size.
func Sensitivity(c qa.Comparison) Figure {
	return SensitivityAt(c, FacingWidth, FacingHeight)
}

// SensitivityAt is one interval a line, each on the scale of the margin: the plan's own first, then every other way of
// computing it with what its verdict would be.
func SensitivityAt(c qa.Comparison, width, height float64) Figure {
	const words, verdict, least, most = 138, 104, 20.0, 40.0
	rows := append([]qa.SensitivityResult{own(c)}, c.Sensitivity...)
	f := Figure{Width: math.Max(width, FacingMinWidth), Height: math.Max(height, FacingMinHeight), Title: c.Name + ": the verdict by every way of computing it"}
	row := math.Min(most, math.Max(least, (f.Height-head-6)/float64(len(rows))))
	f.Height = math.Max(f.Height, head+6+row*float64(len(rows)))
	line := f.Width - words - verdict
	one := line / 2 / Reach
	for _, l := range []struct {
		x    float64
		text string
	}{{-1, "− margin"}, {0, "0"}, {1, "+ margin"}} {
		x := words + line/2 + l.x*math.Max(one, 44)
		f.add(Mark{Kind: Label, Name: "scale", Role: Muted, X: x, Y: head - 6, Size: 10.5, Anchor: Middle, Text: l.text})
	}
	for i, r := range rows {
		top := head + row*float64(i)
		v := c
		if i > 0 {
			v = as(c, r)
		}
		for _, m := range newSpine(v, line, row).Marks {
			m.X, m.X2, m.Y, m.Y2 = m.X+words, m.X2+words, m.Y+top, m.Y2+top
			f.add(m)
		}
		f.add(Mark{Kind: Line, Name: "row", Role: Rule, X: 0, Y: top + row, X2: f.Width, Y2: top + row, Size: 0.7},
			Mark{Kind: Label, Name: "way", Role: Text, X: 0, Y: top + row/2 + 4, Size: 11.5, Bold: i == 0, Text: wayText(strings.TrimSpace(r.Method+" "+r.Cell), i == 0)},
			Mark{Kind: Label, Name: "verdict", Role: Text, X: f.Width, Y: top + row/2 + 4, Size: 11.5, Anchor: End, Bold: i == 0, Text: string(r.Verdict)})
	}
	return f
}

// own is the plan's own verdict as a line.
func own(c qa.Comparison) qa.SensitivityResult {
	r := qa.SensitivityResult{Method: c.Method, Verdict: c.Verdict}
	if e := c.Equivalence; e != nil && c.Objective.AgainstMargin() {
		r.Verdict = e.Verdict
	}
	return r
}

// as is the comparison with the interval of another way of computing it.
func as(c qa.Comparison, r qa.SensitivityResult) qa.Comparison {
	if e := c.Equivalence; e != nil && c.Objective.AgainstMargin() {
		other := *e
		other.Estimate, other.Lower, other.Upper = r.Estimate, r.Lower, r.Upper
		c.Equivalence = &other
		return c
	}
	c.Difference.Estimate, c.Difference.Lower, c.Difference.Upper = r.Estimate, r.Lower, r.Upper
	return c
}

// wayText is a way of computing the verdict in words.
func wayText(method string, planned bool) string {
	s := map[string]string{
		"welch": "Welch", "pooled": "pooled", "paired": "paired", "log": "logarithms", "trimmed": "trimmed means", "ranks": "ranks",
		"exclusions-put-back": "exclusions put back", "outlying-removed": "outlying removed",
		"non-detects-best": "non-detects at best", "non-detects-worst": "non-detects at worst",
		"miettinen-nurminen": "score", "newcombe": "Newcombe", "stratified": "within groups",
	}[method]
	if s == "" {
		s = strings.ReplaceAll(method, "exclusion-put-back", "put back")
		s = strings.ReplaceAll(s, "-", " ")
	}
	if planned {
		s += ", as planned"
	}
	return s
}
