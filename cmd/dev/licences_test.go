package main

import (
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestLicencesAreThoseOfWhatIsBuiltIn holds the file that the window shows against the modules of the programs.
func TestLicencesAreThoseOfWhatIsBuiltIn(t *testing.T) {
	root, err := moduleRoot()
	if err != nil {
		t.Fatal(err)
	}
	data, err := os.ReadFile(filepath.Join(root, licenceFile))
	if err != nil {
		t.Fatal(err)
	}
	list, texts, ok := strings.Cut(string(data), "\n\n")
	if !ok || strings.TrimSpace(texts) == "" {
		t.Fatalf("%s: found no texts below the list", licenceFile)
	}
	kept := map[string]bool{}
	for _, line := range strings.Split(list, "\n") {
		kept[line] = true
	}
	modules, err := (&dev{root: root, stdout: io.Discard, stderr: io.Discard}).builtIn()
	if err != nil {
		t.Fatal(err)
	}
	for _, m := range modules {
		if line := strings.TrimSpace(m[0] + " " + m[1]); !kept[line] {
			t.Errorf("%s: found no %q; run go run ./cmd/dev licences", licenceFile, line)
		}
		if !strings.Contains(texts, m[0]+" LICEN") && !strings.Contains(texts, m[0]+" licen") {
			t.Errorf("%s: found no licence of %s", licenceFile, m[0])
		}
	}
}
