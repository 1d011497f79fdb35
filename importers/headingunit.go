package importers

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// wordUnits are units that are words or abbreviations of something else, too: "Gap min", "Round bar". They count behind "in", a
// stroke or a comma, not behind a space alone; min not behind a comma.
var wordUnits = known("in|min|bar|mil|pH|t|h|thou|HB")

// nakedUnit takes a known unit without brackets off the end of a heading: "Width mm", "Width in mm", "Gap/mm", "Pressure, bar";
// not "Mass_kg", which is one word and a name as a program gave it. Units of one letter count behind "in" and a stroke only:
// "Hole A" and "Point, A" name no amperes. A unit behind a number belongs to that: "Force at 5 mm". What is left must not name a
// part, an order or a lot: "Time / s" is a measurement.
func nakedUnit(h string) (name, unit string) {
	i := strings.LastIndexAny(h, " ,/")
	if i <= 0 || isUnit(h) || headingWords[word(h)] != "" {
		return h, ""
	}
	name, unit = strings.TrimRight(h[:i], " "), h[i+1:]
	mark := h[i]
	if mark == '/' { // the stroke may be within the unit: "Speed m/s"
		if j := strings.LastIndexAny(name, " ,"); j > 0 && bareUnit(h[j+1:]) {
			i, mark = j, h[j]
			name, unit = strings.TrimRight(h[:i], " "), h[i+1:]
		}
	}
	if mark == ' ' {
		switch last := name[strings.LastIndexByte(name, ' ')+1:]; {
		case last == "/", strings.HasSuffix(last, ","):
			name, mark = strings.TrimRight(name[:len(name)-1], " "), name[len(name)-1]
		case last == "in" || last == "en":
			name, mark = strings.TrimRight(name[:len(name)-2], " "), 'i'
		}
	}
	if name == "" || !bareUnit(unit) {
		return h, ""
	}
	one := utf8.RuneCountInString(unit) == 1 && unit != "%" && unit != "°" && unit != "Ω"
	before := name[strings.LastIndexAny(name, " ,/")+1:]
	end, _ := utf8.DecodeLastRuneInString(name)
	switch {
	case strings.ContainsAny(unit, "\"'") || isUnit(before) && mark != 'i' || notBefore[strings.ToLower(before)] || headingWords[word(name)] != "":
		return h, ""
	case mark == '/' && (strings.EqualFold(before, "y") || !unicode.IsLetter(end) && !unicode.IsDigit(end)):
		return h, ""
	case mark == ',' && (one || unit == "min"):
		return h, ""
	case mark == ' ' && (one || wordUnits[unit] || !unicode.IsLetter(end)):
		return h, ""
	}
	return name, unit
}

// notBefore are words after which a unit says something else: "Force per mm".
var notBefore = known("per|je|pro|at|bei|@|to|bis|von|of|par|<|>|±|-|and|und|or|oder")

// bareUnit says whether a text is a known unit and has no brackets.
func bareUnit(text string) bool { return isUnit(text) && unbracket(text) == text }
