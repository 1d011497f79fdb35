//go:build linux

package exports_test

import (
	"bytes"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strconv"
	"strings"
	"testing"
	"time"

	"lotpair/exports"
	"lotpair/exports/opcsign"
)

// The peaks of a record of a million readings are measured in processes of their own: the system counts what a process had at
// most, whatever the runtime makes of it. A child does one act on the files of a folder and prints how long the act itself took.
const peakAct, peakFolder = "LOTPAIR_TEST_PEAK", "LOTPAIR_TEST_FOLDER"

// peakActs are the acts, each with the one before it that its peak is held against: what lies in memory in any case.
var peakActs = []struct{ name, beside string }{
	{"hold the readings", ""},
	{"write", "hold the readings"},
	{"hold the draft and its signed copy", ""},
	{"sign", "hold the draft and its signed copy"},
	{"hold the record", ""},
	{"check the signatures", "hold the record"},
	{"read the record", ""},
	{"verify", "read the record"},
}

// BenchmarkPeak does each act once a round: seconds, MiB at most, and MiB beyond what it rests on.
func BenchmarkPeak(b *testing.B) {
	dir := b.TempDir()
	rec, id := made(b, 10, 50000), person(b, "Ada")
	draft, err := exports.Workbook(rec)
	if err != nil {
		b.Fatal(err)
	}
	pkg, err := exports.SignFirst(rec, id, opcsign.Statement{Meaning: "prepared", Time: when})
	if err != nil {
		b.Fatal(err)
	}
	for name, data := range map[string][]byte{"draft.xlsx": draft, "record.xlsx": pkg} {
		if err := os.WriteFile(filepath.Join(dir, name), data, 0o600); err != nil {
			b.Fatal(err)
		}
	}
	peaks := map[string]float64{}
	for _, act := range peakActs {
		b.Run(strings.ReplaceAll(act.name, " ", "-"), func(b *testing.B) {
			seconds, peak := 0.0, 0.0
			n := 0
			for b.Loop() {
				s, p := peakOf(b, act.name, dir)
				seconds, peak = seconds+s, max(peak, p)
				n++
			}
			peaks[act.name] = peak
			b.ReportMetric(seconds/float64(n), "s/act")
			b.ReportMetric(peak, "MiB-peak")
			if act.beside != "" {
				b.ReportMetric(peak-peaks[act.beside], "MiB-beyond")
			}
		})
	}
}

// peakOf runs one act in a process of its own.
func peakOf(b *testing.B, act, dir string) (seconds, peak float64) {
	b.Helper()
	c := exec.Command(os.Args[0], "-test.run=^TestPeakAct$", "-test.v")
	c.Env = append(os.Environ(), peakAct+"="+act, peakFolder+"="+dir)
	out, err := c.CombinedOutput()
	if err != nil {
		b.Fatalf("%s: %v\n%s", act, err, out)
	}
	_, after, _ := strings.Cut(string(out), "took ")
	text, _, _ := strings.Cut(after, " s")
	if seconds, err = strconv.ParseFloat(text, 64); err != nil {
		b.Fatalf("%s: %v\n%s", act, err, out)
	}
	if _, err := fmt.Sscanf(string(out[bytes.Index(out, []byte("VmHWM:"))+len("VmHWM:"):]), "%f kB", &peak); err != nil {
		b.Fatalf("%s: %v\n%s", act, err, out)
	}
	return seconds, peak / 1024
}

// TestPeakAct is the child of BenchmarkPeak; alone it does nothing.
func TestPeakAct(t *testing.T) {
	act, dir := os.Getenv(peakAct), os.Getenv(peakFolder)
	if act == "" {
		return
	}
	load := func(name string) []byte {
		b, err := os.ReadFile(filepath.Join(dir, name))
		if err != nil {
			t.Fatal(err)
		}
		return b
	}
	took := func(start time.Time, err error) {
		if err != nil {
			t.Fatal(err)
		}
		fmt.Printf("took %.4f s\n", time.Since(start).Seconds())
		// Not the count that a parent gets of its child: that one begins with what the parent held.
		status, err := os.ReadFile("/proc/self/status")
		if err != nil {
			t.Fatal(err)
		}
		fmt.Printf("%s\n", status)
	}
	switch act {
	case "hold the readings", "write":
		rec := made(t, 10, 50000)
		start := time.Now()
		var err error
		if act == "write" {
			_, err = exports.Workbook(rec)
		}
		took(start, err)
		runtime.KeepAlive(rec)
	case "hold the draft and its signed copy":
		a, b := load("draft.xlsx"), load("record.xlsx")
		took(time.Now(), nil)
		runtime.KeepAlive(a)
		runtime.KeepAlive(b)
	case "sign":
		b := load("draft.xlsx")
		id := person(t, "Ada")
		start := time.Now()
		_, err := opcsign.Sign(b, id.Key, id.Chain, opcsign.Statement{Name: id.Name(), Meaning: "prepared", Time: when})
		took(start, err)
	case "hold the record":
		b := load("record.xlsx")
		took(time.Now(), nil)
		runtime.KeepAlive(b)
	case "check the signatures":
		b := load("record.xlsx")
		start := time.Now()
		r, err := opcsign.Verify(b, nil)
		if !r.Sound() {
			t.Fatal(r.Reasons)
		}
		took(start, err)
	case "read the record":
		b := load("record.xlsx")
		start := time.Now()
		_, err := exports.ReadRecord(b)
		took(start, err)
	case "verify":
		b := load("record.xlsx")
		start := time.Now()
		v := exports.Verify(b, nil)
		if v.State != exports.Intact {
			t.Fatal(v.State, v.Reasons)
		}
		took(start, nil)
	default:
		t.Fatalf("found the act %q, want one of BenchmarkPeak", act)
	}
}
