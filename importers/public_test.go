package importers

import (
	"bufio"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"lotpair/qa"
)

// publicFiles are data sets that come with R, written by R, openpyxl and LibreOffice (testdata/public), and how a plan reads them.
var publicFiles = []struct {
	file, expected  string // the file whose line of expected.txt holds
	ref, cand       string
	lotColumn, name string
	decimal         string
}{
	{"sleep.csv", "sleep.csv", "1", "2", "group", "extra", ""},
	{"sleep.xlsx", "sleep.csv", "1", "2", "group", "extra", ""},
	{"sleep-libreoffice.xlsx", "sleep.csv", "1", "2", "group", "extra", ""},
	{"sleep-openxlsx.xlsx", "sleep.csv", "1", "2", "group", "extra", ""},
	{"sleep.ods", "sleep.csv", "1", "2", "group", "extra", ""},
	{"toothgrowth.csv", "toothgrowth.csv", "OJ", "VC", "supp", "len", ","},
	{"toothgrowth.csv", "toothgrowth.csv", "OJ", "VC", "supp", "len", ""},
	{"insectsprays.txt", "insectsprays.txt", "A", "F", "spray", "count", ""},
	{"chickwts.tsv", "chickwts.tsv", "soybean", "sunflower", "feed", "weight", ""},
	{"warpbreaks.txt", "warpbreaks.txt", "A", "B", "wool", "breaks", ""},
}

// publicExpected are the lines of expected.txt by file.
func publicExpected(t *testing.T) map[string][]float64 {
	t.Helper()
	f, err := os.Open(filepath.Join("testdata", "public", "expected.txt"))
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = f.Close() }()
	all := map[string][]float64{}
	for lines := bufio.NewScanner(f); lines.Scan(); {
		words := strings.Fields(lines.Text())
		if words[0] == "#" {
			continue
		}
		for _, w := range words[1:] {
			v, err := strconv.ParseFloat(w, 64)
			if err != nil {
				t.Fatal(err)
			}
			all[words[0]] = append(all[words[0]], v)
		}
	}
	return all
}

// Data that we did not write, read and compared: Welch's test as R has it.
func TestReadPublic(t *testing.T) {
	expected := publicExpected(t)
	for _, tt := range publicFiles {
		data, err := os.ReadFile(filepath.Join("testdata", "public", tt.file))
		if err != nil {
			t.Fatal(err)
		}
		p := plan(tt.file, func(p *qa.Plan) {
			p.Reference.Lot, p.Candidate.Lot = tt.ref, tt.cand
			p.Reading.LotColumn, p.Reading.Decimal = tt.lotColumn, tt.decimal
			p.Criterion = qa.Criterion{Objective: qa.Difference}
			p.Characteristics = []qa.Characteristic{{Name: tt.name}}
		})
		r, err := read(t, p, data)
		if err != nil {
			t.Errorf("%s: got %v", tt.file, err)
			continue
		}
		result, err := qa.Compare(p, r, qa.Run{})
		if err != nil {
			t.Fatal(err)
		}
		c, e := result.Characteristics[0], expected[tt.expected]
		got := []float64{
			float64(c.Reference.N), *c.Reference.Mean, *c.Reference.SD, float64(c.Candidate.N), *c.Candidate.Mean, *c.Candidate.SD,
			*c.Difference.T, *c.Difference.DF, *c.Difference.PTwoSided,
		}
		for i, v := range got {
			if math.Abs(v-e[i]) > 1e-12*math.Max(1, math.Abs(e[i])) {
				t.Errorf("%s: got %.15g as figure %d, want %.15g", tt.file, v, i+1, e[i])
			}
		}
	}
}

// NIST's Statistical Reference Datasets as NIST lays them out: certified mean and standard deviation of the one column
// (https://www.itl.nist.gov/div898/strd/univ/homepage.html; the files lie with qa/stats).
func TestReadStRD(t *testing.T) {
	for _, tt := range []struct {
		file     string
		header   int
		n        int
		mean, sd float64
		relative float64
	}{
		{"Lew.dat", 60, 200, -177.435000000000, 277.332168044316, 1e-14},
		{"Lottery.dat", 60, 218, 518.958715596330, 291.699727470969, 1e-14},
		{"Mavro.dat", 60, 50, 2.00185600000000, 0.000429123454003053, 1e-12},
		{"Michelso.dat", 60, 100, 299.852400000000, 0.0790105478190518, 1e-12},
		{"NumAcc1.dat", 60, 3, 10000002, 1, 1e-15},
		{"NumAcc2.dat", 60, 1001, 1.2, 0.1, 1e-13},
		{"NumAcc3.dat", 60, 1001, 1000000.2, 0.1, 1e-9},
		{"NumAcc4.dat", 60, 1001, 10000000.2, 0.1, 1e-7},
	} {
		data, err := os.ReadFile(filepath.Join("..", "qa", "stats", "testdata", "strd", tt.file))
		if err != nil {
			t.Fatal(err)
		}
		lines := strings.Split(strings.ReplaceAll(string(data), "\r\n", "\n"), "\n")
		for i, l := range lines {
			if strings.HasPrefix(l, "Data:") {
				tt.header = i + 1
			}
		}
		p := plan(tt.file, func(p *qa.Plan) {
			p.Candidate.File, p.Reading.HeaderRow = "other.csv", tt.header
			p.Characteristics = []qa.Characteristic{{Name: "y", Column: strings.Join(strings.Fields(lines[tt.header-1]), " ")}}
		})
		other := fmt.Sprintf("%s%s\n%s", strings.Repeat("x\n", tt.header-1), lines[tt.header-1], strings.Join(lines[tt.header+1:], "\n"))
		r, err := Read(p, files(map[string][]byte{tt.file: data, "other.csv": []byte(other)}))
		if err != nil {
			t.Errorf("%s: got %v", tt.file, err)
			continue
		}
		v := r.Reference.Series[0].Values()
		mean, sum := meanOf(v), 0.0
		for _, x := range v {
			sum += (x - mean) * (x - mean)
		}
		sd := math.Sqrt(sum / float64(len(v)-1))
		if len(v) != tt.n || math.Abs(mean-tt.mean) > 1e-14*math.Abs(tt.mean) || math.Abs(sd-tt.sd) > tt.relative*tt.sd || r.Reference.Series[0].Unread > 0 {
			t.Errorf("%s: got n = %d, mean %.15g, sd %.15g, %d unread, want %d, %.15g, %.15g, 0", tt.file, len(v), mean, sd, r.Reference.Series[0].Unread, tt.n, tt.mean, tt.sd)
		}
	}
}

// SiRstv: five instruments of five readings each in aligned columns. Certified mean squares of the analysis of variance:
// between 1.27865654000000E-02, within 1.08318280000000E-02.
func TestReadStRDAnova(t *testing.T) {
	data, err := os.ReadFile(filepath.Join("..", "qa", "stats", "testdata", "strd", "anova", "SiRstv.dat"))
	if err != nil {
		t.Fatal(err)
	}
	var all []float64
	means, within := []float64{}, 0.0
	for lot := 1; lot <= 5; lot++ {
		p := plan("SiRstv.dat", func(p *qa.Plan) {
			p.Reference.Lot, p.Candidate.Lot = strconv.Itoa(lot), strconv.Itoa(lot%5+1)
			p.Reading.LotColumn = "Instrument"
		})
		r := mustRead(t, p, data)
		v := r.Reference.Series[0].Values()
		if len(v) != 5 || r.Characteristics[0].Name != "Resistance" {
			t.Fatalf("instrument %d: got %d readings of %s, want 5 of Resistance", lot, len(v), r.Characteristics[0].Name)
		}
		m := meanOf(v)
		for _, x := range v {
			within += (x - m) * (x - m)
		}
		means, all = append(means, m), append(all, v...)
	}
	grand, between := meanOf(all), 0.0
	for _, m := range means {
		between += 5 * (m - grand) * (m - grand)
	}
	if b, w := between/4, within/20; math.Abs(b/1.27865654e-02-1) > 1e-9 || math.Abs(w/1.0831828e-02-1) > 1e-9 {
		t.Errorf("got the mean squares %.12g and %.12g, want 0.0127865654 and 0.010831828", b, w)
	}
}
