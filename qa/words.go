package qa

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// The sentences that say a result: the same in the window, the console and the workbook.

// Cautions stand in every record (common practice, no source; wording after 21 CFR 11 and ASTM E2935 practice).
var cautions = []string{
	"The calculation supports engineering judgement and does not replace it; the responsible quality unit decides on the lot, and local procedures, customer requirements and regulations come first.",
	"The verdict holds for the lots, characteristics, sampling and measuring conditions named here; it does not show that two sources are equivalent.",
	"Equivalence not shown is no proof of a difference; equivalence shown is no proof of identity.",
	"The method assumes random, independent readings and means that are near enough normal; sorted or inspected lots do not represent the process.",
	"The measuring systems must be suitable; a difference between them is part of every difference shown.",
	"Whether parts conform to the drawing is a separate question: this comparison neither accepts nor rejects parts.",
	"No reading is left out because of its size alone; every reading left out is listed with its reason.",
	"A signature shows who signed, when and with which meaning, and that the content is unchanged since; it does not show that the content is right.",
	"Saving this workbook again in another program ends the validity of its signatures: keep the original file.",
}

// Cautions are the sentences of caution that stand in every record; a fresh slice.
func Cautions() []string { return append([]string{}, cautions...) }

// Plain writes a number in the shortest form that reads back the same, without an exponent where that stays short.
func Plain(x float64) string {
	if a := math.Abs(x); a != 0 && (a < 1e-6 || a >= 1e15) {
		return minus(strconv.FormatFloat(x, 'g', -1, 64))
	}
	return minus(strconv.FormatFloat(x, 'f', -1, 64))
}

// Fixed writes a number with the given decimals; a very large or small one in exponent form.
func Fixed(x float64, decimals int) string {
	if a := math.Abs(x); a >= 1e12 || a != 0 && a < 1e-9 {
		return minus(strconv.FormatFloat(x, 'e', 4, 64))
	}
	s := strconv.FormatFloat(x, 'f', decimals, 64)
	if strings.Trim(s, "-0.") == "" {
		s = strings.TrimPrefix(s, "-")
	}
	return minus(s)
}

// minus writes the minus sign as such: a hyphen is easily lost in print.
func minus(s string) string { return strings.Replace(s, "-", "−", 1) }

// FormatP writes a p-value with two leading digits, and what lies below 0.0001 as such.
func FormatP(p float64) string {
	switch {
	case p < 0.0001:
		return "< 0.0001"
	case p < 0.001:
		return strconv.FormatFloat(p, 'f', 5, 64)
	case p > 0.9999:
		return "> 0.9999"
	}
	return strconv.FormatFloat(p, 'f', 4, 64)
}

// Percent writes a share as a per cent with up to the given decimals, without trailing zeros: 0.9 is "90 %".
func Percent(share float64, decimals int) string {
	s := strconv.FormatFloat(100*share, 'f', decimals, 64)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return s + " %"
}

// Count says how many: "1 cell", "3 cells".
func Count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return strconv.Itoa(n) + " " + many
}

// unit appends the unit to a written number.
func unit(s, u string) string {
	if u == "" {
		return s
	}
	return s + " " + u
}

// Sentence says the overall verdict and what it rests on.
func Sentence(r Result) string {
	var refuted, undecided, shown, notShown []string
	against := 0
	for _, c := range r.Characteristics {
		switch {
		case !c.Objective.AgainstMargin():
			if c.Verdict == NoDifference {
				notShown = append(notShown, c.Name)
			} else if c.Verdict.Shown() {
				shown = append(shown, c.Name+": "+string(c.Verdict))
			}
			continue
		case c.Verdict.Refuted():
			refuted = append(refuted, c.Name)
		case c.Verdict == Undecided:
			undecided = append(undecided, c.Name)
		}
		against++
	}
	var b strings.Builder
	b.WriteString(upperFirst(string(r.Verdict)) + ".")
	if against == 0 {
		if len(shown) > 0 {
			b.WriteString(" " + strings.Join(shown, "; ") + ".")
		}
		if len(notShown) > 0 {
			b.WriteString(" No difference shown for " + list(notShown) + "; that is not evidence that there is none.")
		}
		return b.String()
	}
	var parts []string
	if len(refuted) > 0 {
		parts = append(parts, list(refuted)+isAre(refuted)+" refuted")
	}
	if len(undecided) > 0 {
		parts = append(parts, list(undecided)+isAre(undecided)+" undecided")
	}
	if hold := against - len(refuted) - len(undecided); hold == against && against > 1 {
		parts = append(parts, fmt.Sprintf("All %d characteristics hold", hold))
	} else if hold == against {
		parts = append(parts, r.Characteristics[0].Name+" holds")
	} else if hold > 0 {
		parts = append(parts, fmt.Sprintf("%d %s", hold, map[bool]string{true: "holds", false: "hold"}[hold == 1]))
	}
	b.WriteString(" " + strings.Join(parts, ", ") + ".")
	if len(refuted) > 0 && against > 1 {
		b.WriteString(" The overall verdict rests on " + list(refuted) + "; its error grows with the number of characteristics refuted.")
	}
	return b.String()
}

func isAre(names []string) string {
	if len(names) == 1 {
		return " is"
	}
	return " are"
}

// list joins names as a sentence does, and counts what would make it unreadable.
func list(names []string) string {
	const most = 5
	if len(names) > most {
		return strings.Join(names[:most], ", ") + fmt.Sprintf(" and %d more", len(names)-most)
	}
	if len(names) == 1 {
		return names[0]
	}
	return strings.Join(names[:len(names)-1], ", ") + " and " + names[len(names)-1]
}

func upperFirst(s string) string {
	if s == "" {
		return s
	}
	for i, r := range s {
		return strings.ToUpper(string(r)) + s[i+len(string(r)):]
	}
	return s
}

// Asked says what the plan asks, for all characteristics that share it, in one line: the criterion's own line.
func Asked(r Result) string {
	if len(r.Characteristics) == 0 {
		return ""
	}
	counts := map[string]int{}
	var order []string
	for _, c := range r.Characteristics {
		s := askedMargin(c)
		if counts[s] == 0 {
			order = append(order, s)
		}
		counts[s]++
	}
	most := order[0]
	for _, s := range order {
		if counts[s] > counts[most] {
			most = s
		}
	}
	s := "Asked: " + most
	if rest := len(r.Characteristics) - counts[most]; rest > 0 {
		s += " (" + Count(rest, "characteristic", "characteristics") + " otherwise)"
	}
	c := r.Characteristics[0]
	s += ", alpha " + Plain(c.Alpha) + ", " + methodName(c.Method)
	if c.Spread != nil && c.Spread.Asked != nil {
		s += "; spread ratio below " + Fixed(*c.Spread.Asked, 2)
	}
	return s
}

func methodName(m string) string {
	if m == "miettinen-nurminen" {
		return "score method of Miettinen and Nurminen"
	}
	return upperFirst(m)
}

// askedMargin says one characteristic's objective and margin as the plan states them.
func askedMargin(c Comparison) string {
	word := map[Objective]string{
		Equivalence: "equivalent", NotLower: "not lower", NotHigher: "not higher",
		Difference: "different", Lower: "lower", Higher: "higher",
	}[c.Objective]
	if c.Equivalence == nil || !c.Objective.AgainstMargin() {
		return word
	}
	m := c.Equivalence.Margin
	if m.Kind == "tolerance_fraction" {
		width := "full width"
		if m.Of == "half" {
			width = "half width"
		}
		return fmt.Sprintf("%s within ±%s of the tolerance (%s)", word, Percent(*m.Stated, 4), width)
	}
	switch m.Kind {
	case "reference_fraction":
		return fmt.Sprintf("%s within ±%s of the reference's mean", word, Percent(*m.Stated, 4))
	case "sd_multiple":
		return fmt.Sprintf("%s within ±%s standard deviations", word, Plain(*m.Stated))
	case "keep_ppk":
		return fmt.Sprintf("%s so far as Ppk stays at least %s", word, Plain(*m.Stated))
	}
	return word + " within " + MarginText(c)
}

// MarginText is the margin as tested: "±0.005 mm", "−0.01 to 0.02 mm", "+0.008 mm", "0.8 to 1.25 times".
func MarginText(c Comparison) string {
	e := c.Equivalence
	if e == nil {
		return "no margin"
	}
	u, end := c.Unit, signed
	switch {
	case e.Scale == scaleRatio:
		u, end = "times", margin
	case c.Kind == "attribute":
		u = ""
	}
	switch {
	case e.MarginLower != nil && e.MarginUpper != nil && *e.MarginLower == -*e.MarginUpper:
		return unit("±"+margin(*e.MarginUpper), u)
	case e.MarginLower != nil && e.MarginUpper != nil:
		return unit(margin(*e.MarginLower)+" to "+margin(*e.MarginUpper), u)
	case e.MarginUpper != nil:
		return unit(end(*e.MarginUpper), u)
	case e.MarginLower != nil:
		return unit(end(*e.MarginLower), u)
	}
	return "no margin"
}

// margin rounds away what binary arithmetic adds to a decimal margin: 0.1 · 0.05 is shown as 0.005.
func margin(x float64) string {
	short, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 12, 64), 64)
	if err != nil {
		return Plain(x)
	}
	return Plain(short)
}

func signed(x float64) string {
	if x > 0 {
		return "+" + margin(x)
	}
	return margin(x)
}
