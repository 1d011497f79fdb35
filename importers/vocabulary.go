package importers

import (
	"strings"
)

// This file is the only one that knows the words of inspection sheets. A word stands here only where it means one thing in
// every sheet; letters count without case, dots and colons at the end are left off.

// The parts that rows and columns play.
const (
	lotHeading   = "lot"
	partHeading  = "part"
	orderHeading = "order"
	groupHeading = "group"
	takerHeading = "taker" // who or what took the readings

	unitLabel    = "unit"
	nominalLabel = "nominal"
	upperLabel   = "upper"
	lowerLabel   = "lower"
	upperTol     = "upper tolerance"
	lowerTol     = "lower tolerance"
	bothTol      = "tolerance" // one number, plus and minus
	summaryLabel = "summary"
	unitTexts    = "mm µm um nm cm dm m km in inch ft mil thou \" ' ° deg rad °C °F K g mg µg kg t oz lb N mN kN lbf Nm N·m Ncm cNm mNm " +
		"Pa kPa MPa GPa bar mbar psi ksi N/mm² N/mm2 kN/mm² MPa·m½ mm² mm2 cm² cm2 m² mm³ mm3 cm³ cm3 ml mL l L s ms µs ns min h V mV kV A mA µA W kW " +
		"Ω kΩ MΩ mΩ ohm F µF nF pF H mH Hz kHz MHz GHz % ‰ ppm ppb HRC HRB HV HB HBW HV10 HV30 Shore J kJ mJ cd lm lx dB mol pH rpm 1/min min⁻¹ " +
		"g/cm³ g/cm3 kg/m³ kg/m3 mm/s m/s mPa·s mPas mol/l mg/l µg/l mg/g"
)

// headingWords say which part a column plays.
var headingWords = words(
	means(lotHeading, "lot|lot no|lot nr|lot number|lot id|lotno|lot name|lot code|lot #|batch #|batch|batch no|batch nr|batch number|batch id|batch code|"+
		"charge|chargen-nr|chargennummer|charge nr|chargen nr|los|losnummer|los nr|los-nr|lote|lotto|partie"),
	means(partHeading, "part|part no|part nr|part number|part id|partno|parts|serial|serial no|serial nr|serial number|s/n|sn|no|nr|#|id|number|"+
		"sample #|part #|serial #|piece #|item #|specimen #|sample|sample no|sample nr|sample id|sample number|specimen|specimen no|specimen id|piece|piece no|item|item no|unit no|"+
		"teil|teil nr|teil-nr|teilenr|teilenummer|teil-id|nummer|seriennummer|serien-nr|probe|proben-nr|probe nr|stück|lfd. nr|lfd nr"),
	means(groupHeading, "cavity|cavity no|cav|kavität|nest|heat|heat no|melt|schmelze|subgroup|sublot|sub-lot|supplier|lieferant|machine|machine no|maschine|mould|mold|tool no"),
	means(takerHeading, "operator|inspector|prüfer|gauge no|gage no|messmittel|prüfmittel"),
	means(orderHeading, "date|time|date/time|timestamp|datum|zeit|uhrzeit|measured at|measured on|order|sequence|reihenfolge"),
)

// labelWords say what a row is for, where they stand in its lot, part or first cell.
var labelWords = words(
	means(unitLabel, "unit|units|einheit|einheiten|uom|unit of measure"),
	means(nominalLabel, "nominal|nominal value|nominal size|nom|target|target value|nennmaß|nennmass|nennwert|sollwert|sollmaß|sollmass|soll"),
	means(upperLabel, "usl|upper limit|upper spec|upper spec limit|upper specification limit|upper specification|max limit|maximum limit|"+
		"limits upper|limits max|limits +|spec limits upper|spec limits max|specification upper|specification max|specification limits upper|specification limits max|osg|otg|ogw|obergrenze|obergrenze ogw|oberer grenzwert|obere grenze|obere spezifikationsgrenze|höchstmaß|höchstmass"),
	means(lowerLabel, "lsl|lower limit|lower spec|lower spec limit|lower specification limit|lower specification|min limit|minimum limit|"+
		"limits lower|limits min|limits -|spec limits lower|spec limits min|specification lower|specification min|specification limits lower|specification limits min|usg|utg|ugw|untergrenze|untergrenze ugw|unterer grenzwert|untere grenze|untere spezifikationsgrenze|mindestmaß|mindestmass"),
	means(upperTol, "upper tol|upper tolerance|plus|plus tol|plus tolerance|tol plus|tolerance plus|tol+|+tol|tol +|+ tol|tol. +|tol(+)|tol (+)|tol. (+)|tolerance +|+ tolerance|"+
		"upper dev|upper deviation|upper limit deviation|dev +|+ dev|dev+|+dev|upper allowance|oberes abmaß|oberes abmass|oberes grenzabmaß|oberes grenzabmass|obere toleranz|toleranz +|+ toleranz|"+
		"obere abweichung|toleranz oben|plustoleranz|tolerance upper|tolerance max|upper tolerances|tolerances +"),
	means(lowerTol, "lower tol|lower tolerance|minus|minus tol|minus tolerance|tol minus|tolerance minus|tol-|-tol|tol−|−tol|tol–|tol -|tol −|tol –|- tol|− tol|– tol|tol. -|tol. −|tol(-)|tol (-)|tol (−)|tol. (-)|tol. (−)|"+
		"tolerance -|tolerance −|- tolerance|− tolerance|lower dev|lower deviation|lower limit deviation|dev -|dev −|- dev|− dev|dev-|-dev|lower allowance|unteres abmaß|unteres abmass|unteres grenzabmaß|"+
		"unteres grenzabmass|untere toleranz|toleranz -|toleranz −|- toleranz|untere abweichung|toleranz unten|minustoleranz|tolerance lower|tolerance min|lower tolerances|tolerances -"),
	means(bothTol, "±|+/-|±tol|± tol|tol ±|tol±|tol. ±|tol +/-|tol. +/-|tol (±)|tol (+/-)|tolerance ±|± tolerance|tolerance +/-|tolerance (±)|tolerance (+/-)|plus/minus|toleranz ±|± toleranz|toleranz +/-"),
	means(summaryLabel, "mean|average|avg|averages|means|mean values|mittelwerte|statistics|summary statistics|statistik|mean value|arithmetic mean|grand mean|x-bar|xbar|x̄|x̅|s|sd|sigma|σ|std|stdev|std dev|std. dev|st. dev|st dev|"+
		"standard deviation|stdabw|std.-abw|standardabweichung|streuung|var|variance|varianz|min|minimum|max|maximum|range|r|spannweite|median|mode|"+
		"sum|total|summe|n|count|anzahl|no of values|number of values|cp|cpk|pp|ppk|cm|cmk|cv|rsd|se|sem|q1|q3|ucl|lcl|oeg|ueg|"+
		"mittelwert|mittel|mw|durchschnitt|ø|3 sigma|6 sigma|+3s|-3s|3s|6s|stabw|std abw|stand.-abw|kleinster wert|größter wert|kleinstwert|größtwert|mittelwert x̄|x quer|x-quer|"+
		"moyenne|moy|écart-type|ecart-type|écart type|ecart type|étendue|etendue|mini|maxi|médiane|mediane|promedio|media|mediana|moda|mínimo|minimo|máximo|maximo|massimo|"+
		"desviación estándar|desviacion estandar|desv. est|desv. estándar|desv.est|desvest|desviación típica|rango|varianza|suma|somma|deviazione standard|dev. st|dev.st|dev. std|"+
		"gemiddelde|standaardafwijking|standaarddeviatie|medelvärde|medel|standardavvikelse|średnia|odchylenie standardowe|průměr|směrodatná odchylka|média|desvio padrão|"+
		"平均|平均値|平均值|均值|最大|最大値|最大值|最小|最小値|最小值|標準偏差|标准偏差|标准差|範囲|范围|极差|中央値|中位数|合計|合计"),
)

// unitWords are the units that are known without brackets.
var unitWords = func() map[string]bool {
	known := map[string]bool{}
	for _, u := range strings.Fields(unitTexts) {
		known[u] = true
	}
	return known
}()

type meaning struct{ means, words string }

func means(means, words string) meaning { return meaning{means, words} }

func words(all ...meaning) map[string]string {
	table := map[string]string{}
	for _, m := range all {
		for _, w := range strings.Split(m.words, "|") {
			table[w] = m.means
		}
	}
	return table
}

// word is a cell's text as the vocabulary knows it.
func word(text string) string {
	return strings.TrimRight(strings.ToLower(joined(text)), " .:=")
}

// headingMeans is the part that a heading names; empty for a measurement or anything else. A unit is left off first.
func headingMeans(heading string) string {
	if m, ok := headingWords[word(heading)]; ok {
		return m
	}
	if first, second, ok := strings.Cut(heading, "/"); ok { // in two languages
		if m := headingWords[word(first)]; m != "" && m == headingWords[word(second)] {
			return m
		}
	}
	name, _ := splitUnit(heading)
	return headingWords[word(name)]
}

// missing says whether a text is a mark for a missing value.
func missing(text string) bool {
	if text != "" && text[0] >= '0' && text[0] <= '9' { // most cells
		return false
	}
	switch strings.ToLower(joined(text)) {
	case "", "n/a", "#n/a", "na", "n.a.", "n. a.", "n.d.", "n. d.", "-", "--", "---", "\u2013", "\u2014", "\u2212", ".", "..", "...", "…", "?":
		return true
	}
	return false
}

// nonDetect says whether a text states a value below or above a detection limit, by sign or by word.
func nonDetect(text string) bool {
	if text != "" && text[0] >= '0' && text[0] <= '9' { // most cells
		return false
	}
	s := strings.ToLower(joined(text))
	switch s {
	case "bdl", "<lod", "< lod", "<loq", "< loq", "below lod", "below loq", "below detection limit", "n.n.", "<bg", "< bg", "<ng", "< ng":
		return true
	}
	for _, sign := range []string{"<=", ">=", "<", ">", "≤", "≥"} {
		if rest, ok := strings.CutPrefix(s, sign); ok {
			number, _, _ := cutUnit(rest)
			return isNumber(number)
		}
	}
	return false
}

// unitKey makes spellings of one unit equal.
func unitKey(unit string) string {
	u := strings.NewReplacer("\u03bc", "µ", " ", "", "\u00a0", "", "\u00b7", "", "*", "").Replace(strings.TrimSpace(unit))
	switch u {
	case "um":
		return "µm"
	case "inch", "\"", "''":
		return "in"
	case "deg":
		return "°"
	case "ohm", "\u2126":
		return "Ω"
	case "N/mm2", "N/mm²":
		return "MPa"
	}
	return strings.NewReplacer("²", "2", "³", "3").Replace(u)
}

// isUnit says whether a text is a unit, in brackets or not.
func isUnit(text string) bool {
	u := unbracket(strings.TrimSpace(text))
	return unitWords[u] || unitWords[strings.ReplaceAll(u, "\u03bc", "µ")] || unitWords[strings.ReplaceAll(u, "\u2126", "Ω")]
}

func unbracket(s string) string {
	for _, b := range []string{"[]", "()"} {
		if len(s) > 2 && s[0] == b[0] && s[len(s)-1] == b[1] {
			return strings.TrimSpace(s[1 : len(s)-1])
		}
	}
	return s
}

// splitUnit takes a unit off the end of a heading: square brackets hold one, round ones and none only a known one.
func splitUnit(heading string) (name, unit string) {
	h := joined(heading)
	for _, b := range []string{"[]", "()"} {
		if !strings.HasSuffix(h, b[1:]) {
			continue
		}
		i := strings.LastIndex(h, b[:1])
		if i <= 0 {
			continue
		}
		in := strings.TrimSpace(h[i+1 : len(h)-1])
		if b == "[]" && in != "" && len(in) <= 16 || isUnit(in) {
			return strings.TrimSpace(h[:i]), in
		}
	}
	return nakedUnit(h)
}

// cutUnit splits a cell such as "12.3 mm" into its number and its unit.
func cutUnit(text string) (number, unit string, ok bool) {
	s := trimmed(text)
	if len(s) > 400 {
		return s, "", false
	}
	i := strings.LastIndexAny(s, "0123456789.,")
	for i >= 0 {
		number, unit = trimmed(s[:i+1]), trimmed(s[i+1:])
		if unit == "" {
			return s, "", false
		}
		if isUnit(unit) && isNumber(number) {
			return number, unit, true
		}
		i = strings.LastIndexAny(s[:i], "0123456789.,") // units such as mm2 end in a digit
	}
	return s, "", false
}

// isNumber says whether a text is a number with either decimal mark.
func isNumber(text string) bool {
	if plainNumber(text) {
		return true
	}
	_, _, point := ParseNumber(text, '.')
	if point == nil {
		return true
	}
	_, _, comma := ParseNumber(text, ',')
	return comma == nil
}
