package main

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"lotpair/qa"
)

func text(t *testing.T, name string) string {
	t.Helper()
	b, err := os.ReadFile(filepath.Join(root, name))
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// The README says the cautions word for word as the record does, and names the two commands.
func TestReadme(t *testing.T) {
	readme := text(t, "README.md")
	for _, c := range qa.Cautions() {
		if !strings.Contains(readme, "\n- "+c+"\n") {
			t.Errorf("README.md: found no line %q, want every caution of the record", c)
		}
	}
	for _, command := range []string{"go run ./cmd/dev demo", "go run ./cmd/dev check"} {
		if !strings.Contains(readme, "```\n"+command+"\n```") {
			t.Errorf("README.md: found no block with %q alone, want it", command)
		}
	}
}

// DEVELOPERS.md has a line for every outside module that the policy allows.
func TestModulesExplained(t *testing.T) {
	developers := text(t, "DEVELOPERS.md")
	modules := slices.Clone(testTools)
	for _, r := range policy {
		modules = append(modules, r.outside...)
	}
	for _, m := range modules {
		m = strings.TrimSuffix(m, "/testscript")
		if !strings.Contains(developers, "| "+m) && !strings.Contains(developers, ", "+m) {
			t.Errorf("DEVELOPERS.md: found nothing on %s, want what it is for and what we would do without it", m)
		}
	}
}
