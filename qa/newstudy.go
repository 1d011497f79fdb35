package qa

import (
	"errors"
	"fmt"
	"math"

	"lotpair/qa/stats"
)

// DefaultPower is the power that a study is planned for where the plan states none (common practice, no source).
const DefaultPower = 0.90

// NewStudyResult says how many parts a lot a new, separate study would need to show what these readings left undecided, with
// standard deviations as observed. It is never an invitation to extend the present sample.
type NewStudyResult struct {
	Power      float64     `json:"power"`
	AtZero     *StudyParts `json:"at_zero"`     // at a true difference of 0
	AtEstimate *StudyParts `json:"at_estimate"` // at the difference found; nil where that lies outside the margin
}

// StudyParts is how many parts of each lot a study takes. Where groups are random it takes so many groups of each, with as many
// parts a group as here.
type StudyParts struct {
	Reference       int `json:"reference"`
	Candidate       int `json:"candidate"`
	GroupsReference int `json:"groups_reference,omitempty"`
	GroupsCandidate int `json:"groups_candidate,omitempty"`
}

// power is what the plan asks of a study.
func (p Plan) power() float64 {
	if p.Criterion.Power == nil {
		return DefaultPower
	}
	return *p.Criterion.Power
}

// aimOf is what an objective comes to for a design.
func aimOf(o Objective) stats.Aim {
	return map[Objective]stats.Aim{
		Equivalence: stats.AimWithin, NotLower: stats.AimNotLower, NotHigher: stats.AimNotHigher,
		Difference: stats.AimDifference, Lower: stats.AimLower, Higher: stats.AimHigher,
	}[o]
}

// newStudy sizes a new study where this one left the verdict undecided (contract: result, "Definitions").
func (c *comparison) newStudy(plan Plan) {
	e := c.Equivalence
	if c.known.verdictOnly || c.Verdict != Undecided || !c.Objective.AgainstMargin() || e == nil || e.Estimate == nil || e.Lower == nil {
		return
	}
	p := plan.power()
	mean, estimate, ok := c.studyOfMean()
	if !ok {
		c.warn(WarnNotComputable, "", "new_study", "The size of a new study needs some variation in each lot.")
		return
	}
	s := &NewStudyResult{Power: p}
	least, ok := c.partsForSpread(p)
	if ok {
		s.AtZero = c.partsForMean(mean, p, least, "new_study.at_zero")
		mean.Shift = estimate
		s.AtEstimate = c.partsForMean(mean, p, least, "new_study.at_estimate")
	}
	c.NewStudy = s
}

// studyOfMean is the design of a new study of the mean on the scale on which the margin is tested, its true shift 0, and the
// shift found here.
func (c *comparison) studyOfMean() (d stats.Design, estimate float64, ok bool) {
	e := c.Equivalence
	d = stats.Design{
		Aim: aimOf(c.Objective), Alpha: c.Alpha, Paired: c.Method == "paired" || e.Scale == scaleShift, Welch: c.Method != "pooled",
		SDRef: c.ref.summary.SD, SDCand: c.cand.summary.SD, Lower: math.Inf(-1), Upper: math.Inf(1), Bias: c.bias(),
	}
	size := c.sizes()
	if c.asked.grouped { // the groups are what is counted, their means what varies
		ref, cand, ok := c.groupMeans()
		if !ok {
			return d, 0, false
		}
		d.SDRef, d.SDCand = ref.SD, cand.SD
	}
	onScale := func(v float64) float64 { return v }
	switch {
	case e.Scale == scaleRatio && c.Method == "log":
		x, ok1 := c.ref.logarithms()
		y, ok2 := c.cand.logarithms()
		if !ok1 || !ok2 {
			return d, 0, false
		}
		d.SDRef, d.SDCand = stats.MeanAndSD(x).SD, stats.MeanAndSD(y).SD
		onScale = math.Log
	case e.Scale == scaleRatio:
		// Of the two contrasts candidate - (1 -+ f) reference the upper one varies more: with its standard error for both the
		// number is at most a little too large.
		mean := math.Abs(c.ref.summary.Mean)
		onScale = func(v float64) float64 { return (v - 1) * mean }
		d.SDRef *= c.farthest()
		if d.Paired {
			d.SDRef = c.widestContrast()
		}
	case e.Scale == scaleShift:
		d.SDRef = c.cand.summary.SD
	case d.Paired:
		d.SDRef = stats.MeanAndSD(c.pairDifferences()).SD
	}
	if c.Method == "pooled" {
		n, m := float64(size.Reference-1), float64(size.Candidate-1)
		sd := math.Sqrt((n*d.SDRef*d.SDRef + m*d.SDCand*d.SDCand) / (n + m))
		d.SDRef, d.SDCand = sd, sd
	}
	if e.MarginLower != nil {
		d.Lower = onScale(*e.MarginLower)
	}
	if e.MarginUpper != nil {
		d.Upper = onScale(*e.MarginUpper)
	}
	estimate = onScale(*e.Estimate)
	return d, estimate, d.SDRef > 0 && (d.Paired || d.SDCand > 0) && finite(d.SDRef, d.SDCand, estimate)
}

// farthest is the largest ratio at an end of the margin, at least 1.
func (c *comparison) farthest() float64 {
	worst := 1.0
	for _, end := range []*float64{c.margin.lower, c.margin.upper} {
		if end != nil {
			worst = max(worst, *end)
		}
	}
	return worst
}

// widestContrast is the largest standard deviation, over the ends of the margin, of candidate - end*reference in pairs.
func (c *comparison) widestContrast() float64 {
	widest := 0.0
	for _, end := range []*float64{c.Equivalence.MarginLower, c.Equivalence.MarginUpper} {
		if end == nil {
			continue
		}
		d := make([]float64, len(c.ref.values))
		for i, r := range c.ref.values {
			d[i] = c.cand.values[i] - *end*r
		}
		widest = max(widest, stats.MeanAndSD(d).SD)
	}
	return widest
}

// partsForSpread is what the spread needs where a ratio was asked; false where no number would show it, or none is known.
func (c *comparison) partsForSpread(power float64) (StudyParts, bool) {
	if c.asked.spreadRatio == nil {
		return StudyParts{}, true
	}
	if c.Method == "paired" {
		s, err := stats.PitmanMorgan(c.ref.values, c.cand.values, 1-2*c.Alpha)
		if err != nil {
			return StudyParts{}, false // said where the spread was compared
		}
		n, err := stats.PairedSpreadSize(stats.PairedSpreadDesign{Ratio: s.SDRatio, Correlation: s.Correlation, Asked: *c.asked.spreadRatio, Alpha: c.Alpha}, power)
		return StudyParts{Reference: n, Candidate: n}, err == nil
	}
	sd := func(s sample) float64 { return s.summary.SD }
	if c.Method == "log" {
		sd = func(s sample) float64 {
			x, _ := s.logarithms()
			return stats.MeanAndSD(x).SD
		}
	}
	n, m, _, err := stats.SpreadSize(stats.Design{SDRef: sd(c.ref), SDCand: sd(c.cand), Alpha: c.Alpha, SpreadRatio: *c.asked.spreadRatio}, c.partsRatio(), power)
	return StudyParts{Reference: n, Candidate: m}, err == nil
}

// sizes are how many readings each lot has, or groups where those are what is tested.
func (c *comparison) sizes() StudyParts {
	if c.asked.grouped {
		return StudyParts{Reference: c.Groups.Reference, Candidate: c.Groups.Candidate}
	}
	return StudyParts{Reference: c.ref.summary.N, Candidate: c.cand.summary.N}
}

// partsRatio is how many candidate parts there are to one of the reference.
func (c *comparison) partsRatio() float64 {
	return float64(c.cand.summary.N) / float64(c.ref.summary.N)
}

// partsForMean is the larger of what the mean needs and least; nil where no number would do.
func (c *comparison) partsForMean(d stats.Design, power float64, least StudyParts, path string) *StudyParts {
	size := c.sizes()
	ratio := float64(size.Candidate) / float64(size.Reference)
	n, m, err := stats.Parts(d, ratio, power)
	switch {
	case errors.Is(err, stats.ErrBeyondMargin):
		return nil
	case errors.Is(err, stats.ErrBias):
		c.warn(WarnUncertainty, "", path, fmt.Sprintf("No number of parts would show it with probability %s: what is not known of the measuring systems' bias alone takes more.", Fixed(power, 2)))
		return nil
	case err != nil:
		c.warn(WarnNotComputable, "", path, "The size of a new study is not given: "+err.Error()+".")
		return nil
	}
	if c.Equivalence.Scale == scaleShift { // n candidate parts are tested alone
		n, m = int(math.Ceil(float64(n)/ratio-1e-9)), n
	}
	if !c.asked.grouped {
		return &StudyParts{Reference: max(n, least.Reference), Candidate: max(m, least.Candidate)}
	}
	p := &StudyParts{}
	p.Reference, p.GroupsReference = inGroups(n, c.ref.summary.N, size.Reference, least.Reference)
	p.Candidate, p.GroupsCandidate = inGroups(m, c.cand.summary.N, size.Candidate, least.Candidate)
	return p
}

// inGroups is how many parts so many groups hold, and at least least parts, where parts and groups are how many there are now.
func inGroups(needed, parts, groups, least int) (int, int) {
	each := (parts + groups - 1) / groups
	needed = max(needed, (least+each-1)/each)
	return needed * each, needed
}
