package qa_test

import (
	"encoding/json"
	"fmt"
	"strings"
	"testing"

	"lotpair/qa"
)

// promised are the values that a result of measured, independent readings has, whatever the objective (contract: result).
var promised = strings.Fields(`
	reference.mean reference.sd reference.min reference.q1 reference.median reference.q3 reference.max
	candidate.mean candidate.sd candidate.min candidate.q1 candidate.median candidate.q3 candidate.max
	difference.estimate difference.se difference.df difference.t difference.p difference.p_two_sided difference.level difference.lower difference.upper
	equivalence.estimate equivalence.p equivalence.level equivalence.lower equivalence.upper equivalence.smallest_margin equivalence.permits
	spread.sd_ratio spread.level spread.lower spread.upper spread.f spread.bonett
	ranks.u ranks.p ranks.shift ranks.level ranks.lower ranks.upper
	checks.reference.shapiro_wilk checks.reference.grubbs checks.reference.esd_outliers checks.reference.runs checks.reference.lag1 checks.reference.resolution
	checks.candidate.shapiro_wilk checks.candidate.grubbs checks.candidate.esd_outliers checks.candidate.runs checks.candidate.lag1 checks.candidate.resolution
	performance.reference.pp performance.reference.ppk performance.reference.ppk_lower performance.reference.ppk_upper
	performance.reference.outside_estimated performance.reference.tolerance_interval
	performance.candidate.pp performance.candidate.ppk performance.candidate.ppk_lower performance.candidate.ppk_upper
	performance.candidate.outside_estimated performance.candidate.tolerance_interval`)

// Whatever the readings are, a value of the result is there or a warning names it, or the block that it is of.
func TestNothingMissingUnsaid(t *testing.T) {
	lot := func(n int, of func(i int) float64) []float64 {
		x := make([]float64, n)
		for i := range x {
			x[i] = of(i)
		}
		return x
	}
	wave := func(i int) float64 { return 10 + float64(i*7919%13)/10 }
	same := func(int) float64 { return 10 }
	kinds := map[string][]float64{
		"none": {}, "one": lot(1, wave), "two": lot(2, wave), "three": lot(3, wave), "four": lot(4, wave), "many": lot(40, wave),
		"five equal": lot(5, same), "many equal": lot(40, same), "more than Shapiro": lot(5001, wave),
		"near the largest": {1e308, -1e308, 1.7e308, 9e307, -1.2e308}, "near the smallest": {5e-324, 1e-323, 5e-324, 2e-323, 1e-322},
		"binary": lot(9, func(i int) float64 { return wave(i) / 3 }),
	}
	margins := map[string]*qa.Margin{
		"difference": absolute(1), "ratio": {ReferenceFraction: ptr(0.1)}, "shift": {KeepPpk: ptr(0.5), Mean: ptr(10.0), SD: ptr(1.0)},
	}
	for refName, ref := range kinds {
		for candName, cand := range kinds {
			for scale, m := range margins {
				if len(ref)+len(cand) > 5000 && (scale != "difference" || refName != "many" && candName != "two") { // they take long
					continue
				}
				p := plan(qa.Equivalence, m)
				ch := qa.Characteristic{Name: "x", Lower: ptr(5.0), Target: ptr(10.0), Upper: ptr(15.0)}
				decimals := 1
				if refName == "binary" || candName == "binary" {
					decimals = 16
				}
				r, err := qa.Compare(p, lots(ch, series("x", decimals, ref...), series("x", decimals, cand...)), qa.Run{})
				if err != nil {
					if scale == "ratio" { // a mean below 0
						continue
					}
					t.Fatal(err)
				}
				missing(t, fmt.Sprintf("%s and %s, %s", refName, candName, scale), r.Characteristics[0])
			}
		}
	}
}

func missing(t *testing.T, name string, c qa.Comparison) {
	t.Helper()
	b, err := json.Marshal(c)
	if err != nil {
		t.Fatal(err)
	}
	var tree map[string]any
	if err := json.Unmarshal(b, &tree); err != nil {
		t.Fatal(err)
	}
	for _, path := range promised {
		var at any = tree
		for _, key := range strings.Split(path, ".") {
			m, _ := at.(map[string]any)
			at = m[key]
		}
		if at != nil {
			continue
		}
		said := false
		for _, w := range c.Warnings {
			said = said || w.Path != "" && (w.Path == path || strings.HasPrefix(path, w.Path+"."))
		}
		if !said {
			t.Errorf("%s: %s is missing and no warning names it: %v", name, path, c.Warnings)
		}
	}
}

// A resampling that is asked for is made, or it is said why not.
func TestResamplesNotMade(t *testing.T) {
	ch, ref, cand := d1()
	for _, c := range []struct {
		objective qa.Objective
		margin    *qa.Margin
		made      bool
	}{
		{qa.Equivalence, absolute(0.02), true},
		{qa.Equivalence, &qa.Margin{ReferenceFraction: ptr(0.1)}, true},
		{qa.Equivalence, &qa.Margin{KeepPpk: ptr(1.0), Mean: ptr(12.0), SD: ptr(0.01)}, true},
		{qa.Difference, nil, false},
	} {
		p := plan(c.objective, c.margin)
		p.Sensitivity = &qa.SensitivityPlan{Resamples: 200, Seed: 1}
		got := one(t, p, lots(ch, ref, cand))
		said := false
		for _, w := range got.Warnings {
			said = said || w.Path == "sensitivity.resamples"
		}
		if said == c.made {
			t.Errorf("%s: got said %v, want %v: %v", c.objective, said, !c.made, got.Warnings)
		}
	}
	for i := range ref.Readings {
		ref.Readings[i].Group, cand.Readings[i].Group = fmt.Sprint(i%3), fmt.Sprint(i%3)
	}
	p := plan(qa.Equivalence, absolute(0.02))
	p.Criterion.Groups, p.Reading.GroupColumn, p.Sensitivity = "random", "Heat", &qa.SensitivityPlan{Resamples: 200}
	for _, w := range one(t, p, lots(ch, ref, cand)).Warnings {
		if w.Path == "sensitivity.resamples" && strings.Contains(w.Text, "not independent") {
			return
		}
	}
	t.Error("random groups: got no reason why there is no resampling")
}

// What has no meaning for an attribute is no part of its plan.
func TestAttributeOnly(t *testing.T) {
	for name, change := range map[string]func(c *qa.Characteristic){
		"limit": func(c *qa.Characteristic) { c.Upper = ptr(1.0) }, "sd": func(c *qa.Characteristic) { c.SD = ptr(1.0) },
		"uncertainty": func(c *qa.Characteristic) { c.Uncertainty = &qa.Uncertainty{} }, "spread": func(c *qa.Characteristic) { c.SpreadRatio = ptr(2.0) },
		"method": func(c *qa.Characteristic) { c.Method = "pooled" },
	} {
		ch := qa.Characteristic{Name: "leak", Kind: "attribute", Failed: []string{"NOK"}}
		p := plan(qa.Equivalence, absolute(0.1))
		p.Characteristics = []qa.Characteristic{ch}
		if got := p.Validate(); len(got) != 0 {
			t.Fatalf("plain: got %v", got)
		}
		change(&p.Characteristics[0])
		if got := p.Validate(); len(got) != 1 {
			t.Errorf("%s: got %v, want one fault", name, got)
		}
	}
}
