package cells

import "testing"

func TestShownBy(t *testing.T) {
	for code, want := range map[string]Shown{
		"":                       {Places: -1},
		"0":                      {},
		"0.00":                   {Places: 2},
		"#,##0.0##":              {Places: 3},
		"#,##0":                  {},
		"0.00%":                  {Places: 2, Percent: true},
		`0.000" mm"`:             {Places: 3, Text: "mm"},
		`0.000\ \m\m`:            {Places: 3, Text: "mm"},
		"#,##0.00 [$€-407]":      {Places: 2, Currency: "€"},
		"[$-409]0.0":             {Places: 1},
		"$#,##0.00;($#,##0.000)": {Places: 2, Currency: "$"},
		"0.0 €":                  {Places: 1, Currency: "€"},
		"0.0,,":                  {Places: 1, Thousand: 2},
		"0.00E+00":               {Places: -1},
		"# ?/?":                  {Places: -1},
		`[Red]0.0;"x`:            {Places: 1},
		`"open`:                  {Places: -1, Text: "open"},
		"[open":                  {Places: -1},
	} {
		if got := ShownBy(code); got != want {
			t.Errorf("%q: got %+v, want %+v", code, got, want)
		}
	}
}
