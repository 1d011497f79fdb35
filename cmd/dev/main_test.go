package main

import (
	"bytes"
	"slices"
	"strings"
	"testing"
)

func TestStart(t *testing.T) {
	for _, c := range []struct {
		name string
		args []string
		code int
		says string // on either output
	}{
		{"no task", nil, 2, "check"},
		{"help", []string{"--help"}, 0, "demo"},
		{"unknown task", []string{"chekc"}, 2, `found task "chekc"`},
		{"argument that the task does not take", []string{"cases", "now"}, 2, `found "now", want no arguments`},
		{"wrong option of check", []string{"check", "--inside"}, 2, "want nothing or --outside"},
		{"release without a version", []string{"package"}, 2, "want a version"},
		{"release of a word", []string{"package", "latest"}, 2, "want a version"},
	} {
		t.Run(c.name, func(t *testing.T) {
			var out, messages bytes.Buffer
			if got := start(c.args, &out, &messages); got != c.code {
				t.Errorf("got exit code %d, want %d", got, c.code)
			}
			if all := out.String() + messages.String(); !strings.Contains(all, c.says) {
				t.Errorf("got %q, want it to say %q", all, c.says)
			}
		})
	}
}

// Each task prints the commands it runs, so that they can be typed by hand.
func TestShow(t *testing.T) {
	var out bytes.Buffer
	(&dev{stdout: &out}).show(pure, "go", "build", "-ldflags", "-s -w -X main.version=it's", "")
	if got, want := out.String(), "$ CGO_ENABLED=0 go build -ldflags '-s -w -X main.version=it'\\''s' ''\n"; got != want {
		t.Errorf("got %s, want %s", got, want)
	}
}

func TestMissing(t *testing.T) {
	yes, no := func() bool { return true }, func() bool { return false }
	got := missing([]need{{"a", yes}, {"b", no}}, []need{{"c", no}})
	if want := []string{"b", "c"}; !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
	var out bytes.Buffer
	if err := (&dev{stdout: &out}).install("nothing", []need{{"a", yes}}); err != nil {
		t.Errorf("got %v, want no error where nothing is missing", err)
	}
}

func TestVersionForm(t *testing.T) {
	for version, want := range map[string]bool{"1.0.0": true, "v0.2.10": true, "1.0.0-rc.1": true, "1.0": false, "": false, "1.0.0 x": false} {
		if got := versionForm.MatchString(version); got != want {
			t.Errorf("%q: got %v, want %v", version, got, want)
		}
	}
}
