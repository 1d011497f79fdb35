package qa

import (
	"fmt"

	"lotpair/qa/stats"
)

// GroupsResult counts the groups of each lot and splits the variation: between groups and within them, pooled over both lots
// (one-way analysis of variance inside each lot; a negative component is shown as 0).
type GroupsResult struct {
	Reference int      `json:"reference"`
	Candidate int      `json:"candidate"`
	SDBetween *float64 `json:"sd_between,omitempty"`
	SDWithin  *float64 `json:"sd_within,omitempty"`
}

// groupMeans are the summaries of the unweighted means of each lot's groups; false, with the reason said, where a lot has fewer
// than two groups or readings without one.
func (c *comparison) groupMeans() (ref, cand stats.Summary, ok bool) {
	x, y := groupsOf(c.ref), groupsOf(c.cand)
	if len(x) < 2 || len(y) < 2 {
		return ref, cand, false
	}
	return stats.Summarize(means(x)), stats.Summarize(means(y)), true
}

// groupsOf are the values of each group, in the order in which the groups first appear.
func groupsOf(s sample) [][]float64 {
	at := map[string]int{}
	var out [][]float64
	for _, r := range s.used {
		i, ok := at[r.Group]
		if !ok {
			i = len(out)
			at[r.Group] = i
			out = append(out, nil)
		}
		out[i] = append(out[i], r.Value)
	}
	return out
}

func means(groups [][]float64) []float64 {
	out := make([]float64, len(groups))
	for i, g := range groups {
		out[i] = stats.Summarize(g).Mean
	}
	return out
}

// groups says how many groups each lot has, and what cannot be shown with one.
func (c *comparison) groups() {
	if !c.asked.grouped {
		return
	}
	x, y := groupsOf(c.ref), groupsOf(c.cand)
	c.Groups = &GroupsResult{Reference: len(x), Candidate: len(y)}
	for _, s := range []struct {
		side Side
		n    int
	}{{Reference, len(x)}, {Candidate, len(y)}} {
		if s.n < 2 {
			c.warn(WarnOneGroup, s.side, "groups", fmt.Sprintf("The %s holds %s: how much groups differ among themselves cannot be seen, and nothing is decided.", s.side, Count(s.n, "group", "groups")))
		}
	}
	c.warn(WarnIndependence, "", "spread", "Everything but the means is computed as if the readings were independent, which readings of one group are not.")
}
