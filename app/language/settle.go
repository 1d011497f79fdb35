// Package language names a language for the toolkit where the system names none. It does so when it is initialized, because the
// toolkit looks for one then. It imports next to nothing, so that it comes first: of the packages whose imports are initialized, the
// one whose path sorts first is next (Go specification, package initialization), and the toolkit's imports are ready later.
package language

import (
	"os"
	"strings"
)

func init() { settle() }

// settle names a language where the system names none: the toolkit reads the "C" of "C.UTF-8" as the name of a language and tells
// the user that it is none. Letters and numbers stay as the system has them; where it has none, letters are those of UTF-8, without
// which a title that is not ASCII is lost.
func settle() {
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
