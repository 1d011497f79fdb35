package qa

import (
	"errors"
	"fmt"
	"math"

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
	return stats.MeanAndSD(stats.GroupMeans(x)), stats.MeanAndSD(stats.GroupMeans(y)), true
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

// groups says how many groups each lot has, and what cannot be shown with one.
func (c *comparison) groups() {
	if !c.asked.grouped {
		return
	}
	x, y := groupsOf(c.ref), groupsOf(c.cand)
	c.Groups = &GroupsResult{Reference: len(x), Candidate: len(y)}
	c.components(x, y)
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

// components splits the variation inside the lots into that between groups and that within them, pooled over both lots: mean
// squares by their degrees of freedom, the group size likewise (Searle, Casella and McCulloch 1992, Variance Components,
// section 3.6, from memory).
func (c *comparison) components(lots ...[][]float64) {
	var ssBetween, dfBetween, ssWithin, dfWithin, size float64
	for _, groups := range lots {
		a, err := stats.OneWay(groups)
		if err != nil && !errors.Is(err, stats.ErrConstant) {
			return
		}
		ssBetween, dfBetween = ssBetween+a.SSBetween, dfBetween+a.DFBetween
		ssWithin, dfWithin = ssWithin+a.SSWithin, dfWithin+a.DFWithin
		n, squares := 0.0, 0.0
		for _, g := range groups {
			n += float64(len(g))
			squares += float64(len(g) * len(g))
		}
		size += n - squares/n // (k - 1) n0
	}
	within := ssWithin / dfWithin
	between := math.Max(0, (ssBetween/dfBetween-within)/(size/dfBetween))
	if finite(within, between) {
		c.Groups.SDWithin, c.Groups.SDBetween = ptr(math.Sqrt(within)), ptr(math.Sqrt(between))
	}
}
