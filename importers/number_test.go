package importers

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestParseNumber(t *testing.T) {
	for _, tt := range []struct {
		text     string
		decimal  byte
		value    float64
		decimals int
	}{
		{"12.003", '.', 12.003, 3},
		{"12.003", 0, 12.003, 3},
		{" 12.003\u00a0", 0, 12.003, 3},
		{"0 \u00a0", 0, 0, 0}, // found by FuzzParseNumber: the oracle took only some spaces off
		{"-0.5", 0, -0.5, 1},
		{"\u22120.5", 0, -0.5, 1},
		{"+7", 0, 7, 0},
		{".5", 0, 0.5, 1},
		{"12.", 0, 12, 0},
		{"1.25e-3", 0, 0.00125, 5},
		{"1.25E+3", 0, 1250, 0},
		{"1,25E\u22123", 0, 0.00125, 5},
		{"12,0034", 0, 12.0034, 4},
		{"0,003", 0, 0.003, 3},
		{"12,003", ',', 12.003, 3},
		{"12,003", '.', 12003, 0},
		{"12.003", ',', 12003, 0},
		{"1.200,3", 0, 1200.3, 1},
		{"1,200.3", 0, 1200.3, 1},
		{"1,200,300", 0, 1200300, 0},
		{"1\u00a0200,3", 0, 1200.3, 1},
		{"1\u202f200", 0, 1200, 0},
		{"0", 0, 0, 0},
		{"-0.0", 0, math.Copysign(0, -1), 1},
		{"9007199254740993", 0, 9007199254740992, 0},
		{"0.1000000000000000055511151231257827021181583404541015625", '.', 0.1, 55},
		{"1.7976931348623157e308", 0, math.MaxFloat64, 0},
		{"4.9e-324", 0, 5e-324, 325},
	} {
		value, decimals, err := ParseNumber(tt.text, tt.decimal)
		if err != nil || value != tt.value || decimals != tt.decimals || math.Signbit(value) != math.Signbit(tt.value) {
			t.Errorf("ParseNumber(%q, %q): got %v, %d, %v, want %v, %d", tt.text, tt.decimal, value, decimals, err, tt.value, tt.decimals)
		}
	}
}

func TestParseNumberRefuses(t *testing.T) {
	for _, tt := range []struct {
		text    string
		decimal byte
		code    string
	}{
		{"", 0, NotANumber},
		{"-", 0, NotANumber},
		{".", 0, NotANumber},
		{"e5", 0, NotANumber},
		{"1e", 0, NotANumber},
		{"1e5.0", 0, NotANumber},
		{"1e1e1", 0, NotANumber},
		{"0x1F", 0, NotANumber},
		{"0x1p3", 0, NotANumber},
		{"1_000", 0, NotANumber},
		{"12abc", 0, NotANumber},
		{"12 mm", 0, NotANumber},
		{"12 003", 0, NotANumber},
		{"1.2.3", 0, NotANumber},
		{"12,", 0, NotANumber},
		{"12.5", ',', NotANumber},
		{"12,5", '.', NotANumber},
		{"1,200.3", ',', NotANumber},
		{"1.200,3", '.', NotANumber},
		{"1,20.3", 0, NotANumber},
		{"12,003", 0, DecimalAmbiguous},
		{"-1,200", 0, DecimalAmbiguous},
		{"40,012", 0, DecimalAmbiguous},
		{"NaN", 0, NotFinite},
		{"+Inf", 0, NotFinite},
		{"Infinity", 0, NotFinite},
		{"1e400", 0, OutOfRange},
		{"1e-400", 0, OutOfRange},
		{"1e9999999", 0, NotANumber},
		{"--1", 0, NotANumber},
		{"-\u22125", 0, NotANumber},
		{"\u2212-5", 0, NotANumber},
		{"\u2212\u22125", 0, NotANumber},
		{"+-5", 0, NotANumber},
		{"-+5", 0, NotANumber},
		{"1e-\u22125", 0, NotANumber},
		{"-+1", 0, NotANumber},
		{"１２", 0, NotANumber},
		{"12٫003", 0, NotANumber},
		{"1\u200b2", 0, NotANumber},
		{"1,2e3,4", 0, NotANumber},
		{"1\u00a020", 0, NotANumber},
	} {
		value, decimals, err := ParseNumber(tt.text, tt.decimal)
		if err == nil || err.Code != tt.code || value != 0 || decimals != 0 {
			t.Errorf("ParseNumber(%q, %q): got %v, %d, %v, want the code %s", tt.text, tt.decimal, value, decimals, err, tt.code)
			continue
		}
		if err.Text != tt.text || err.Want == "" || err.Do == "" {
			t.Errorf("ParseNumber(%q): got %+v, want found, want and do", tt.text, err)
		}
	}
}

// What strconv writes of any finite double is read back the same, with either mark.
func TestParseNumberReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64().Draw(t, "x")
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return
		}
		for _, form := range []byte{'e', 'g', 'f'} {
			s := strconv.FormatFloat(x, form, -1, 64)
			if got, _, err := ParseNumber(s, '.'); err != nil || got != x {
				t.Fatalf("%s: got %v, %v, want %v", s, got, err, x)
			}
			if got, _, err := ParseNumber(strings.Replace(s, ".", ",", 1), ','); err != nil || got != x {
				t.Fatalf("%s with a comma: got %v, %v, want %v", s, got, err, x)
			}
		}
	})
}

func TestStoredDecimals(t *testing.T) {
	for _, tt := range []struct {
		value float64
		want  int
	}{{12.003, 3}, {12.003000000000001, 3}, {12, 0}, {0, 0}, {1e-7, 7}, {1.5e20, 0}, {569.67, 2}, {-0.25, 2}} {
		if got := storedDecimals("", tt.value); got != tt.want {
			t.Errorf("storedDecimals(%v): got %d, want %d", tt.value, got, tt.want)
		}
	}
}

func FuzzParseNumber(f *testing.F) {
	for _, s := range []string{"12.003", "40,012", "1.200,3", "1e400", "\u22121", "1\u00a0200,3", "NaN", "", "<0.05", "12.3 mm"} {
		f.Add(s, byte(0))
		f.Add(s, byte(','))
		f.Add(s, byte('.'))
	}
	f.Fuzz(func(t *testing.T, s string, decimal byte) {
		if decimal != 0 && decimal != ',' {
			decimal = '.'
		}
		v, decimals, err := ParseNumber(s, decimal)
		if err != nil {
			if catalogue[err.Code] == "" {
				t.Errorf("got the code %q, want one of the catalogue", err.Code)
			}
			return
		}
		if math.IsNaN(v) || math.IsInf(v, 0) || decimals < 0 {
			t.Errorf("ParseNumber(%q): got %v, %d", s, v, decimals)
		}
		// What was accepted is nothing but digits, signs, marks and an exponent, and its digits are all there.
		plain := strings.NewReplacer("\u2212", "-", "\u00a0", "", "\u202f", "", "\u2009", "").Replace(trimmed(s))
		if strings.Trim(plain, "0123456789+-.,eE") != "" || !strings.ContainsAny(plain, "0123456789") {
			t.Errorf("ParseNumber(%q): got %v, want a problem", s, v)
		}
		for _, form := range []string{plain, strings.ReplaceAll(plain, ",", ""), strings.ReplaceAll(strings.ReplaceAll(plain, ".", ""), ",", "."), strings.ReplaceAll(plain, ".", "")} {
			if want, err := strconv.ParseFloat(form, 64); err == nil && want == v {
				return
			}
		}
		t.Errorf("ParseNumber(%q, %q): got %v, which no reading of the marks gives", s, decimal, v)
	})
}
