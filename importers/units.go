package importers

import (
	"math/big"
	"strings"
)

// unitScale is one unit of a quantity: how many of the quantity's base units it is, exactly.
type unitScale struct {
	quantity string
	base     *big.Rat
}

// scales are the units that are converted, by their key. The inch is 25.4 mm, the pound 0.45359237 kg and the pound-force
// 4.4482216152605 N by definition (NIST SP 811, 2008, appendix B); the others are decimal. Temperatures and angles are not
// converted.
var scales = func() map[string]unitScale {
	all := map[string]unitScale{}
	for _, line := range []struct{ quantity, units string }{
		{"length", "m 1|dm 1/10|cm 1/100|mm 1/1000|µm 1/1000000|nm 1/1000000000|km 1000|in 0.0254|ft 0.3048|mil 0.0000254|thou 0.0000254"},
		{"mass", "g 1|mg 1/1000|µg 1/1000000|kg 1000|t 1000000|lb 453.59237|oz 28.349523125"},
		{"force", "N 1|mN 1/1000|kN 1000|MN 1000000|lbf 4.4482216152605"},
		{"torque", "Nm 1|mNm 1/1000|cNm 1/100|Ncm 1/100|kNm 1000|Nmm 1/1000"},
		{"pressure", "Pa 1|kPa 1000|MPa 1000000|GPa 1000000000|bar 100000|mbar 100|hPa 100|psi 44482216152605/6451600000|ksi 44482216152605/6451600"},
		{"area", "mm2 1|cm2 100|m2 1000000"},
		{"volume", "ml 1|l 1000|µl 1/1000|cm3 1|mm3 1/1000|m3 1000000"},
		{"time", "s 1|ms 1/1000|µs 1/1000000|ns 1/1000000000|min 60|h 3600"},
		{"ratio", "% 1/100|‰ 1/1000|ppm 1/1000000|ppb 1/1000000000"},
		{"voltage", "V 1|mV 1/1000|µV 1/1000000|kV 1000"},
		{"current", "A 1|mA 1/1000|µA 1/1000000"},
		{"power", "W 1|mW 1/1000|kW 1000|MW 1000000"},
		{"resistance", "Ω 1|mΩ 1/1000|kΩ 1000|MΩ 1000000"},
		{"capacitance", "F 1|µF 1/1000000|nF 1/1000000000|pF 1/1000000000000"},
		{"inductance", "H 1|mH 1/1000|µH 1/1000000"},
		{"frequency", "Hz 1|kHz 1000|MHz 1000000|GHz 1000000000"},
		{"energy", "J 1|mJ 1/1000|kJ 1000"},
		{"density", "g/cm3 1|kg/m3 1/1000|g/ml 1"},
		{"concentration", "mg/l 1|µg/l 1/1000|g/l 1000"},
	} {
		for _, u := range strings.Split(line.units, "|") {
			name, factor, _ := strings.Cut(u, " ")
			r, ok := new(big.Rat).SetString(factor)
			if ok {
				all[name] = unitScale{quantity: line.quantity, base: r}
			}
		}
	}
	return all
}()

// scaleOf is the scale of a unit in any spelling.
func scaleOf(unit string) (unitScale, bool) {
	key := unitKey(unbracket(unit))
	switch strings.ToLower(key) {
	case "inches", "zoll":
		key = "in"
	case "micron", "microns":
		key = "µm"
	case "lbs":
		key = "lb"
	case "L":
		key = "l"
	case "mils":
		key = "mil"
	}
	s, ok := scales[key]
	return s, ok
}

// unitFactor is what a number in one unit is multiplied by to be in another, exactly; false where the two are not units of one
// quantity that is converted.
func unitFactor(from, to string) (*big.Rat, bool) {
	a, ok1 := scaleOf(from)
	b, ok2 := scaleOf(to)
	if !ok1 || !ok2 || a.quantity != b.quantity {
		return nil, false
	}
	return new(big.Rat).Quo(a.base, b.base), true
}

// factorText writes a factor: as a decimal where it is one, else as "1/25.4" or a fraction.
func factorText(f *big.Rat) string {
	if s, ok := decimalText(f); ok {
		return s
	}
	if s, ok := decimalText(new(big.Rat).Inv(f)); ok {
		return "1/" + s
	}
	return f.RatString()
}

// decimalText is a number as a decimal; false where it has no end, or none within 20 decimals.
func decimalText(f *big.Rat) (string, bool) {
	n, ok := f.FloatPrec()
	if !ok || n > 20 {
		return "", false
	}
	return f.FloatString(n), true
}
