package qa

// SensitivityResult is the verdict again, computed otherwise. It changes nothing (contract: result, "sensitivity").
type SensitivityResult struct {
	Method   string   `json:"method"`
	Estimate *float64 `json:"estimate"`
	Level    *float64 `json:"level"`
	Lower    *float64 `json:"lower"`
	Upper    *float64 `json:"upper"`
	Verdict  Verdict  `json:"verdict"`

	Cell      string `json:"cell,omitempty"` // exclusion-put-back: the one reading
	Seed      *int64 `json:"seed,omitempty"` // bootstrap and permutation
	Resamples int    `json:"resamples,omitempty"`
}

// sensitivityOf says a comparison that was made otherwise in the few figures of the block.
func sensitivityOf(method string, c Comparison) SensitivityResult {
	if e := c.Equivalence; e != nil && c.Objective.AgainstMargin() {
		return SensitivityResult{Method: method, Estimate: e.Estimate, Level: e.Level, Lower: e.Lower, Upper: e.Upper, Verdict: c.Verdict}
	}
	d := c.Difference
	return SensitivityResult{Method: method, Estimate: d.Estimate, Level: d.Level, Lower: d.Lower, Upper: d.Upper, Verdict: c.Verdict}
}
