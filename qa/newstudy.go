package qa

import (
	"errors"
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

// StudyParts is how many parts of each lot a study takes.
type StudyParts struct {
	Reference int `json:"reference"`
	Candidate int `json:"candidate"`
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
	if c.Verdict != Undecided || !c.Objective.AgainstMargin() || e == nil || e.Estimate == nil || e.Lower == nil {
		return
	}
	if c.asked.grouped {
		c.warn(WarnNotComputable, "", "new_study", "How many groups a new study needs is not computed.")
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
		SDRef: c.ref.summary.SD, SDCand: c.cand.summary.SD, Lower: math.Inf(-1), Upper: math.Inf(1),
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
		worst := 1.0
		for _, end := range []*float64{e.MarginLower, e.MarginUpper} {
			if end != nil {
				worst = max(worst, *end)
			}
		}
		d.SDRef *= worst
		if d.Paired {
			d.SDRef = c.widestContrast()
		}
	case e.Scale == scaleShift:
		d.SDRef = c.cand.summary.SD
	case d.Paired:
		d.SDRef = stats.MeanAndSD(c.pairDifferences()).SD
	}
	if c.Method == "pooled" {
		n, m := float64(c.ref.summary.N-1), float64(c.cand.summary.N-1)
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
		c.warn(WarnNotComputable, "", "new_study", "How many pairs would show the ratio of standard deviations is not computed.")
		return StudyParts{}, false
	}
	sd := func(s sample) float64 { return s.summary.SD }
	if c.Method == "log" {
		sd = func(s sample) float64 {
			x, _ := s.logarithms()
			return stats.MeanAndSD(x).SD
		}
	}
	n, m, _, err := stats.SpreadSize(stats.Design{SDRef: sd(c.ref), SDCand: sd(c.cand), Alpha: c.Alpha, SpreadRatio: *c.asked.spreadRatio}, c.lotsRatio(), power)
	return StudyParts{Reference: n, Candidate: m}, err == nil
}

// lotsRatio is how many candidate parts there are to one of the reference.
func (c *comparison) lotsRatio() float64 {
	return float64(c.cand.summary.N) / float64(c.ref.summary.N)
}

// partsForMean is the larger of what the mean needs and least; nil where no number would do.
func (c *comparison) partsForMean(d stats.Design, power float64, least StudyParts, path string) *StudyParts {
	n, m, err := stats.Parts(d, c.lotsRatio(), power)
	if err != nil {
		if !errors.Is(err, stats.ErrBeyondMargin) {
			c.warn(WarnNotComputable, "", path, "The size of a new study is not given: "+err.Error()+".")
		}
		return nil
	}
	if c.Equivalence.Scale == scaleShift { // n candidate parts are tested alone
		n, m = int(math.Ceil(float64(n)/c.lotsRatio()-1e-9)), n
	}
	return &StudyParts{Reference: max(n, least.Reference), Candidate: max(m, least.Candidate)}
}
