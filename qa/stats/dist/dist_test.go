package dist

import (
	"bufio"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// functions holds each function under the name the tables use.
var functions = map[string]func(a []float64) float64{
	"StudentLower":    func(a []float64) float64 { return StudentLower(a[0], a[1]) },
	"StudentUpper":    func(a []float64) float64 { return StudentUpper(a[0], a[1]) },
	"StudentTwoSided": func(a []float64) float64 { return StudentTwoSided(a[0], a[1]) },
	"StudentQuantile": func(a []float64) float64 { return StudentQuantile(a[0], a[1]) },
	"FLower":          func(a []float64) float64 { return FLower(a[0], a[1], a[2]) },
	"FUpper":          func(a []float64) float64 { return FUpper(a[0], a[1], a[2]) },
	"FQuantile":       func(a []float64) float64 { return FQuantile(a[0], a[1], a[2]) },
	"NormalLower":     func(a []float64) float64 { return NormalLower(a[0]) },
	"NormalUpper":     func(a []float64) float64 { return NormalUpper(a[0]) },
	"NormalQuantile":  func(a []float64) float64 { return NormalQuantile(a[0]) },
}

// TestTables holds every function to values made outside: exact.txt by a
// 60-digit computation (refdata.py), r.txt by R (refdata.R).
func TestTables(t *testing.T) {
	for _, name := range []string{"exact.txt", "r.txt"} {
		t.Run(name, func(t *testing.T) { testTable(t, filepath.Join("testdata", name)) })
	}
}

func testTable(t *testing.T, path string) {
	file, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	worst := map[string]float64{}
	rows := 0
	lines := bufio.NewScanner(file)
	for lines.Scan() {
		line := lines.Text()
		if strings.HasPrefix(line, "#") {
			continue
		}
		fields := strings.Fields(line)
		number := make([]float64, len(fields))
		for i, f := range fields[1:] {
			if number[i+1], err = strconv.ParseFloat(f, 64); err != nil {
				t.Fatalf("%s: found %q, want a number: %v", path, f, err)
			}
		}
		args, want, allowed := number[1:len(fields)-2], number[len(fields)-2], number[len(fields)-1]
		got := functions[fields[0]](args)
		rel := math.Abs(got-want) / math.Abs(want)
		if want == got {
			rel = 0
		}
		if !(rel <= allowed) {
			t.Errorf("%s(%v): got %.17g, want %.17g, relative error %.2g, allowed %.2g", fields[0], args, got, want, rel, allowed)
		}
		worst[fields[0]] = max(worst[fields[0]], rel)
		rows++
	}
	if err := lines.Err(); err != nil {
		t.Fatal(err)
	}
	if rows < 200 {
		t.Errorf("%s: got %d rows, want at least 200", path, rows)
	}
	for name, rel := range worst {
		t.Logf("%s: largest relative error %.2g", name, rel)
	}
}
