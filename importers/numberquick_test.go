package importers

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// The short way reads a number exactly as the long one does, or not at all.
func TestQuickNumber(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.OneOf(rapid.StringMatching(`-?[0-9]{1,17}([.,][0-9]{1,9})?`), rapid.StringMatching(`[-+0-9.,e ]{0,8}`)).Draw(t, "text")
		decimal := rapid.SampledFrom([]byte{0, '.', ','}).Draw(t, "decimal")
		value, decimals, ok := quickNumber(text, decimal)
		if !ok {
			return
		}
		want, wantDecimals, err := parseNumber(text, decimal)
		if err != nil || math.Float64bits(value) != math.Float64bits(want) || decimals != wantDecimals {
			t.Fatalf("%q with %q: got %v, %d decimals, want %v, %d, %v", text, decimal, value, decimals, want, wantDecimals, err)
		}
	})
	for _, text := range []string{"12", "-0", "0.050", "12.003000000000001", "-7.5"} {
		if _, _, ok := quickNumber(text, '.'); !ok {
			t.Errorf("%q: got it left to the long way, want it read", text)
		}
	}
}

// What the quick looks at plain numbers say is what the careful ones say.
func TestQuickLooks(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		s := rapid.StringMatching(`-?[0-9]{0,5}[.,]?[0-9]{0,19}`).Draw(rt, "text")
		_, _, point := parseNumber(s, '.')
		_, _, comma := parseNumber(s, ',')
		if plainNumber(s) && point != nil && comma != nil {
			rt.Errorf("plainNumber(%q): got true, want false: %v, %v", s, point, comma)
		}
		if got, ok := shortDecimals(s); ok && point == nil {
			value, _, _ := parseNumber(s, '.')
			if want := storedDecimals("", value); got != want {
				rt.Errorf("shortDecimals(%q): got %d, want %d", s, got, want)
			}
		}
		is, thousands, ok := pointOf(s)
		if !ok {
			return
		}
		w, err := splitNumber(s, 0)
		_, could := ungroup(strings.TrimLeft(s, "-"), ".")
		if err != nil || w.comma || is != (w.fraction != "") || thousands != could {
			rt.Errorf("pointOf(%q): got %v, %v, want %+v, %v", s, is, thousands, w, could)
		}
	})
}
