package importers

import (
	"fmt"
	"math"
	"math/big"
	"strconv"
	"strings"

	"lotpair/qa"
)

// conversion is how the numbers of one lot become those of the characteristic: multiplied by the factor between the units,
// and added to the nominal value where they are deviations from it. A nil conversion changes nothing.
type conversion struct {
	from, to string // units; equal keys where only the nominal value is added
	factor   *big.Rat
	nominal  *big.Rat // nil for absolute values, and until it is known
	is       bool     // the values are deviations
	target   string   // the nominal value as written in the ledger
	places   int      // decimals of the nominal value
}

// mergeUnit settles the unit of a characteristic between the plan and the sheet. Where the lot's differs, its readings are
// converted if the plan says so, else the plan must.
func (t *table) mergeUnit(c *qa.Characteristic, col column, side qa.LotPlan, sideName qa.Side) (*conversion, error) {
	at := fmt.Sprintf("%s!%s", t.place(), t.address(col.col))
	deviation := side.Values == "deviation"
	unit, stated := col.unit, false
	switch _, ofOneQuantity := unitFactor(side.Unit, col.unit); {
	case side.Unit == "":
	case col.unit == "" || unitKey(side.Unit) == unitKey(col.unit):
		unit, stated = side.Unit, true
	case ofOneQuantity || !knownUnit(side.Unit) || !knownUnit(col.unit):
		return nil, planError(at, "found the unit %s, want %s as %s.unit states; correct the plan or the sheet", quoted(col.unit), quoted(side.Unit), sideName)
	default: // the lot's unit is one of another quantity: it does not speak of this column
		t.say("%s is in %s as its heading says; %s.unit = %s is not for it.", t.columnText(col.col), col.unit, sideName, quoted(side.Unit))
	}
	switch {
	case unit == "" && c.Unit != "":
		t.say("%s states no unit for %s; taken as %s.", t.columnText(col.col), c.Name, c.Unit)
	case c.Unit == "":
		c.Unit = unit
	case unitKey(unit) != unitKey(c.Unit):
		f, ok := unitFactor(unit, c.Unit)
		switch {
		case !ok:
			return nil, planError(at, "found the unit %s, want %s as for the characteristic %s; the one cannot be converted into the other: bring both lots to one unit, or correct unit in the plan",
				quoted(unit), quoted(c.Unit), quoted(c.Name))
		case !stated:
			return nil, planError(at, "found the unit %s, want %s as for the characteristic %s; if the readings are in %s, state unit = %s under [%s]: they are then multiplied by %s",
				quoted(unit), quoted(c.Unit), quoted(c.Name), unit, tomlText(unit), sideName, factorText(f))
		}
		return &conversion{from: unit, to: c.Unit, factor: f, is: deviation}, nil
	}
	if deviation {
		return &conversion{from: unit, to: unit, factor: big.NewRat(1, 1), is: true}, nil
	}
	return nil, nil
}

func knownUnit(unit string) bool {
	_, ok := scaleOf(unit)
	return ok
}

// settleNominals gives the conversions of deviations the nominal value that they are added to.
func (r *reader) settleNominals() error {
	var faults []Fault
	for i := range r.sides {
		s := &r.sides[i]
		for k, c := range r.out.Characteristics {
			v := s.conversions[k]
			if v == nil || !v.is {
				continue
			}
			if c.Target == nil {
				faults = append(faults, Fault{Place: s.table.place(), Text: fmt.Sprintf("%s.values: found deviations and no nominal value of the characteristic %s, want one; state its target in the plan", s.side, quoted(c.Name))})
				continue
			}
			v.nominal = exact(*c.Target)
			v.target, _ = decimalText(v.nominal)
			v.places = storedDecimals("", *c.Target)
		}
	}
	if len(faults) > 0 {
		return &PlanError{Faults: faults}
	}
	return nil
}

// exact is the decimal number that a double was read from: its shortest form.
func exact(v float64) *big.Rat {
	r, _ := new(big.Rat).SetString(strconv.FormatFloat(v, 'g', -1, 64))
	return r
}

// value converts one number, exactly and rounded once, and its decimals.
func (v *conversion) value(x float64, decimals int) (float64, int) {
	product := new(big.Rat).Mul(exact(x), v.factor)
	if v.nominal != nil {
		product.Add(product, v.nominal)
	}
	y, _ := product.Float64()
	return y, max(v.decimals(decimals), v.places)
}

// decimals is how many decimals a number of so many has when it is multiplied.
func (v *conversion) decimals(before int) int {
	step := new(big.Rat).Quo(v.factor, new(big.Rat).SetInt(new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(min(before, 400))), nil)))
	if n, ok := step.FloatPrec(); ok {
		return n
	}
	f, _ := step.Float64()
	return max(0, 2-int(math.Floor(math.Log10(f)))) // without an end: three digits of the step
}

// apply converts what was taken from one cell; a problem stays one.
func (v *conversion) apply(got taken) taken {
	if v == nil {
		return got
	}
	switch {
	case got.isBelow && v.is:
		return taken{problem: problem(NotANumber, got.text, "a number: a bound of a deviation states no bound of the value")}
	case got.isBelow && got.limit != nil:
		limit, decimals := v.value(*got.limit, got.decimals)
		got.limit, got.decimals = &limit, decimals
	case got.isValue:
		before := strconv.FormatFloat(got.value, 'g', -1, 64)
		got.value, got.decimals = v.value(got.value, got.decimals)
		if math.IsInf(got.value, 0) || math.IsNaN(got.value) {
			return taken{problem: problem(OutOfRange, got.text, "a number within 4.9e-324 and 1.8e308 in size")}
		}
		got.converted = also(got.converted, v.text(before))
	}
	return got
}

// text is the conversion of one number for the ledger: "0.47276 in × 25.4", "12 mm + 8 µm × 0.001 (deviation)".
func (v *conversion) text(number string) string {
	s := number
	if v.from != "" {
		s += " " + v.from
	}
	if unitKey(v.from) != unitKey(v.to) {
		s += " × " + factorText(v.factor)
	}
	if v.nominal == nil {
		return s
	}
	nominal := v.target
	if v.to != "" {
		nominal += " " + v.to
	}
	return nominal + " + " + s + " (deviation)"
}

func also(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}

// sayConversions warns of the lots that were converted, with the factor and what the rounding before it can amount to.
func (r *reader) sayConversions() {
	for _, s := range r.sides {
		for k, c := range r.out.Characteristics {
			v := s.conversions[k]
			if v == nil {
				continue
			}
			n, places := 0, 0
			for _, x := range s.lot.Series[k].Readings {
				n++
				places = max(places, writtenDecimals(x.Source.Text))
			}
			if n == 0 {
				continue
			}
			what := ""
			if unitKey(v.from) != unitKey(v.to) {
				what = fmt.Sprintf("multiplied by %s from %s to %s", factorText(v.factor), v.from, v.to)
			}
			if v.nominal != nil {
				what = also(what, "added to the nominal value "+v.target+" as deviations from it")
			}
			step := new(big.Rat).Quo(v.factor, new(big.Rat).SetInt(new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(places)), nil)))
			f, _ := step.Float64()
			s.table.warn("converted", "%s: %s of the %s lot %s. They are written to %s; one step is %s%s, so each may be off by half of that from rounding before the conversion.",
				c.Name, qa.Count(n, "reading", "readings"), s.side, what, qa.Count(places, "decimal", "decimals"), strconv.FormatFloat(f, 'g', 6, 64), spaceUnit(v.to))
		}
	}
}

func spaceUnit(u string) string {
	if u == "" {
		return ""
	}
	return " " + u
}

// writtenDecimals are the decimals of a number as its cell holds it.
func writtenDecimals(text string) int {
	text, _, _ = strings.Cut(text, "; ") // repeats of a part
	number, _, _ := cutUnit(text)
	for _, mark := range []byte{'.', ','} {
		if v, d, err := ParseNumber(number, mark); err == nil {
			return min(d, storedDecimals("", v))
		}
	}
	return 0
}

// limitsIn are the limits that a sheet states for a column, in the unit of the characteristic. Where its readings are deviations,
// limits count as absolute beside a nominal value, and are left out without one.
func (t *table) limitsIn(col int, c *qa.Characteristic, v *conversion, decimal byte) (qa.Characteristic, error) {
	if v == nil {
		return t.limitsOf(col, c.Unit, decimal)
	}
	file, err := t.limitsOf(col, v.from, decimal)
	if err != nil {
		return file, err
	}
	if v.is {
		if file.Target == nil && (file.Lower != nil || file.Upper != nil) {
			t.warn("limits-unread", "%s: limits beside deviations without a nominal value are not taken; state them in the plan.", c.Name)
			return qa.Characteristic{}, nil
		}
		return file, nil
	}
	for _, l := range []**float64{&file.Lower, &file.Target, &file.Upper} {
		if *l != nil {
			x, _ := v.value(**l, 0)
			*l = &x
		}
	}
	return file, nil
}

// conversionOf is the one conversion of the lots that a table holds; nil where they have none or not the same.
func (r *reader) conversionOf(t *table, k int) *conversion {
	var v *conversion
	first := true
	for _, s := range r.sides {
		if s.table != t {
			continue
		}
		of := s.conversions[k]
		if !first && (v == nil) != (of == nil) || !first && v != nil && v.factor.Cmp(of.factor) != 0 {
			return nil
		}
		v, first = of, false
	}
	return v
}

// unitIn is the unit in which a cell of one lot is written.
func (s *lotSide) unitIn(k int, c qa.Characteristic) string {
	if v := s.conversions[k]; v != nil {
		return v.from
	}
	return c.Unit
}
