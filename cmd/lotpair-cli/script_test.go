package main

import (
	"bytes"
	"os"
	"path/filepath"
	"testing"
	"time"

	"github.com/rogpeppe/go-internal/testscript"
)

// TestMain lets the scripts run the real program under its own name.
func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"lotpair-cli": main})
}

// TestScript runs testdata/*.txtar: the real program on real files. The command tamper is this
// project's own, see tamper_test.go.
func TestScript(t *testing.T) {
	root, err := filepath.Abs("../../testdata")
	if err != nil {
		t.Fatal(err)
	}
	older, err := filepath.Abs("../../exports/testdata/older")
	if err != nil {
		t.Fatal(err)
	}
	testscript.Run(t, testscript.Params{
		Dir: "testdata",
		Setup: func(e *testscript.Env) error {
			e.Setenv("CASES_DIR", root)
			e.Setenv("OLDER_DIR", older)
			return nil
		},
		Cmds: map[string]func(*testscript.TestScript, bool, []string){"tamper": tamper},
	})
}

// fixedTime is when the runs of the tests in this package take place.
var fixedTime = time.Date(2026, 12, 1, 9, 30, 0, 0, time.FixedZone("CET", 3600))

// run runs the program in the test's own process.
func run(t *testing.T, dir string, args ...string) (code int, out, err string) {
	t.Helper()
	var o, e bytes.Buffer
	p := program{in: &bytes.Buffer{}, out: &o, err: &e, now: func() time.Time { return fixedTime }, workDir: dir, terminal: func(string) (string, error) { return "", os.ErrClosed }}
	return p.run(args), o.String(), e.String()
}
