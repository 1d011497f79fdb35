package qa

// Objective is what is to be shown.
type Objective string

// The objectives of a criterion (contract: plan).
const (
	Equivalence Objective = "equivalence" // the difference lies inside the margin
	NotLower    Objective = "not-lower"   // the candidate is not lower than the margin permits
	NotHigher   Objective = "not-higher"  // the candidate is not higher than the margin permits
	Difference  Objective = "difference"  // there is a difference, either way
	Lower       Objective = "lower"       // the candidate is lower
	Higher      Objective = "higher"      // the candidate is higher
)

// AgainstMargin says whether the objective is judged against a margin and takes part in the overall verdict.
func (o Objective) AgainstMargin() bool {
	return o == Equivalence || o == NotLower || o == NotHigher
}

// Criterion is what must hold for the verdict.
type Criterion struct {
	Objective    Objective `json:"objective,omitempty" toml:"objective"`
	Claim        string    `json:"claim,omitempty" toml:"claim"`
	Groups       string    `json:"groups,omitempty" toml:"groups"`
	Alpha        *float64  `json:"alpha,omitempty" toml:"alpha"` // 0 < alpha < 0.5; 0.05 where left out
	Method       string    `json:"method,omitempty" toml:"method"`
	Margin       *Margin   `json:"margin,omitempty" toml:"margin"`
	SpreadRatio  *float64  `json:"spread_ratio,omitempty" toml:"spread_ratio"`
	Guard        *float64  `json:"guard,omitempty" toml:"guard"` // in the unit, at least 0
	Power        *float64  `json:"power,omitempty" toml:"power"`
	Overall      string    `json:"overall,omitempty" toml:"overall"`
	SecondSample string    `json:"second_sample,omitempty" toml:"second_sample"`
}

// DefaultAlpha is the alpha of a plan that states none (common practice, no source).
const DefaultAlpha = 0.05

// asked is the criterion as it holds for one characteristic, every default filled in.
type asked struct {
	objective Objective
	alpha     float64
	method    string
	margin    *Margin
	guard     float64

	spreadRatio *float64
	grouped     bool // sub-lots are random: the group means are what is tested
}

// askedOf merges the plan's criterion with what the characteristic overrides.
func (p Plan) askedOf(c Characteristic) asked {
	a := asked{objective: Equivalence, alpha: DefaultAlpha, method: "welch", margin: p.Criterion.Margin}
	if p.Criterion.Objective != "" {
		a.objective = p.Criterion.Objective
	}
	if p.Criterion.Method != "" {
		a.method = p.Criterion.Method
	}
	for _, v := range []*float64{p.Criterion.Alpha, c.Alpha} {
		if v != nil {
			a.alpha = *v
		}
	}
	if p.Criterion.SecondSample == "one" {
		a.alpha /= 2 // each of the two looks has half (Bonferroni)
	}
	for _, v := range []*float64{p.Criterion.Guard, c.Guard} {
		if v != nil {
			a.guard = *v
		}
	}
	if c.Objective != "" {
		a.objective = c.Objective
	}
	if c.Method != "" {
		a.method = c.Method
	}
	if c.Margin != nil {
		a.margin = c.Margin
	}
	a.spreadRatio = p.Criterion.SpreadRatio
	if c.SpreadRatio != nil {
		a.spreadRatio = c.SpreadRatio
	}
	a.grouped = p.Criterion.Groups == "random" || p.Criterion.Claim == "sources"
	return a
}

// Claim is what the verdict may be said of: "lots" where the plan says nothing.
func (p Plan) Claim() string {
	if p.Criterion.Claim == "" {
		return "lots"
	}
	return p.Criterion.Claim
}
