package app

import (
	"testing"

	"lotpair/app/desk"
)

// TestTheDecimalMarkIsTheSystems holds what follows from the environment on Unix; the values are those of the GNU C library.
func TestTheDecimalMarkIsTheSystems(t *testing.T) {
	for _, x := range []struct {
		all, numeric, lang string
		want               desk.Decimal
	}{
		{"", "", "", desk.Point},
		{"", "", "C", desk.Point},
		{"", "", "C.UTF-8", desk.Point},
		{"", "", "POSIX", desk.Point},
		{"", "", "en_US.UTF-8", desk.Point},
		{"", "", "de_DE.UTF-8", desk.Comma},
		{"", "", "de_AT.UTF-8@euro", desk.Comma},
		{"", "", "de_CH.UTF-8", desk.Point},
		{"", "", "es_MX", desk.Point},
		{"", "", "es_ES", desk.Comma},
		{"", "", "sr_RS@latin", desk.Comma},
		{"", "", "sr-Latn-RS", desk.Comma},
		{"", "", "pt-BR", desk.Comma},
		{"", "", "ja_JP.UTF-8", desk.Point},
		{"", "", "en_DK", desk.Comma},
		{"", "", "nonsense", desk.Point},
		{"", "de_DE.UTF-8", "en_US.UTF-8", desk.Comma}, // independent of the language
		{"", "en_US.UTF-8", "de_DE.UTF-8", desk.Point},
		{"C", "de_DE.UTF-8", "de_DE.UTF-8", desk.Point},
		{"fr_FR.UTF-8", "C", "C", desk.Comma},
	} {
		for name, v := range map[string]string{"LC_ALL": x.all, "LC_NUMERIC": x.numeric, "LANG": x.lang} {
			t.Setenv(name, v)
		}
		if x.all+x.numeric+x.lang == "" && regional() {
			continue // nothing in the environment: the user's region there
		}
		if got := systemDecimal(); got != x.want {
			t.Errorf("LC_ALL=%s LC_NUMERIC=%s LANG=%s: got %v, want %v", x.all, x.numeric, x.lang, got, x.want)
		}
	}
}
