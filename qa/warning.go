package qa

// Warning is something the reader of a result must know; it travels into the record. Warnings are values, not errors: they
// never stop a comparison.
type Warning struct {
	Code string `json:"code"`           // stable, lower-case-hyphen
	Side Side   `json:"side,omitempty"` // which lot, where it is one
	Path string `json:"path,omitempty"` // which value of the result, where one is missing or qualified
	Text string `json:"text"`
}

// The codes of warnings that Compare gives (contract: result, "Verdicts").
const (
	WarnTooFew          = "too-few-readings"
	WarnFew             = "few-readings"
	WarnNoVariation     = "no-variation"
	WarnCoarse          = "coarse-resolution"
	WarnIdentical       = "identical-readings"
	WarnPBelowRange     = "p-below-range"
	WarnAbsence         = "absence-of-evidence"
	WarnUnread          = "unread-cells"
	WarnNonDetects      = "non-detects"
	WarnFlips           = "verdict-flips"
	WarnNotComputable   = "not-computable"
	WarnGauges          = "different-gauges"
	WarnUncertainty     = "margin-near-uncertainty"
	WarnFarReading      = "far-reading"
	WarnMarginTolerance = "margin-wider-than-tolerance"

	WarnMarginFromSample  = "margin-from-sample"
	WarnSpreadNotAsked    = "spread-not-asked"
	WarnSpreadNormal      = "spread-assumes-normal"
	WarnRatioUndefined    = "ratio-undefined"
	WarnNotPositive       = "not-positive"
	WarnNotNormal         = "not-normal"
	WarnUnmatched         = "unmatched"
	WarnDrift             = "not-in-random-order"
	WarnLag               = "neighbours-alike"
	WarnCutOff            = "cut-off"
	WarnSecondSample      = "second-sample"
	WarnFewForPerformance = "few-for-performance"
	WarnOneGroup          = "one-group"
	WarnIndependence      = "assumes-independence"
	WarnPairs             = "looks-paired"
	WarnSkewUnequal       = "skewed-and-unequal"
	WarnLotsInTime        = "lots-in-time"
	WarnOutside           = "outside-limits"
	WarnAttempts          = "several-attempts"
)

// Has says whether a warning of the code is among w.
func Has(w []Warning, code string) bool {
	for _, x := range w {
		if x.Code == code {
			return true
		}
	}
	return false
}
