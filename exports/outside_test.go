//go:build outside

package exports_test

import (
	"bytes"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/qa"
)

// sample is a signed record and what it holds.
func sample(t *testing.T) ([]byte, qa.Record) {
	t.Helper()
	pkg := signed(t)
	rec, err := exports.ReadRecord(pkg)
	if err != nil {
		t.Fatal(err)
	}
	return pkg, rec
}

func command(t *testing.T, name string, args ...string) []byte {
	t.Helper()
	var errText bytes.Buffer
	c := exec.Command(name, args...)
	c.Stderr = &errText
	out, err := c.Output()
	if err != nil {
		t.Fatalf("%s %s: %v\n%s%s", name, strings.Join(args, " "), err, out, errText.Bytes())
	}
	return out
}

// TestOutsideSciPy has SciPy compute the figures again from the workbook alone.
func TestOutsideSciPy(t *testing.T) {
	pkg, _ := sample(t)
	file := filepath.Join(t.TempDir(), "record.xlsx")
	if err := os.WriteFile(file, pkg, 0o600); err != nil {
		t.Fatal(err)
	}
	t.Logf("%s", command(t, "/usr/bin/python3", "testdata/outside/recompute.py", file))
	readings := sheetFile(t, pkg, exports.SheetReadings)
	changed := rezip(t, pkg, func(name string, b []byte) []byte {
		if name == readings {
			return bytes.Replace(b, []byte("<v>9.9"), []byte("<v>9.8"), 1)
		}
		return b
	})
	if err := os.WriteFile(file, changed, 0o600); err != nil {
		t.Fatal(err)
	}
	if out, err := exec.Command("/usr/bin/python3", "testdata/outside/recompute.py", file).CombinedOutput(); err == nil {
		t.Errorf("a changed reading passed: %s", out)
	}
}

// TestOutsideLibreOfficeAndR has LibreOffice open the workbook and write its readings as text, and R test them.
func TestOutsideLibreOfficeAndR(t *testing.T) {
	pkg, rec := sample(t)
	dir := t.TempDir()
	file := filepath.Join(dir, "record.xlsx")
	if err := os.WriteFile(file, pkg, 0o600); err != nil {
		t.Fatal(err)
	}
	// The options of the text filter: comma, quote, UTF-8, from row 1, as stored and not as shown, fifth sheet.
	command(t, "soffice", "--headless", "-env:UserInstallation=file://"+filepath.Join(dir, "profile"),
		"--convert-to", "csv:Text - txt - csv (StarCalc):44,34,76,1,,0,false,false,false,false,false,5", "--outdir", dir, file)
	texts, err := filepath.Glob(filepath.Join(dir, "*Readings*.csv"))
	if err != nil || len(texts) != 1 {
		t.Fatalf("LibreOffice wrote %v, %v; want the sheet Readings as csv", texts, err)
	}
	out := command(t, "Rscript", "testdata/outside/recompute.R", texts[0])
	lines := strings.Split(strings.TrimSpace(string(out)), "\n")
	if len(lines) != len(rec.Result.Characteristics) {
		t.Fatalf("R printed %d characteristics, want %d:\n%s", len(lines), len(rec.Result.Characteristics), out)
	}
	for i, c := range rec.Result.Characteristics {
		f := strings.Split(lines[i], "\t")
		if f[0] != c.Name {
			t.Errorf("R's line %d: got %q, want %q", i+1, f[0], c.Name)
		}
		for j, want := range []*float64{c.Difference.Estimate, c.Difference.Lower, c.Difference.Upper, c.Equivalence.Lower, c.Equivalence.Upper, c.Difference.DF, c.Difference.PTwoSided} {
			got, err := strconv.ParseFloat(f[j+1], 64)
			// R prints 15 digits of readings that LibreOffice wrote with 15.
			if err != nil || math.Abs(got-*want) > 1e-10*math.Max(1, math.Abs(*want)) {
				t.Errorf("%s, figure %d: R gives %s, the record states %v", c.Name, j, f[j+1], *want)
			}
		}
	}
}

// TestOutsidePrint has LibreOffice print the workbook: every sheet on A4, none cut into more columns of pages than one.
func TestOutsidePrint(t *testing.T) {
	pkg, _ := sample(t)
	dir := t.TempDir()
	file := filepath.Join(dir, "record.xlsx")
	if err := os.WriteFile(file, pkg, 0o600); err != nil {
		t.Fatal(err)
	}
	command(t, "soffice", "--headless", "-env:UserInstallation=file://"+filepath.Join(dir, "profile"), "--convert-to", "pdf", "--outdir", dir, file)
	info := string(command(t, "pdfinfo", filepath.Join(dir, "record.pdf")))
	if !strings.Contains(info, "A4") && !strings.Contains(info, "595") {
		t.Errorf("page size: got %s, want A4", info)
	}
	for _, s := range []string{"Summary, page 1 of", "Results, page", "Findings, page", "Readings, page", "Ledger, page", "Workings, page", "Pictures, page", "Trail, page", "Method, page"} {
		if text := string(command(t, "pdftotext", filepath.Join(dir, "record.pdf"), "-")); !strings.Contains(text, s) {
			t.Errorf("print: got no page %q", s)
		}
	}
}
