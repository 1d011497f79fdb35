package app

import (
	"os"
	"runtime"
	"strings"

	"fyne.io/fyne/v2/lang"

	"lotpair/app/desk"
)

// systemDecimal is the decimal mark of the system: on Unix of LC_ALL, LC_NUMERIC or LANG, the first that says anything (POSIX
// 2017, 8.2); on Windows and macOS, where none of them does, of the region the user has set. A mark that a user of Windows or
// macOS set apart from the region is not seen: --decimal says it.
func systemDecimal() desk.Decimal {
	for _, name := range []string{"LC_ALL", "LC_NUMERIC", "LANG"} {
		if v := os.Getenv(name); v != "" {
			return decimalOf(v)
		}
	}
	if regional() {
		return decimalOf(string(lang.SystemLocale()))
	}
	return desk.Point
}

// regional says whether the system has a region of its own beside the environment.
func regional() bool { return runtime.GOOS == "windows" || runtime.GOOS == "darwin" }

// The languages whose locales have a decimal comma, and the regions in which theirs or another's differ: decimal_point of all
// locales of the GNU C library 2.36; "no" is another name of "nb".
const (
	commaLanguages = " ab agr an ast ayc az be bg br bs ca ce crh cs csb cv da de dsb el es et eu ff fi fo fr fur fy gl hr hsb ht hu ia id is it ka kab kk kl ku ky lb li lij ln lt lv mg mhr mk mn nb nds nl nn no oc os pap pl pt quz ro ru rw sah sc se sgs sk sl sq sr sv szl tg tr tt uk vi wa wo "
	pointRegions   = " az_IR de_CH de_LI es_DO es_GT es_HN es_MX es_NI es_PA es_PR es_SV es_US fr_CH it_CH "
	commaRegions   = " en_DK "
)

// decimalOf is the decimal mark of a locale such as de_AT.UTF-8@euro, de-AT or C.
func decimalOf(locale string) desk.Decimal {
	locale, _, _ = strings.Cut(locale, "@")
	locale, _, _ = strings.Cut(locale, ".")
	parts := strings.Split(strings.ReplaceAll(locale, "-", "_"), "_")
	language, region := strings.ToLower(parts[0]), ""
	for _, p := range parts[1:] {
		if len(p) == 2 { // not a script such as Latn
			region = strings.ToUpper(p)
		}
	}
	named := " " + language + "_" + region + " "
	if strings.Contains(commaRegions, named) || strings.Contains(commaLanguages, " "+language+" ") && !strings.Contains(pointRegions, named) {
		return desk.Comma
	}
	return desk.Point
}
