package importers

import (
	"regexp"
	"strings"
)

// requirement is what a drawing asks of a characteristic, as read from one text.
type requirement struct {
	nominal, lower, upper *float64
	unit                  string
}

// The ways in which a requirement is written. N is a number; deviations carry a sign, or are 0.
var (
	requirementNumber = regexp.MustCompile(`[0-9]+(?:[.,][0-9]+)*`)
	plusMinus         = regexp.MustCompile(`^(N) ?(?:±|\+/-|\+-) ?(N)$`)
	deviations        = regexp.MustCompile(`^(N) ?([+-]) ?(N) ?/? ?([+-]) ?(N)$`)
	zeroLast          = regexp.MustCompile(`^(N) ?([+-]) ?(N) ?/ ?(N)$`)
	zeroFirst         = regexp.MustCompile(`^(N) (N) ?/ ?([+-]) ?(N)$`)
	atMost            = regexp.MustCompile(`^(?:max\.?|≤|<=) ?(N)$|^(N) ?max\.?$`)
	atLeast           = regexp.MustCompile(`^(?:min\.?|≥|>=) ?(N)$|^(N) ?min\.?$`)
	fromTo            = regexp.MustCompile(`^(N) ?(?:-|–|—|\.\.\.?|…|to|bis) ?(N)$`)
)

// parseRequirement reads a requirement such as "12.000 ±0.050", "12 +0.05/-0.02", "max 0.8" or "≥ 45 HRC". What cannot be
// read in one way only - fits, geometrical tolerances, reference dimensions - is not read: ok is false. decimal is the
// plan's decimal mark, 0 where it states none; then the numbers of the text settle it among themselves.
func parseRequirement(text string, decimal byte) (r requirement, ok bool) {
	s := strings.NewReplacer("\u2212", "-", "\u00a0", " ", "\u202f", " ", "\u2009", " ").Replace(text)
	s = strings.TrimSpace(strings.TrimLeft(strings.ToLower(joined(s)), "ø⌀\u2205"))
	if unit, number := unitBehind(text, s); unit != "" {
		r.unit, s = unit, number
	}
	var numbers []float64
	var decimals []int
	mark := decimal
	for _, n := range requirementNumber.FindAllString(s, -1) {
		if w, err := splitNumber(n, 0); decimal == 0 && (err == nil && w.comma || strings.HasPrefix(n, "0,")) {
			mark = ','
		}
	}
	for _, n := range requirementNumber.FindAllString(s, -1) {
		v, d, err := ParseNumber(n, mark)
		if w, _ := splitNumber(n, mark); err != nil || w.grouped {
			return requirement{}, false
		}
		numbers, decimals = append(numbers, v), append(decimals, d)
	}
	shape := requirementNumber.ReplaceAllString(s, "N")
	return r.fill(shape, numbers, decimals)
}

// fill takes the numbers as the shape of the text says.
func (r requirement) fill(shape string, n []float64, decimals []int) (requirement, bool) {
	at := func(i int) *float64 { return &n[i] }
	sum := func(deviation float64, i int) *float64 {
		x := roundTo(n[0]+deviation, max(decimals[0], decimals[i]))
		return &x
	}
	signed := func(sign string, i int) float64 {
		if sign == "-" {
			return -n[i]
		}
		return n[i]
	}
	limits := func(a, b float64, i, j int) (requirement, bool) {
		if a < b {
			a, b, i, j = b, a, j, i
		}
		r.nominal, r.upper, r.lower = at(0), sum(a, i), sum(b, j)
		return r, a > b
	}
	var m []string
	find := func(re *regexp.Regexp) bool { m = re.FindStringSubmatch(shape); return m != nil }
	switch {
	case find(plusMinus):
		return limits(n[1], -n[1], 1, 1)
	case find(deviations):
		return limits(signed(m[2], 1), signed(m[4], 2), 1, 2)
	case find(zeroLast) && n[2] == 0:
		return limits(signed(m[2], 1), 0, 1, 2)
	case find(zeroFirst) && n[1] == 0:
		return limits(0, signed(m[3], 2), 1, 2)
	case find(atMost):
		r.upper = at(0)
		return r, true
	case find(atLeast):
		r.lower = at(0)
		return r, true
	case find(fromTo) && n[0] < n[1]:
		r.lower, r.upper = at(0), at(1)
		return r, true
	}
	return requirement{}, false
}

// unitBehind takes a unit off the end of a requirement; text keeps the letters as written, s is in lower case.
func unitBehind(text, s string) (unit, rest string) {
	written := joined(text)
	i := strings.LastIndexAny(written, "0123456789")
	for i >= 0 {
		tail := strings.TrimSpace(written[i+1:])
		if tail != "" && isUnit(tail) {
			if cut, ok := strings.CutSuffix(s, strings.ToLower(tail)); ok {
				return unbracket(tail), strings.TrimSpace(cut)
			}
		}
		i = strings.LastIndexAny(written[:i], "0123456789") // mm2 ends in a digit
	}
	return "", s
}

// String says the requirement in words.
func (r requirement) String() string {
	var parts []string
	for _, p := range []struct {
		name  string
		value *float64
	}{{"lower limit", r.lower}, {"nominal", r.nominal}, {"upper limit", r.upper}} {
		if p.value != nil {
			parts = append(parts, p.name+" "+tomlNumber(*p.value))
		}
	}
	return strings.Join(parts, ", ")
}
