package qa

// Verdict is what the criterion says of the readings.
type Verdict string

// The verdicts (contract: result, "Verdicts").
const (
	Equivalent    Verdict = "equivalent"
	NotEquivalent Verdict = "not equivalent"
	Undecided     Verdict = "undecided"
	Demonstrated  Verdict = "demonstrated"
	Contradicted  Verdict = "contradicted"
	Different     Verdict = "different"
	IsLower       Verdict = "lower"
	IsHigher      Verdict = "higher"
	NoDifference  Verdict = "no difference shown"
)

// Shown says whether the verdict is what was to be shown. No difference shown never is.
func (v Verdict) Shown() bool {
	switch v {
	case Equivalent, Demonstrated, Different, IsLower, IsHigher:
		return true
	}
	return false
}

// Refuted says whether the interval lies wholly outside the margin.
func (v Verdict) Refuted() bool { return v == NotEquivalent || v == Contradicted }

// againstMargin gives the verdict from the 1 - 2 alpha interval and the bounds that are asked; the inside is strict.
func againstMargin(o Objective, low, high float64, lower, upper *float64) Verdict {
	shown, refuted := Equivalent, NotEquivalent
	if o != Equivalence {
		shown, refuted = Demonstrated, Contradicted
	}
	inside := (lower == nil || low > *lower) && (upper == nil || high < *upper)
	outside := lower != nil && high < *lower || upper != nil && low > *upper
	switch {
	case inside:
		return shown
	case outside:
		return refuted
	}
	return Undecided
}

// overall is the verdict over all characteristics: the intersection-union rule over those asked against a margin
// (Berger 1982), and for a plan that asks only for differences, whether any was shown.
func overall(cs []Comparison) Verdict {
	var against, equivalence, refuted, undecided int
	var differences []Verdict
	for _, c := range cs {
		if !c.Objective.AgainstMargin() {
			if c.Verdict.Shown() {
				differences = append(differences, c.Verdict)
			}
			continue
		}
		against++
		if c.Objective == Equivalence {
			equivalence++
		}
		switch {
		case c.Verdict.Refuted():
			refuted++
		case c.Verdict == Undecided:
			undecided++
		}
	}
	if against == 0 {
		return overallDifference(differences)
	}
	switch {
	case refuted > 0 && equivalence > 0:
		return NotEquivalent
	case refuted > 0:
		return Contradicted
	case undecided > 0:
		return Undecided
	case equivalence > 0:
		return Equivalent
	}
	return Demonstrated
}

// overallDifference is the verdict of a plan that asks for no margin: no difference shown also where nothing could be tested,
// which the characteristics' own verdicts say (contract: result, "Overall").
func overallDifference(shown []Verdict) Verdict {
	if len(shown) == 0 {
		return NoDifference
	}
	for _, v := range shown {
		if v != shown[0] {
			return Different
		}
	}
	return shown[0]
}
