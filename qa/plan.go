package qa

// PlanFormat is the only plan format this version reads.
const PlanFormat = "lotpair.plan/1"

// Plan is everything that is decided before the readings are opened (contract: plan).
type Plan struct {
	Format     string     `json:"format" toml:"format"`
	Title      string     `json:"title,omitempty" toml:"title"`
	Supports   string     `json:"supports,omitempty" toml:"supports"` // the record this is evidence for
	Retention  string     `json:"retention,omitempty" toml:"retention"`
	Signatures []Required `json:"signatures,omitempty" toml:"signatures"`

	Record          Particulars      `json:"record,omitzero" toml:"record"`
	Reference       LotPlan          `json:"reference" toml:"reference"`
	Candidate       LotPlan          `json:"candidate" toml:"candidate"`
	Reading         ReadingPlan      `json:"reading,omitzero" toml:"reading"`
	Criterion       Criterion        `json:"criterion" toml:"criterion"`
	Characteristics []Characteristic `json:"characteristic,omitempty" toml:"characteristic"`
	Performance     *PerformancePlan `json:"performance,omitempty" toml:"performance"`
	Sensitivity     *SensitivityPlan `json:"sensitivity,omitempty" toml:"sensitivity"`
}

// Required is a signature that a complete record must carry.
type Required struct {
	Meaning string `json:"meaning" toml:"meaning"` // prepared, reviewed, approved
	Name    string `json:"name,omitempty" toml:"name"`
	Title   string `json:"title,omitempty" toml:"title"`
}

// RequiredMeanings are the meanings a complete record must carry: prepared alone where the plan says nothing.
func (p Plan) RequiredMeanings() []Required {
	if len(p.Signatures) == 0 {
		return []Required{{Meaning: "prepared"}}
	}
	return p.Signatures
}

// Particulars say what was sampled and how it was measured. Supports, Part and Revision are required before signing.
type Particulars struct {
	Part              string   `json:"part,omitempty" toml:"part"`
	Revision          string   `json:"revision,omitempty" toml:"revision"`
	QuantityReference *float64 `json:"quantity_reference,omitempty" toml:"quantity_reference"`
	QuantityCandidate *float64 `json:"quantity_candidate,omitempty" toml:"quantity_candidate"`
	Sampling          string   `json:"sampling,omitempty" toml:"sampling"`
	GaugeReference    string   `json:"gauge_reference,omitempty" toml:"gauge_reference"`
	GaugeCandidate    string   `json:"gauge_candidate,omitempty" toml:"gauge_candidate"`
}

// LotPlan names one lot and where its readings stand.
type LotPlan struct {
	Lot    string `json:"lot,omitempty" toml:"lot"`
	Source string `json:"source,omitempty" toml:"source"`
	File   string `json:"file,omitempty" toml:"file"` // relative to the plan file
	Sheet  string `json:"sheet,omitempty" toml:"sheet"`
	Unit   string `json:"unit,omitempty" toml:"unit"`
	Values string `json:"values,omitempty" toml:"values"` // absolute or deviation
}

// ReadingPlan says how the files are laid out; what is left out is detected and reported.
type ReadingPlan struct {
	Layout      string      `json:"layout,omitempty" toml:"layout"`
	Sheet       string      `json:"sheet,omitempty" toml:"sheet"`
	HeaderRow   int         `json:"header_row,omitempty" toml:"header_row"` // 1-based, 0 where left out
	LotColumn   string      `json:"lot_column,omitempty" toml:"lot_column"`
	PartColumn  string      `json:"part_column,omitempty" toml:"part_column"`
	OrderColumn string      `json:"order_column,omitempty" toml:"order_column"`
	PairColumn  string      `json:"pair_column,omitempty" toml:"pair_column"`
	GroupColumn string      `json:"group_column,omitempty" toml:"group_column"`
	Decimal     string      `json:"decimal,omitempty" toml:"decimal"`
	Encoding    string      `json:"encoding,omitempty" toml:"encoding"`
	NonDetect   string      `json:"non_detect,omitempty" toml:"non_detect"`
	Exclude     []Exclusion `json:"exclude,omitempty" toml:"exclude"`
}

// Exclusion leaves one cell out, with its reason; the cell stays in the record.
type Exclusion struct {
	Cell   string `json:"cell" toml:"cell"` // "Data!D17", or "D17" for a text file
	File   string `json:"file,omitempty" toml:"file"`
	Reason string `json:"reason" toml:"reason"`
}

// PerformancePlan sets coverage and confidence of tolerance intervals and performance limits.
type PerformancePlan struct {
	Coverage   float64 `json:"coverage,omitempty" toml:"coverage"`
	Confidence float64 `json:"confidence,omitempty" toml:"confidence"`
}

// SensitivityPlan sets resampling.
type SensitivityPlan struct {
	Resamples int   `json:"resamples,omitempty" toml:"resamples"`
	Seed      int64 `json:"seed,omitempty" toml:"seed"`
}

// LotOf is the plan of one side's lot.
func (p Plan) LotOf(side Side) LotPlan {
	if side == Candidate {
		return p.Candidate
	}
	return p.Reference
}
