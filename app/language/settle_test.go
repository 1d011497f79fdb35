package language

import (
	"os"
	"testing"
)

// TestTheToolkitIsToldALanguage holds what the toolkit reads of the system's locale.
func TestTheToolkitIsToldALanguage(t *testing.T) {
	for _, x := range []struct{ all, lang, wantAll, wantMessages, wantLetters string }{
		{"", "", "", "en", "C.UTF-8"},
		{"", "C", "", "en", "C.UTF-8"},
		{"", "POSIX", "", "en", "C.UTF-8"},
		{"C.UTF-8", "", "", "en", "C.UTF-8"},
		{"C", "de_DE.UTF-8", "", "en", "C.UTF-8"},
		{"", "de_DE.UTF-8", "", "", ""},
		{"en_US.UTF-8", "C", "en_US.UTF-8", "", ""},
	} {
		for name, value := range map[string]string{"LC_ALL": x.all, "LANG": x.lang, "LC_MESSAGES": "", "LC_CTYPE": "", "LC_NUMERIC": ""} {
			t.Setenv(name, value)
		}
		settle()
		if all, messages, letters := os.Getenv("LC_ALL"), os.Getenv("LC_MESSAGES"), os.Getenv("LC_CTYPE"); all != x.wantAll || messages != x.wantMessages || letters != x.wantLetters {
			t.Errorf("LC_ALL=%s LANG=%s: got %q, %q, %q, want %q, %q, %q", x.all, x.lang, all, messages, letters, x.wantAll, x.wantMessages, x.wantLetters)
		}
	}
}
