package main

import (
	"archive/zip"
	"bytes"
	"crypto/rand"
	"crypto/sha256"
	"io"
	"sync"
	"time"

	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// recordRows are what is done with a record's workbook. What it takes to write one beside the spreadsheet library alone, and
// formulas, are pairs of the package exports; what memory each act takes is BenchmarkPeak there.
var recordRows = []benchRow{
	{name: "Record, 6 characteristics x 2 x 40: written, signed, read, verified", build: func() work {
		rec, id := recordOf(6, 40), signerOf("Ada Quill")
		pkg := must(exports.SignFirst(rec, id, statementAt))
		return work{goal: goal{seconds: 0.08}, ours: func() { verified(must(exports.SignFirst(rec, id, statementAt))) }, floor: digests(pkg)}
	}},
	{name: "Record, 1,000,000 readings: signed", build: func() work {
		draft, id := must(exports.Workbook(million())), signerOf("Ada Quill")
		st := statementAt
		st.Name = id.Name()
		return work{goal: goal{seconds: 1.5, ofFloor: 3}, ours: func() { must(opcsign.Sign(draft, id.Key, id.Chain, st)) }, floor: digests(draft)}
	}},
	{name: "Record, 1,000,000 readings: signatures checked", build: func() work {
		pkg := must(exports.SignFirst(million(), signerOf("Ada Quill"), statementAt))
		return work{goal: goal{seconds: 1.5, ofFloor: 3}, ours: func() {
			if r := must(opcsign.Verify(pkg, nil)); !r.Sound() {
				panic("bench: record: found it not sound")
			}
		}, floor: digests(pkg)}
	}},
	{name: "Record, 1,000,000 readings: checked, computed again, compared", build: func() work {
		pkg := must(exports.SignFirst(million(), signerOf("Ada Quill"), statementAt))
		return work{goal: goal{seconds: 7.5}, ours: func() { verified(pkg) }, floor: digests(pkg)}
	}},
}

var statementAt = opcsign.Statement{Meaning: "prepared", Time: time.Date(2026, 12, 1, 12, 0, 0, 0, time.UTC)}

// million is a record of ten characteristics with 50,000 readings a lot, made once.
var million = sync.OnceValue(func() qa.Record { return recordOf(10, 50000) })

func recordOf(k, n int) qa.Record {
	plan, readings := manyCharacteristics(k, n)
	plan.Title, plan.Supports, plan.Record = "Made up", "DEV-1", qa.Particulars{Part: "A", Revision: "B"}
	result := must(qa.Compare(plan, readings, qa.Run{Seal: qa.Seal{Digest: plan.SealDigest(), Readings: "unknown"}, Attempts: qa.Attempts{Known: 1, KeptBy: "not counted"}}))
	return qa.NewRecord(plan, qa.File{Name: "plan.toml"}, readings, result, "bench", statementAt.Time)
}

func signerOf(name string) identity.Identity {
	return must(identity.New(name, "", "", statementAt.Time.AddDate(-1, 0, 0), rand.Reader))
}

func verified(pkg []byte) {
	if v := exports.Verify(pkg, nil); v.State != exports.Intact {
		panic("bench: record: found it " + string(v.State))
	}
}

// digests unpacks every part of a package and takes its SHA-256.
func digests(pkg []byte) rival {
	return rival{"unpacking and SHA-256 of all parts", func() {
		z := must(zip.NewReader(bytes.NewReader(pkg), int64(len(pkg))))
		for _, f := range z.File {
			r := must(f.Open())
			h := sha256.New()
			must(io.Copy(h, r))
			must(0, r.Close())
		}
	}}
}
