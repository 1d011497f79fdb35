package desk_test

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"lotpair/app/desk"
	"lotpair/qa"
)

// TestNumbersAreTyped holds what each system reads. What could be a thousandth or a thousand times as much is asked about.
func TestNumbersAreTyped(t *testing.T) {
	const asks, none = "type which", "want a number"
	for _, x := range []struct {
		typed        string
		point, comma string // the number as Go writes it, or a part of the error
	}{
		{"", "empty", "empty"},
		{"  ", "empty", "empty"},
		{"12", "12", "12"},
		{"1.5", "1.5", "1.5"},
		{"1,5", "1.5", "1.5"},
		{"1.234", "1.234", "found “1.234”, want 1,234 or 1234; " + asks},
		{"1,234", "found “1,234”, want 1.234 or 1234; " + asks, "1.234"},
		{"-1,234", "found “-1,234”, want -1.234 or -1234; " + asks, "-1.234"},
		{"−12.345", "-12.345", "found “−12.345”, want −12,345 or −12345; " + asks},
		{"123,456e-2", "want 123.456e-2 or 123456e-2", "1.23456"},
		{"0,125", "0.125", "0.125"},
		{"0.125", "0.125", "0.125"},
		{"1234,567", "1234.567", "1234.567"},
		{"1234.567", "1234.567", "1234.567"},
		{"1,2345", "1.2345", "1.2345"},
		{"1,234.5", "1234.5", "1234.5"},
		{"1.234,5", "1234.5", "1234.5"},
		{"1,234,567", "1.234567e+06", "1.234567e+06"},
		{"1.234.567", "1.234567e+06", "1.234567e+06"},
		{"1\u202f234,5", "1234.5", "1234.5"},
		{"−0,01", "-0.01", "-0.01"},
		{".5", "0.5", "0.5"},
		{",5", "0.5", "0.5"},
		{"5 %", none, none},
		{"1,2,3", none, none},
		{"wide", none, none},
		{"0x1p-2", none, none},
		{"inf", none, none},
		{"1e999", "want a number within", "want a number within"},
	} {
		for d, want := range map[desk.Decimal]string{desk.Point: x.point, desk.Comma: x.comma} {
			v, err := d.Number(x.typed)
			got := "empty"
			switch {
			case err != nil:
				got = err.Error()
			case v != nil:
				got = strings.ReplaceAll(qa.Plain(*v), "−", "-")
				if math.Abs(*v) >= 1e6 {
					got = "1.234567e+06"
				}
			}
			if err != nil && !strings.Contains(got, want) || err == nil && got != want {
				t.Errorf("mark %v, typed %q: got %s, want %s", d, x.typed, got, want)
			}
		}
	}
}

// TestWhatIsShownIsTyped types what is shown, in a line and in a sentence: it is the same number to the last digit.
func TestWhatIsShownIsTyped(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := rapid.SampledFrom([]desk.Decimal{desk.Point, desk.Comma}).Draw(t, "mark")
		v := rapid.Float64().Draw(t, "v")
		if rapid.Bool().Draw(t, "short") {
			v = float64(rapid.IntRange(-9_999_999, 9_999_999).Draw(t, "n")) / 1000 // where a mark could group
		}
		for _, text := range []string{d.NumberText(&v, 1), d.Shown(qa.Plain(v), nil), strings.TrimSuffix(d.Shown(qa.Plain(v)+" mm", nil), " mm")} {
			got, err := d.Number(text)
			if err != nil || got == nil || *got != v {
				t.Fatalf("mark %v: typed %q, got %v, %v, want %v", d, text, got, err, v)
			}
		}
	})
}

// TestNumbersAreShown holds which points of a text are decimal marks.
func TestNumbersAreShown(t *testing.T) {
	kept := []string{"Slot 3.2", "Rev 1.4", "2.5"}
	for _, x := range []struct{ text, want string }{
		{"within ±0.005 mm, at alpha 0.05.", "within ±0,005 mm, at alpha 0,05."},
		{"−0.01 to 0.02 mm", "−0,01 to 0,02 mm"},
		{"[0.8, 1.25]", "[0,8; 1,25]"},
		{"of 40, 0.5 and of 0.5, 40", "of 40; 0,5 and of 0,5; 40"},
		{"-0.5, −0.25, +1.5", "-0,5; −0,25; +1,5"},
		{"the lot, 0.5 mm", "the lot, 0,5 mm"},
		{"1, 2, 3", "1, 2, 3"},
		{"p < 0.0001; 95.5 %; 99.5%", "p < 0,0001; 95,5 %; 99,5%"},
		{"1.5e-07 and −1.2345e+15", "1,5e-07 and −1,2345e+15"},
		{"(0.5) = 0.5: 0.5? 0.5–0.7", "(0,5) = 0,5: 0,5? 0,5–0,7"},
		{"01.12.2026 09:12", "01.12.2026 09:12"},
		{"1.4.0, v1.4, go1.26", "1.4.0, v1.4, go1.26"},
		{"wall-1.5.csv, 1.5.csv, a/1.5/b, D17.5, HS-4.0", "wall-1.5.csv, 1.5.csv, a/1.5/b, D17.5, HS-4.0"},
		{"21 CFR 11.50 and 21 CFR 11.10(e)", "21 CFR 11.50 and 21 CFR 11.10(e)"},
		{"found “1.234”, want 1.5", "found “1.234”, want 1,5"},
		{`found "0.5 mm" in D2, taken as 0.5`, `found "0.5 mm" in D2, taken as 0,5`},
		{"Slot 3.2 is 3.2 wide, Slot 3.25 too", "Slot 3.2 is 3,2 wide, Slot 3,25 too"},
		{"2.5 of Rev 1.4, 1.4", "2.5 of Rev 1.4; 1,4"},
		{"0,5 stays 0,5", "0,5 stays 0,5"},
	} {
		if got := desk.Comma.Shown(x.text, kept); got != x.want {
			t.Errorf("%s: got %s, want %s", x.text, got, x.want)
		}
		if got := desk.Comma.Shown(x.want, kept); got != x.want {
			t.Errorf("%s, shown twice: got %s", x.want, got)
		}
		if got := desk.Point.Shown(x.text, kept); got != x.text {
			t.Errorf("%s: got %s with a point, want it as it is", x.text, got)
		}
	}
	if got := desk.KeptOf([]string{"Bore", "Slot 3.2", "Slot 3.2", ""}); !slices.Equal(got, []string{"Slot 3.2"}) {
		t.Errorf("kept: got %q", got)
	}
	if _, err := desk.ParseDecimal("dot"); err == nil {
		t.Error("mark dot: got none, want an error")
	}
}
