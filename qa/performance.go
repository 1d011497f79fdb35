package qa

import (
	"fmt"
	"strings"

	"lotpair/qa/stats"
)

// Coverage and confidence of the performance block where the plan states none (common practice, no source).
const (
	defaultCoverage   = 0.95
	defaultConfidence = 0.95
)

// fewestForPerformance is the number of readings below which ISO 22514-2 would not have a performance index stated without
// saying so (needs ISO 22514; from memory).
const fewestForPerformance = 30

// PerformanceResult compares both lots with the specification limits; without a claim of stability.
type PerformanceResult struct {
	Reference LotPerformance `json:"reference"`
	Candidate LotPerformance `json:"candidate"`
}

// LotPerformance is Pp, Ppk with its interval (Bissell 1990), what lies outside the limits as fractions, and the interval that
// holds a stated part of the lot (ISO 22514-2 and ISO 16269-6, from memory).
type LotPerformance struct {
	Pp               *float64                 `json:"pp,omitempty"`
	Ppk              *float64                 `json:"ppk,omitempty"`
	Level            *float64                 `json:"level,omitempty"`
	PpkLower         *float64                 `json:"ppk_lower,omitempty"`
	PpkUpper         *float64                 `json:"ppk_upper,omitempty"`
	OutsideCounted   float64                  `json:"outside_counted"`
	OutsideEstimated *float64                 `json:"outside_estimated,omitempty"` // plug-in normal
	Tolerance        *ToleranceIntervalResult `json:"tolerance_interval,omitempty"`
}

// ToleranceIntervalResult is the statistical tolerance interval of a normal lot; with one specification limit it has one bound
// and a one-sided factor.
type ToleranceIntervalResult struct {
	Coverage   float64  `json:"coverage"`
	Confidence float64  `json:"confidence"`
	K          float64  `json:"k"`
	Lower      *float64 `json:"lower,omitempty"`
	Upper      *float64 `json:"upper,omitempty"`
}

func (c *comparison) performance(plan Plan) {
	if c.ch.Lower == nil && c.ch.Upper == nil || c.ref.summary.N == 0 || c.cand.summary.N == 0 {
		return
	}
	coverage, confidence := defaultCoverage, defaultConfidence
	if p := plan.Performance; p != nil {
		if p.Coverage != 0 {
			coverage = p.Coverage
		}
		if p.Confidence != 0 {
			confidence = p.Confidence
		}
	}
	c.Performance = &PerformanceResult{
		Reference: c.lotPerformance(c.ref, coverage, confidence), Candidate: c.lotPerformance(c.cand, coverage, confidence),
	}
	for _, s := range []sample{c.ref, c.cand} {
		c.outside(s)
		if n := s.summary.N; n > 0 && n < fewestForPerformance {
			c.warn(WarnFewForPerformance, s.side, "performance."+string(s.side), fmt.Sprintf("Only %d readings in the %s lot: Pp and Ppk from fewer than %d say little.", n, s.side, fewestForPerformance))
		}
	}
}

// outside names the readings beyond a limit. Whether their parts conform is no question of this comparison, whatever its verdict.
func (c *comparison) outside(s sample) {
	const most = 5 // cells named
	n := 0
	var cells []string
	for i, v := range s.values {
		if c.ch.Lower != nil && v < *c.ch.Lower || c.ch.Upper != nil && v > *c.ch.Upper {
			if n++; n <= most {
				cells = append(cells, s.used[i].Source.Place())
			}
		}
	}
	if n == 0 {
		return
	}
	if n > most {
		cells = append(cells, fmt.Sprintf("and %d more", n-most))
	}
	c.warn(WarnOutside, s.side, "performance."+string(s.side)+".outside_counted", fmt.Sprintf("%s of the %s lot beyond the specification limits (%s): whether these parts can be used is a question of its own, which no verdict on the lots answers.", Count(n, "reading", "readings"), s.side, strings.Join(cells, ", ")))
}

func (c *comparison) lotPerformance(s sample, coverage, confidence float64) LotPerformance {
	p := stats.Performance(s.values, s.summary, c.ch.Lower, c.ch.Upper)
	out := LotPerformance{OutsideCounted: p.OutsideCounted}
	if p.HasPp && finite(p.Pp) {
		out.Pp = &p.Pp
	}
	if p.HasPpk && finite(p.Ppk, p.OutsideEstimated) {
		out.Ppk, out.OutsideEstimated = &p.Ppk, &p.OutsideEstimated
		if in := stats.PpkLimits(p.Ppk, s.summary.N, confidence); finite(in.Lower, in.Upper) {
			out.Level, out.PpkLower, out.PpkUpper = &confidence, &in.Lower, &in.Upper
		}
	}
	out.Tolerance = c.tolerance(s.summary, coverage, confidence)
	return out
}

// tolerance is the interval that holds the stated part of the lot with the stated confidence, for a normal lot.
func (c *comparison) tolerance(s stats.Summary, coverage, confidence float64) *ToleranceIntervalResult {
	if s.N < 2 || !(s.SD > 0) {
		return nil
	}
	t := &ToleranceIntervalResult{Coverage: coverage, Confidence: confidence}
	var err error
	t.K, err = c.known.factor(factorOf{s.N, c.ch.Lower != nil && c.ch.Upper != nil, coverage, confidence})
	if err != nil || !finite(t.K, s.Mean-t.K*s.SD, s.Mean+t.K*s.SD) {
		return nil
	}
	if c.ch.Lower != nil {
		t.Lower = ptr(s.Mean - t.K*s.SD)
	}
	if c.ch.Upper != nil {
		t.Upper = ptr(s.Mean + t.K*s.SD)
	}
	return t
}

// factorOf is what a tolerance factor depends on.
type factorOf struct {
	n                    int
	twoSided             bool
	coverage, confidence float64
}

// known keeps what characteristics of the same size share and what takes long to compute: tolerance factors, and how often
// each U comes up.
type known struct {
	verdictOnly bool // of a comparison that is made only for its verdict: no new study, no other ways of computing it
	factors     map[factorOf]float64
	ranks       stats.NullU
	watch       Watch
}

func (k *known) factor(f factorOf) (float64, error) {
	if v, ok := k.factors[f]; ok {
		return v, nil
	}
	var v float64
	var err error
	if f.twoSided {
		v, err = stats.ToleranceFactor(f.n, float64(f.n-1), f.coverage, f.confidence)
	} else {
		v, err = stats.ToleranceFactorOneSided(f.n, f.coverage, f.confidence)
	}
	if err != nil {
		return 0, err
	}
	if k.factors == nil {
		k.factors = map[factorOf]float64{}
	}
	k.factors[f] = v
	return v, nil
}
