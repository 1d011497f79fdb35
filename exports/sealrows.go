package exports

import (
	"fmt"
	"reflect"
	"strings"

	"lotpair/qa"
)

// SheetCriterion is the one sheet of a seal.
const SheetCriterion = "Criterion"

// sheets lays a seal out: a pure function of the seal.
func (s Sealed) sheets() []sheet {
	out := sheet{name: SheetCriterion, widths: []float64{34, 40, 52}}
	out.addTall(26, wide(orWord(s.Plan.Title, "Criterion"), titleLook, 3))
	say := func(t string, l look) { out.addTall(lines(t, 128)*13.5+2, wide(t, l, 3)) }
	if s.Plan.Supports != "" {
		say("supports "+s.Plan.Supports, mutedLook)
	}
	out.gap()
	say("This criterion was sealed "+localTime(s.Time)+" ("+s.Time.UTC().Format("2006-01-02 15:04:05")+" UTC) by "+s.Who+". "+openedText(s.Readings), wrapLook)
	say("Digest of what the seal covers (criterion, characteristics, performance; SHA-256): "+s.Digest, smallLook)
	say(fmt.Sprintf("Plan file: %s, %d bytes, SHA-256 %s", s.PlanFile.Name, s.PlanFile.Bytes, s.PlanFile.SHA256), smallLook)
	say("Not covered: title, files, lots, layout, exclusions and the particulars of the record. A change of what is covered is an amendment with a reason.", smallLook)
	out.gap()
	out.add(text("Key of the plan", headLook), text("Value", headLook), text("In words", headLook))
	out.frozen, out.heads = len(out.rows), len(out.rows)
	out.keys("criterion", reflect.ValueOf(s.Plan.Criterion))
	if s.Plan.Performance != nil {
		out.keys("performance", reflect.ValueOf(*s.Plan.Performance))
	}
	for _, c := range s.Plan.Characteristics {
		out.gap()
		out.add(wide(c.Name, groupLook, 3))
		out.keys("characteristic", reflect.ValueOf(c))
	}
	if len(s.Plan.Characteristics) == 0 {
		out.gap()
		out.addTall(15, wide("All columns of measurements that the files hold: the plan names no characteristics.", wrapLook, 3))
	}
	out.gap()
	out.add(wide("Signature of the seal", groupLook, 3))
	if g := s.Signer; g != nil {
		out.add(text("Meaning, name", headLook), text("Signed at", headLook), text("Certificate, SHA-256", headLook))
		out.addTall(40, text(g.Meaning+": "+g.Name, signLook), text(bothTimes(g.Time), signLook), text(fingerprintLines(g.Fingerprint), signLook))
		if g.Reason != "" {
			say("Reason: "+g.Reason, smallLook)
		}
	} else {
		say("Not signed: anyone could have made this file with any time in it.", wrapLook)
	}
	v := s.Software
	say(fmt.Sprintf("Made by Lotpair %s (%s), %s/%s.", v.Version, orWord(v.Revision, "no revision"), v.OS, v.Arch), smallLook)
	all := []sheet{out}
	if s.Signer == nil {
		markDraft(&all[0])
	}
	return all
}

func openedText(readings string) string {
	switch readings {
	case "unopened":
		return "The readings were not opened for it."
	case "opened":
		return "The readings had been opened before."
	}
	return "It is not known whether the readings had been opened."
}

// keys lists what a part of the plan states, under the keys of the plan file.
func (s *sheet) keys(prefix string, v reflect.Value) {
	for _, f := range flatten(prefix, v) {
		if f.name == "characteristic.name" {
			continue
		}
		value := text(f.text, ruledWrapLook)
		if f.number != nil {
			value = text(qa.Plain(*f.number), ruledWrapLook)
		}
		words := keyWords[f.name]
		s.addTall(max(lines(value.text, 44), lines(words, 58), 1)*13.5+2, text(f.name, ruledLook), value, text(words, ruledWrapLook))
	}
}

var keyWords = withCharacteristic(map[string]string{
	"criterion.objective": "what is to be shown", "criterion.claim": "what the verdict may be said of", "criterion.groups": "how sub-lots enter",
	"criterion.alpha": "largest probability of a false verdict", "criterion.method": "how difference and error are estimated",
	"criterion.spread_ratio": "largest acceptable ratio of standard deviations", "criterion.guard": "taken off each end of the margin, in the unit",
	"criterion.power": "wanted probability of showing it", "criterion.overall": "how the characteristics make one verdict",
	"criterion.second_sample": "whether one enlargement is allowed", "criterion.margin.absolute": "margin, in the unit", "criterion.margin.lower": "lower end of the margin, in the unit",
	"criterion.margin.upper": "upper end of the margin, in the unit", "criterion.margin.tolerance_fraction": "margin as a part of the tolerance", "criterion.margin.of": "of which width of the tolerance",
	"criterion.margin.reference_fraction": "margin as a part of the reference mean", "criterion.margin.ratio_lower": "lower ratio", "criterion.margin.ratio_upper": "upper ratio",
	"criterion.margin.sd_multiple": "margin in standard deviations", "criterion.margin.keep_ppk": "the Ppk that a shift must leave",
	"criterion.margin.mean": "mean planned with", "criterion.margin.sd": "standard deviation planned with",
	"criterion.margin.reason": "why this margin", "criterion.margin.approved_by": "who approved it",
	"performance.coverage": "share that a tolerance interval covers", "performance.confidence": "confidence of the limits",
	"characteristic.column": "heading in the file", "characteristic.kind": "kind of characteristic", "characteristic.failed": "words for a failed part", "characteristic.unit": "unit",
	"characteristic.lower": "lower specification limit", "characteristic.target": "target", "characteristic.upper": "upper specification limit",
	"characteristic.sd": "standard deviation known beforehand", "characteristic.decimals": "decimals to show",
	"characteristic.uncertainty.reference": "standard uncertainty of the bias, reference", "characteristic.uncertainty.candidate": "standard uncertainty of the bias, candidate",
})

// withCharacteristic gives what a characteristic overrides the words of the criterion.
func withCharacteristic(words map[string]string) map[string]string {
	const from, to = "criterion.", "characteristic."
	for k, v := range words {
		if rest, ok := strings.CutPrefix(k, from); ok && words[to+rest] == "" {
			words[to+rest] = v
		}
	}
	return words
}
