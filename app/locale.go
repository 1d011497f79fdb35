package app

import (
	"os"
	"strings"
)

// settleLocale names a language for the toolkit where the system names none: it reads "C" as the name of a language and tells the
// user that it is none. Letters and numbers stay as the system has them; where it has none, letters are those of UTF-8, without
// which a title that is not ASCII is lost.
func settleLocale() {
	said := ""
	for _, name := range []string{"LC_ALL", "LC_MESSAGES", "LANG"} {
		if said = os.Getenv(name); said != "" {
			break
		}
	}
	language, letters, _ := strings.Cut(said, ".")
	if language != "" && language != "C" && language != "POSIX" {
		return
	}
	if all := os.Getenv("LC_ALL"); all != "" {
		_ = os.Unsetenv("LC_ALL") // it would win over what is set below
		_ = os.Setenv("LC_NUMERIC", all)
		_ = os.Setenv("LC_CTYPE", all)
	}
	if letters == "" {
		_ = os.Setenv("LC_CTYPE", "C.UTF-8")
	}
	_ = os.Setenv("LC_MESSAGES", "en")
}
