package qa

// ResultFormat and Calculation name the format of a Result and the edition of the arithmetic behind it: a change of any number
// or finding that the same readings give, down to its words, raises Calculation, once a release.
const (
	ResultFormat = "lotpair.result/1"
	Calculation  = 2
)

// Result is the outcome of one comparison (contract: result). Numbers are full doubles; a value that does not exist is nil,
// with a warning whose path names it.
type Result struct {
	Format          string         `json:"format"`
	Title           string         `json:"title"`
	Supports        string         `json:"supports"`
	Claim           string         `json:"claim"`
	Software        Software       `json:"software"`
	Seal            Seal           `json:"seal"`
	Attempts        Attempts       `json:"attempts"`
	Reference       LotResult      `json:"reference"`
	Candidate       LotResult      `json:"candidate"`
	Verdict         Verdict        `json:"verdict"`
	Sentence        string         `json:"sentence"`
	Characteristics []Comparison   `json:"characteristics"`
	Unread          []UnreadResult `json:"unread"`
	Warnings        []Warning      `json:"warnings"`
}

// Software says which program made a result.
type Software struct {
	Version     string `json:"version"`
	Revision    string `json:"revision"`
	Calculation int    `json:"calculation"`
	OS          string `json:"os"`
	Arch        string `json:"arch"`
}

// Seal says what is known of the time at which the criterion was fixed.
type Seal struct {
	Digest   string `json:"digest"`         // SHA-256 of the sealed part of the plan
	Time     string `json:"time,omitempty"` // empty where the criterion was not sealed
	Readings string `json:"readings"`       // unopened, opened or unknown at that time
	Amended  int    `json:"amended"`
}

// NotCounted is said where nobody keeps attempts.
const NotCounted = "not counted"

// Attempts says how often this plan is known to have been run.
type Attempts struct {
	Known  int    `json:"known"`
	KeptBy string `json:"kept_by"`
}

// LotResult identifies one lot and its files.
type LotResult struct {
	Lot    string `json:"lot"`
	Source string `json:"source"`
	Files  []File `json:"files"`
}

// Comparison is the result for one characteristic. All values are in its unit.
type Comparison struct {
	Name        string              `json:"name"`
	Unit        string              `json:"unit"`
	Kind        string              `json:"kind"`
	Limits      Limits              `json:"limits"`
	Objective   Objective           `json:"objective"`
	Alpha       float64             `json:"alpha"`
	Method      string              `json:"method"`
	Reference   SampleResult        `json:"reference"`
	Candidate   SampleResult        `json:"candidate"`
	Difference  DifferenceResult    `json:"difference"`
	Equivalence *EquivalenceResult  `json:"equivalence,omitempty"`
	Verdict     Verdict             `json:"verdict"`
	Detectable  bool                `json:"detectable"` // two-sided p below alpha; never replaces the verdict
	NewStudy    *NewStudyResult     `json:"new_study,omitempty"`
	Spread      *SpreadResult       `json:"spread,omitempty"`
	Fisher      *FisherResult       `json:"fisher,omitempty"`
	Groups      *GroupsResult       `json:"groups,omitempty"`
	Ranks       *RanksResult        `json:"ranks,omitempty"`
	Checks      Checks              `json:"checks"`
	Performance *PerformanceResult  `json:"performance,omitempty"`
	Sensitivity []SensitivityResult `json:"sensitivity,omitempty"`
	Warnings    []Warning           `json:"warnings"`

	Decimals int `json:"-"` // decimals to show; not part of the result
}

// Limits are the specification limits and the target.
type Limits struct {
	Lower  *float64 `json:"lower,omitempty"`
	Target *float64 `json:"target,omitempty"`
	Upper  *float64 `json:"upper,omitempty"`
}

// SampleResult describes one lot's readings of one characteristic. Rows = N + Excluded + Missing + NonDetects + Unread +
// Repeats.
type SampleResult struct {
	Rows       int      `json:"rows"`
	Parts      int      `json:"parts"` // parts with a reading in use
	N          int      `json:"n"`     // readings the test used
	Excluded   int      `json:"excluded"`
	Missing    int      `json:"missing"`
	NonDetects int      `json:"non_detects"`
	Unread     int      `json:"unread"`
	Unmatched  int      `json:"unmatched,omitempty"` // paired: without a partner in the other lot
	Repeats    int      `json:"repeats,omitempty"`   // repeat readings beyond the first of each part
	Failed     *int     `json:"failed,omitempty"`    // attribute: parts that failed
	Fraction   *float64 `json:"fraction,omitempty"`
	Mean       *float64 `json:"mean,omitempty"`
	SD         *float64 `json:"sd,omitempty"` // nil for fewer than two readings
	Min        *float64 `json:"min,omitempty"`
	Q1         *float64 `json:"q1,omitempty"` // quartiles of type 7 (Hyndman and Fan 1996)
	Median     *float64 `json:"median,omitempty"`
	Q3         *float64 `json:"q3,omitempty"`
	Max        *float64 `json:"max,omitempty"`
}

// DifferenceResult is candidate minus reference by Welch's test (Welch 1947), with its 1 - alpha interval.
type DifferenceResult struct {
	Estimate    *float64 `json:"estimate,omitempty"`
	SE          *float64 `json:"se,omitempty"`
	DF          *float64 `json:"df,omitempty"`
	T           *float64 `json:"t,omitempty"`
	P           *float64 `json:"p,omitempty"` // in the direction of Alternative
	PTwoSided   *float64 `json:"p_two_sided,omitempty"`
	PHolm       *float64 `json:"p_holm,omitempty"` // Holm 1979, over the characteristics asked for a difference
	Alternative string   `json:"alternative"`      // two-sided, lower, higher
	Method      string   `json:"method,omitempty"` // attribute: miettinen-nurminen
	Level       *float64 `json:"level,omitempty"`
	Lower       *float64 `json:"lower,omitempty"`
	Upper       *float64 `json:"upper,omitempty"`
}

// EquivalenceResult is the pair of one-sided tests against the margin (Schuirmann 1987), with its 1 - 2 alpha interval.
type EquivalenceResult struct {
	Scale          string       `json:"scale"`
	Estimate       *float64     `json:"estimate,omitempty"`
	SE             *float64     `json:"se,omitempty"`
	DF             *float64     `json:"df,omitempty"`
	DFLower        *float64     `json:"df_lower,omitempty"` // ratio of means: each end has its own
	DFUpper        *float64     `json:"df_upper,omitempty"`
	Margin         MarginResult `json:"margin"`
	MarginLower    *float64     `json:"margin_lower,omitempty"` // as tested, after the guard; nil where not asked
	MarginUpper    *float64     `json:"margin_upper,omitempty"`
	TLower         *float64     `json:"t_lower,omitempty"` // H0: difference <= margin_lower
	PLower         *float64     `json:"p_lower,omitempty"`
	ZLower         *float64     `json:"z_lower,omitempty"` // attribute: score statistics in the place of t
	ZUpper         *float64     `json:"z_upper,omitempty"`
	TUpper         *float64     `json:"t_upper,omitempty"` // H0: difference >= margin_upper
	PUpper         *float64     `json:"p_upper,omitempty"`
	P              *float64     `json:"p,omitempty"`
	Verdict        Verdict      `json:"verdict"`
	Level          *float64     `json:"level,omitempty"`
	Lower          *float64     `json:"lower,omitempty"`
	Upper          *float64     `json:"upper,omitempty"`
	SmallestMargin *float64     `json:"smallest_margin,omitempty"` // post hoc
	Permits        *Permits     `json:"permits,omitempty"`
}

// MarginResult is the margin as the plan states it, its widths in the unit, and the guard.
type MarginResult struct {
	Kind        string   `json:"kind"`
	Stated      *float64 `json:"stated,omitempty"`
	StatedLower *float64 `json:"stated_lower,omitempty"`
	StatedUpper *float64 `json:"stated_upper,omitempty"`
	Of          string   `json:"of,omitempty"`
	Full        *float64 `json:"full,omitempty"`
	Half        *float64 `json:"half,omitempty"`
	Guard       float64  `json:"guard"`
	Mean        *float64 `json:"mean,omitempty"` // keep_ppk: the mean and standard deviation it is kept at; sd_multiple: what is multiplied
	SD          *float64 `json:"sd,omitempty"`
	Reason      string   `json:"reason,omitempty"`
	ApprovedBy  string   `json:"approved_by,omitempty"`
}

// Permits is what a shift to the worse end of the margin would leave, at the reference's mean and standard deviation.
type Permits struct {
	Ppk     float64 `json:"ppk"`
	Outside float64 `json:"outside"` // fraction outside the limits
}

// SpreadResult is the ratio of standard deviations, candidate over reference, with its F interval of level 1 - 2 alpha.
type SpreadResult struct {
	SDRatio *float64 `json:"sd_ratio,omitempty"`
	Level   *float64 `json:"level,omitempty"`
	Lower   *float64 `json:"lower,omitempty"`
	Upper   *float64 `json:"upper,omitempty"`
	F       *FResult `json:"f,omitempty"`

	Bonett       *IntervalResult     `json:"bonett,omitempty"`        // robust to shape (Bonett 2006)
	PitmanMorgan *PitmanMorganResult `json:"pitman_morgan,omitempty"` // paired: in the place of F
	Asked        *float64            `json:"asked,omitempty"`         // the largest acceptable ratio
	Verdict      SpreadVerdict       `json:"verdict"`
}

// SpreadVerdict says whether the ratio of standard deviations is acceptable.
type SpreadVerdict string

// The verdicts on the spread.
const (
	SpreadAcceptable    SpreadVerdict = "acceptable"
	SpreadNotAcceptable SpreadVerdict = "not acceptable"
	SpreadUndecided     SpreadVerdict = "undecided"
	SpreadNotAsked      SpreadVerdict = "not asked"
)

// IntervalResult is an interval with its level.
type IntervalResult struct {
	Level float64 `json:"level"`
	Lower float64 `json:"lower"`
	Upper float64 `json:"upper"`
}

// PitmanMorganResult is the test of equal spread of the same parts in two lots (Pitman 1939, Morgan 1939).
type PitmanMorganResult struct {
	T  float64 `json:"t"`
	DF float64 `json:"df"`
	P  float64 `json:"p"`
}

// FResult is the variance ratio, candidate over reference; the p-value is two-sided, twice the smaller tail.
type FResult struct {
	Statistic float64 `json:"statistic"`
	DF1       float64 `json:"df1"`
	DF2       float64 `json:"df2"`
	P         float64 `json:"p"`
}

// Checks are looks at the readings that decide nothing.
type Checks struct {
	Reference  SampleChecks  `json:"reference"`
	Candidate  SampleChecks  `json:"candidate"`
	Difference *SampleChecks `json:"difference,omitempty"` // paired: of the differences
}

// SampleChecks are the checks of one lot's readings.
type SampleChecks struct {
	ShapiroWilk *ShapiroWilkResult `json:"shapiro_wilk,omitempty"`
	Grubbs      *GrubbsResult      `json:"grubbs,omitempty"`
	ESDOutliers []string           `json:"esd_outliers,omitzero"` // cells, by the generalized ESD test (Rosner 1983)
	Runs        *RunsResult        `json:"runs,omitempty"`
	Lag1        *float64           `json:"lag1,omitempty"` // correlation of neighbouring readings
	Resolution  *float64           `json:"resolution,omitempty"`

	outlying []int // of ESDOutliers, places among the readings used
}

// ShapiroWilkResult is Shapiro and Wilk's test of a normal distribution (Royston 1995, AS R94).
type ShapiroWilkResult struct {
	W float64 `json:"w"`
	P float64 `json:"p"`
}

// RunsResult counts the runs about the median; equal readings are left out, the p-value is exact.
type RunsResult struct {
	Runs int     `json:"runs"`
	P    float64 `json:"p"`
}

// GrubbsResult is Grubbs' test of the farthest reading, two-sided (Grubbs 1969).
type GrubbsResult struct {
	G    float64 `json:"g"`
	P    float64 `json:"p"`
	Cell string  `json:"cell"`
}

// UnreadResult is a cell that was not taken as a plain number.
type UnreadResult struct {
	File    string   `json:"file"`
	Cell    string   `json:"cell"`
	Found   string   `json:"found"`
	TakenAs TakenAs  `json:"taken_as"`
	Value   *float64 `json:"value,omitempty"`
}
