package qa

import (
	"errors"
	"fmt"
	"math"

	"lotpair/qa/stats"
)

// StudyFormat names the format of a StudySize.
const StudyFormat = "lotpair.size/1"

// The tests that a study may be planned for.
const (
	StudyPooled    = "pooled"
	StudyWelch     = "welch"
	StudyPaired    = "paired"
	StudyFractions = "miettinen-nurminen"
	StudySpread    = "f-interval" // of a study of the spread alone
)

// Study is a study that is planned: what is to be shown, what is taken to be true, and how many readings or how much power.
type Study struct {
	Objective       Objective
	Method          string     // StudyPooled, StudyWelch, StudyPaired, StudyFractions
	SD, SDCandidate float64    // of one reading; of the differences for StudyPaired, which has no second
	Fractions       [2]float64 // StudyFractions: the true fractions that fail, reference and candidate
	MarginLower     *float64   // nil where the objective has no such limit
	MarginUpper     *float64
	Shift           float64 // the true difference; StudyFractions has it from the fractions
	Alpha           float64
	Power           float64
	Ratio           float64 // candidate over reference readings
	SpreadRatio     float64 // 0 where none is asked; it may be asked without a margin
	Characteristics int     // so many independent ones must all pass
	Guard           float64 // taken off both ends of the margin
	Uncertainty     float64 // standard uncertainty of the measuring systems' bias in the difference; 0 where none is stated
	SDBetween       float64 // of the true means of groups; above 0 the groups are what is counted, and SD is within one
	PerGroup        int     // readings a group where groups are counted
	N               int     // reference readings (pairs); 0 where that is asked for
}

// StudySize is how large a study is and what it would show.
type StudySize struct {
	Format         string   `json:"format"`
	NReference     int      `json:"n_reference"`
	NCandidate     int      `json:"n_candidate"`
	Power          float64  `json:"power"`
	Method         string   `json:"method"`
	SmallestMargin *float64 `json:"smallest_margin,omitempty"` // N given: the narrowest symmetric margin shown with the power asked

	Guard       float64   `json:"guard,omitempty"`
	Uncertainty float64   `json:"uncertainty,omitempty"` // of the difference, standard
	PerGroup    int       `json:"per_group,omitempty"`   // n_reference and n_candidate count groups of so many readings
	Warnings    []Warning `json:"warnings,omitempty"`
}

// Size returns the smallest number of readings with which the study shows what it is to with at least the power asked, or with N
// given the power, both exact. With a spread ratio the power is that of showing mean and spread both.
func (s Study) Size() (StudySize, error) {
	switch {
	case s.Characteristics < 1:
		return StudySize{}, fmt.Errorf("characteristics: found %d, want at least 1", s.Characteristics)
	case s.N < 0 || s.N == 1 || s.N > mostPlanned:
		return StudySize{}, fmt.Errorf("n: found %d, want from 2 to %d", s.N, mostPlanned)
	case !(s.Power > 0 && s.Power < 1):
		return StudySize{}, fmt.Errorf("power: found %v, want a number above 0 and below 1", s.Power)
	case !(s.Ratio > 0) || math.IsInf(s.Ratio, 1) || s.N > 0 && float64(s.N)*s.Ratio > mostPlanned:
		return StudySize{}, fmt.Errorf("ratio: found %v, want a number above 0 and at most %d candidate readings", s.Ratio, mostPlanned)
	}
	if err := s.checkAround(); err != nil {
		return StudySize{}, err
	}
	out := StudySize{Format: StudyFormat, Method: s.Method, Guard: s.Guard, Uncertainty: s.Uncertainty, PerGroup: s.PerGroup}
	if s.spreadOnly() {
		out.Method = StudySpread
	}
	// Of independent characteristics that must all pass each has the root of the power.
	k := float64(s.Characteristics)
	each := math.Pow(s.Power, 1/k)
	var one float64
	var err error
	if s.N > 0 {
		out.NReference, out.NCandidate = s.N, stats.Share(s.N, s.Ratio)
		one, err = s.powerOf(out.NReference, out.NCandidate)
	} else {
		out.NReference, out.NCandidate, one, err = s.smallest(each)
	}
	if err != nil {
		return StudySize{}, s.explain(err, out)
	}
	out.Power = math.Pow(one, k)
	if s.N > 0 && s.Objective.AgainstMargin() && s.Method != StudyFractions && !s.spreadOnly() {
		d := s.design()
		d.NRef, d.NCand = out.NReference, out.NCandidate
		if m, err := stats.SmallestMargin(d, each); err == nil && m > 0 {
			m += s.Guard
			out.SmallestMargin = &m
		}
	}
	out.Warnings = s.warnings(out)
	return out, nil
}

// mostPlanned is the largest number of readings a lot that is planned for.
const mostPlanned = 100_000_000

func (s Study) spreadOnly() bool {
	return s.SpreadRatio > 0 && s.MarginLower == nil && s.MarginUpper == nil && s.Objective.AgainstMargin()
}

func (s Study) design() stats.Design {
	d := stats.Design{
		Aim: aimOf(s.Objective), Paired: s.Method == StudyPaired, Welch: s.Method == StudyWelch,
		SDRef: s.SD, SDCand: s.SDCandidate, Alpha: s.Alpha, Shift: s.Shift, SpreadRatio: s.SpreadRatio, Bias: s.Uncertainty,
		Lower: math.Inf(-1), Upper: math.Inf(1),
	}
	if s.MarginLower != nil {
		d.Lower = *s.MarginLower + s.Guard
	}
	if s.MarginUpper != nil {
		d.Upper = *s.MarginUpper - s.Guard
	}
	if s.SDBetween > 0 { // of the mean of a group
		n := math.Sqrt(float64(s.PerGroup))
		d.SDRef, d.SDCand = math.Hypot(s.SDBetween, s.SD/n), math.Hypot(s.SDBetween, s.SDCandidate/n)
	}
	if s.spreadOnly() {
		d.Aim, d.Lower, d.Upper, d.Shift = stats.AimWithin, -1, 1, 0 // not looked at
	}
	return d
}

func (s Study) fractionDesign() stats.FractionDesign {
	d := stats.FractionDesign{Aim: aimOf(s.Objective), PRef: s.Fractions[0], PCand: s.Fractions[1], Alpha: s.Alpha}
	if s.MarginLower != nil {
		d.Lower = *s.MarginLower + s.Guard
	}
	if s.MarginUpper != nil {
		d.Upper = *s.MarginUpper - s.Guard
	}
	return d
}

// powerOf is the power of one characteristic with n and m readings.
func (s Study) powerOf(n, m int) (float64, error) {
	if s.Method == StudyFractions {
		d := s.fractionDesign()
		d.NRef, d.NCand = n, m
		return d.Power()
	}
	d := s.design()
	d.NRef, d.NCand = n, m
	if s.spreadOnly() {
		return d.SpreadPower()
	}
	return d.Power()
}

func (s Study) smallest(power float64) (n, m int, achieved float64, err error) {
	switch {
	case s.Method == StudyFractions:
		return stats.FractionSize(s.fractionDesign(), s.Ratio, power)
	case s.spreadOnly():
		return stats.SpreadSize(s.design(), s.Ratio, power)
	}
	return stats.Size(s.design(), s.Ratio, power)
}

// explain says what is wrong in the words of the question.
func (s Study) explain(err error, out StudySize) error {
	switch {
	case errors.Is(err, stats.ErrTooFew):
		return fmt.Errorf("n: found %d reference and %d candidate readings, want at least 2 of each", out.NReference, out.NCandidate)
	case errors.Is(err, stats.ErrNoSize):
		return fmt.Errorf("power: found no number of readings up to %d that has it, want a true difference farther from the margin, or less power", mostPlanned)
	case errors.Is(err, stats.ErrBeyondMargin) && s.SpreadRatio > 0 && s.SDCandidate >= s.SpreadRatio*s.SD:
		return fmt.Errorf("spread ratio: found %v with true standard deviations in the ratio %v, want a smaller true ratio: no number of readings would show it", s.SpreadRatio, s.SDCandidate/s.SD)
	case errors.Is(err, stats.ErrBias):
		return fmt.Errorf("uncertainty: found %v of the difference, want less: what is not known of the gauges' bias alone leaves less than the power asked, with any number of readings", s.Uncertainty)
	case errors.Is(err, stats.ErrBeyondMargin) && s.Objective.AgainstMargin():
		return fmt.Errorf("shift: found %v, want a true difference inside the margin: on or beyond it no number of readings will do; state n to see the power there", s.shift())
	case errors.Is(err, stats.ErrBeyondMargin):
		return fmt.Errorf("shift: found %v, want a true difference in the direction that is to be shown; state n to see the power there", s.shift())
	}
	return err
}

func (s Study) shift() float64 {
	if s.Method == StudyFractions {
		return s.Fractions[1] - s.Fractions[0]
	}
	return s.Shift
}
