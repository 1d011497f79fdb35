package app

import (
	"os"
	"os/exec"
	"strings"
	"testing"
)

// TestTheToolkitFindsALanguage starts the program anew, of which nothing is run: the toolkit says at once what it misses.
func TestTheToolkitFindsALanguage(t *testing.T) {
	for _, locale := range []string{"C", "C.UTF-8", "POSIX", "de_DE.UTF-8", ""} {
		c := exec.Command(os.Args[0], "-test.run=^$")
		c.Env = append(os.Environ(), "LC_ALL="+locale, "LC_MESSAGES=", "LANG=", "LANGUAGE=")
		if out, err := c.CombinedOutput(); err != nil || strings.Contains(string(out), "locale") {
			t.Errorf("LC_ALL=%s: got %v, %s", locale, err, out)
		}
	}
}
