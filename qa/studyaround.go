package qa

import (
	"errors"
	"fmt"
	"math"
)

// The codes of warnings that a Study gives beside WarnUncertainty.
const (
	WarnCannotPass = "cannot-pass" // not even lots that are alike are expected to
	WarnOneLevel   = "one-level"   // groups of one reading: between and within are not told apart
)

// checkAround checks what stands around a study: guard, uncertainty and groups.
func (s Study) checkAround() error {
	switch {
	case !(s.Guard >= 0) || math.IsInf(s.Guard, 1):
		return fmt.Errorf("guard: found %v, want a number from 0 in the unit", s.Guard)
	case !(s.Uncertainty >= 0) || math.IsInf(s.Uncertainty, 1):
		return fmt.Errorf("uncertainty: found %v, want a standard uncertainty from 0", s.Uncertainty)
	case !(s.SDBetween >= 0) || math.IsInf(s.SDBetween, 1):
		return fmt.Errorf("standard deviation between groups: found %v, want a number above 0", s.SDBetween)
	case s.SDBetween > 0 && s.PerGroup < 1:
		return fmt.Errorf("readings a group: found %d, want at least 1", s.PerGroup)
	case s.SDBetween > 0 && (s.Method == StudyPaired || s.Method == StudyFractions || s.SpreadRatio > 0):
		return errors.New("groups: found them beside pairs, fractions or a ratio of standard deviations, want none of these")
	case s.Guard > 0 && !s.Objective.AgainstMargin():
		return fmt.Errorf("guard: found %v with the objective %s, which has no margin", s.Guard, s.Objective)
	}
	low, high := math.Inf(-1), math.Inf(1)
	if s.MarginLower != nil {
		low = *s.MarginLower + s.Guard
	}
	if s.MarginUpper != nil {
		high = *s.MarginUpper - s.Guard
	}
	if s.Guard > 0 && (low >= 0 && *s.MarginLower < 0 || high <= 0 && *s.MarginUpper > 0 || !(low < high)) {
		return fmt.Errorf("guard: found %v, want less than the margin", s.Guard)
	}
	return nil
}

// warnings are what a planner must know beside the numbers.
func (s Study) warnings(out StudySize) []Warning {
	if !s.Objective.AgainstMargin() || s.Method == StudyFractions || s.spreadOnly() {
		return nil
	}
	d := s.design()
	d.NRef, d.NCand = out.NReference, out.NCandidate
	var w []Warning
	nearest := math.Min(math.Abs(d.Lower), math.Abs(d.Upper))
	if nearest < coverage*s.Uncertainty {
		w = append(w, Warning{Code: WarnUncertainty, Path: "uncertainty", Text: nearUncertainty(s.Uncertainty)})
	}
	if half, room := d.HalfWidth(), d.Room(); half >= room {
		w = append(w, Warning{Code: WarnCannotPass, Path: "n_reference", Text: fmt.Sprintf("The interval is expected to reach %s to either side, and the margin leaves %s: the study is not expected to pass even where the lots are alike.", ThreeDigits(half), ThreeDigits(room))})
	}
	if s.SDBetween > 0 && s.PerGroup == 1 {
		w = append(w, Warning{Code: WarnOneLevel, Path: "per_group", Text: "With one reading a group the study cannot tell how much groups differ from how much parts of a group do."})
	}
	return w
}

// ThreeDigits writes a number with three digits that count.
func ThreeDigits(v float64) string {
	if v == 0 || math.IsInf(v, 0) {
		return Plain(v)
	}
	return Fixed(v, max(0, min(12, 2-int(math.Floor(math.Log10(math.Abs(v)))))))
}

// DifferenceUncertainty is the standard uncertainty of a difference measured with two systems of these, taken as independent.
func DifferenceUncertainty(reference, candidate float64) float64 {
	return math.Hypot(reference, candidate)
}
