package exports_test

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"lotpair/exports"
	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

func olderFile(t testing.TB, name string) []byte {
	t.Helper()
	b, err := os.ReadFile(filepath.Join("testdata", "older", "1", name))
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func codes(v exports.Verification) []string {
	var out []string
	for _, r := range v.Reasons {
		out = append(out, r.Code)
	}
	return out
}

// TestOlder verifies records and a seal that an earlier version wrote: they stay what they were, and it is said what was held
// and what was not.
func TestOlder(t *testing.T) {
	for _, c := range []struct {
		name     string
		state    exports.State
		differs  bool // this version computes it otherwise; another later one may do so of the rest
		headline string
	}{
		{"small.xlsx", exports.Intact, false, "intact"},
		{"groups.xlsx", exports.Intact, true, "intact; this version computes another result; who signed is not established"},
		{"draft.xlsx", exports.Unsigned, true, "unsigned"},
		{"seal.xlsx", exports.Intact, false, "intact; who signed is not established"},
	} {
		pkg := olderFile(t, c.name)
		v := exports.Verify(pkg, nil)
		others := slices.DeleteFunc(codes(v), func(code string) bool { return code == "layout-version" || code == "calculation-version" })
		if v.State != c.state || !v.Agrees || v.Rebuilt || !strings.HasPrefix(v.Headline(), c.headline) {
			t.Errorf("%s: got %s (%s), rebuilt %v, %v; want %s (%s)", c.name, v.State, v.Headline(), v.Rebuilt, v.Differences, c.state, c.headline)
		}
		if len(others) > 0 || !hasCode(v, "layout-version") || c.differs && !hasCode(v, "calculation-version") {
			t.Errorf("%s: got the reasons %v, want layout-version, and calculation-version %v", c.name, codes(v), c.differs)
		}
		note, err := exports.Note(c.name, pkg, v, qa.Software{Version: "test"}, when)
		if err != nil {
			t.Fatal(err)
		}
		all := ""
		for _, s := range cellsOf(t, note, exports.SheetStatement) {
			all += s + "\n"
		}
		words := []string{"layout-version", "not compared"}
		if v.Record != nil { // the id is the one that the sheet prints, though this version writes the record with other fields
			printed, _, _ := strings.Cut(strings.TrimPrefix(summaryText(t, pkg)[strings.Index(summaryText(t, pkg), "Record "):], "Record "), ":")
			words = append(words, printed+", digest of its content")
		}
		for _, w := range words {
			if !strings.Contains(all, w) {
				t.Errorf("%s: found no %q in the note", c.name, w)
			}
		}
	}
}

// resign signs anew, as Ada did, what was changed before signing: the signature is right.
func resign(t testing.TB, k *kit, meaning string, g *qa.Signer) []byte {
	t.Helper()
	ada, err := identity.Open(olderFile(t, "ada.p12"), "a long enough passphrase")
	if err != nil {
		t.Fatal(err)
	}
	k.unsignAll()
	pkg, err := opcsign.Sign(k.bytes(), ada.Key, ada.Chain, opcsign.Statement{Name: ada.Name(), Title: ada.Title(), Organization: ada.Organization(), Meaning: meaning, Reason: g.Reason, Time: g.Time})
	if err != nil {
		t.Fatal(err)
	}
	return pkg
}

// TestOlderTamper changes one thing of an earlier record before it is signed: a figure, a reading, a verdict, a line.
func TestOlderTamper(t *testing.T) {
	pkg := olderFile(t, "small.xlsx")
	rec, err := exports.ReadRecord(pkg)
	if err != nil {
		t.Fatal(err)
	}
	part := func(name string) string { return sheetFile(t, pkg, name) }
	summary, results, readings, ledger := part(exports.SheetSummary), part(exports.SheetResults), part(exports.SheetReadings), part(exports.SheetLedger)
	findings, trail, method := part(exports.SheetFindings), part(exports.SheetTrail), part(exports.SheetMethod)
	for _, c := range []struct {
		name string
		edit func(*kit)
		want string // of a difference; empty where nothing that is held was changed
	}{
		{"nothing", func(*kit) {}, ""},
		{"words of a method", swap(method, "Method", "Methods"), ""},
		{"width of a column", match(summary, `width="23"`, `width="24"`), ""},
		{"a figure", match(results, `<v>0\.00(\d)`, "<v>0.01$1"), "Results!"},
		{"a verdict among the results", swap(results, ">undecided<", ">equivalent<"), "Results!"},
		{"the overall verdict", swap(results, "Overall: undecided.", "Overall: equivalent."), "Overall"},
		{"a heading", swap(results, ">equivalence.p<", ">equivalence.q<"), "equivalence.p"},
		{"a figure more", swap(results, "</row></sheetData>", `<c r="ZZ7"><v>1</v></c></row></sheetData>`), "Results"},
		{"a reading", match(readings, `<v>40\.00`, "<v>40.01"), "Readings!D"},
		{"the state of a reading", swap(readings, ">left out: dropped part, NCR-7<", ">used<"), "Readings!J"},
		{"the lot of a reading", swap(readings, ">C-1<", ">C-2<"), "Readings!B"},
		{"a heading of the readings", swap(readings, ">Value left out<", ">Value<"), "Readings"},
		{"figures above the figures", match(results, `<row r="3"[^>]*>`, `$0<c r="C3"><v>1</v></c><c r="D3"><v>1</v></c>`), "Results: found a line in row 3"},
		{"joined cells", swap(readings, "</sheetData>", `</sheetData><mergeCells count="1"><mergeCell ref="C5:D5"/></mergeCells>`), "joined cells at C5"},
		{"a hidden line", match(readings, `<row r="7"`, `<row r="7" hidden="1"`), "hidden"},
		{"a line of the ledger", swap(ledger, ">n/a<", ">39.9<"), "Ledger!C"},
		{"cells of the account", match(ledger, `<v>(\d\d)</v>`, "<v>9$1</v>"), "Ledger!D"},
		{"a finding", match(findings, `Only (\d) readings`, "Only 3$1 readings"), "Findings!E"},
		{"an act", swap(trail, "opened the readings", "opened no readings"), "Trail!C"},
		{"the sentence", swap(summary, ">"+rec.Result.Sentence+"<", ">Equivalent.<"), "sentence"},
		{"a verdict of the summary", swap(summary, ">undecided<", ">equivalent<"), "the verdict"},
		{"an interval of the summary", match(summary, `(>[−-]?)0\.00(\d+ to )`, "${1}0.01$2"), "under Interval"},
		{"the number of readings", swap(summary, ">7 | 8<", ">8 | 8<"), "under Readings"},
		{"the id", match(summary, `>Record [0-9a-f]{12}:`, ">Record 000000000000:"), "id"},
		{"the signer", swap(summary, ">Ada Quill<", ">Eve Quill<"), "signer"},
		{"a formula", match(summary, `<c r="A1" s="(\d+)" t="inlineStr"><is><t>[^<]*</t></is></c>`, `<c r="A1" s="$1" t="str"><f>A2</f><v>x</v></c>`), "formula"},
		{"a number format", match("xl/styles.xml", `<xf numFmtId="0"`, `<xf numFmtId="1"`), "number format"},
		{"a sheet hidden", match("xl/workbook.xml", `<sheet name="Ledger"`, `<sheet name="Ledger" state="hidden"`), "hidden"},
		{"a sheet of another name", swap("xl/workbook.xml", `name="Ledger"`, `name="Ledgers"`), "Ledgers"},
		{"a result in the record", swap(item, "&#34;n&#34;:7", "&#34;n&#34;:8"), "Results!"},
	} {
		t.Run(c.name, func(t *testing.T) {
			k := takeApart(t, pkg)
			c.edit(k)
			v := exports.Verify(resign(t, k, "prepared", rec.Signer), nil)
			want := exports.Disagrees
			if c.want == "" {
				want = exports.Incomplete // Bert's signature is gone
			}
			if v.State != want || !hasCode(v, "layout-version") || !strings.Contains(strings.Join(v.Differences, "\n"), c.want) {
				t.Errorf("got %s, %v, %v; want %s, %q", v.State, codes(v), v.Differences, want, c.want)
			}
		})
	}
}

// TestOlderCalculation changes a figure of a record of an earlier calculation: that its sheets are held against its own result
// excuses no sheet that differs from it. A number of no calculation excuses nothing.
func TestOlderCalculation(t *testing.T) {
	pkg := olderFile(t, "groups.xlsx")
	rec, err := exports.ReadRecord(pkg)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name string
		edit func(*kit)
		want exports.State
		code string
	}{
		{"nothing", func(*kit) {}, exports.Intact, "calculation-version"},
		{"a figure", match(sheetFile(t, pkg, exports.SheetResults), `<v>0\.0(\d)`, "<v>0.1$1"), exports.Disagrees, "sheets-differ"},
		{"no calculation", match(item, `&#34;calculation&#34;:1`, "&#34;calculation&#34;:0"), exports.Disagrees, "recomputation"},
	} {
		k := takeApart(t, pkg)
		c.edit(k)
		if v := exports.Verify(resign(t, k, "prepared", rec.Signer), nil); v.State != c.want || !hasCode(v, c.code) {
			t.Errorf("%s: got %s, %v, %v; want %s, %s", c.name, v.State, codes(v), v.Differences, c.want, c.code)
		}
	}
}

// TestOlderSeal changes one thing of an earlier seal before it is signed.
func TestOlderSeal(t *testing.T) {
	pkg := olderFile(t, "seal.xlsx")
	s, err := exports.ReadSeal(pkg)
	if err != nil {
		t.Fatal(err)
	}
	const page = "xl/worksheets/sheet1.xml"
	for _, c := range []struct {
		name string
		edit func(*kit)
		want string
	}{
		{"nothing", func(*kit) {}, ""},
		{"what a key means", swap(page, ">what is to be shown<", ">what is shown<"), ""},
		{"the margin", swap(page, ">0.006<", ">0.06<"), "criterion.margin.absolute"},
		{"a key", swap(page, ">characteristic.upper<", ">characteristic.lower<"), "characteristic.upper"},
		{"the characteristic", swap(page, ">Run-out<", ">Run-in<"), "Run-out"},
		{"the digest", swap(page, s.Digest, strings.Repeat("0", 64)), "digest"},
		{"the time", swap(page, "sealed 2026", "sealed 2025"), "time"},
		{"the signer", swap(page, ">approved: Ada Quill<", ">approved: Eve Quill<"), "signer"},
	} {
		k := takeApart(t, pkg)
		c.edit(k)
		v, want := exports.Verify(resign(t, k, "approved", s.Signer), nil), exports.Disagrees
		if c.want == "" {
			want = exports.Intact
		}
		if v.State != want || !hasCode(v, "layout-version") || !strings.Contains(strings.Join(v.Differences, "\n"), c.want) {
			t.Errorf("%s: got %s, %v, %v; want %s, %q", c.name, v.State, codes(v), v.Differences, want, c.want)
		}
	}
}

// TestUnknownLayout claims a layout that no version known here has: nothing could be held, and the file is not called intact.
func TestUnknownLayout(t *testing.T) {
	for _, c := range []struct{ file, meaning, layout, want string }{
		{"small.xlsx", "prepared", "<layout>999</layout>", "a newer version"},
		{"small.xlsx", "prepared", "<layout>0</layout>", "no version"},
		{"small.xlsx", "prepared", "<layout>-1</layout>", "no version"},
		{"small.xlsx", "prepared", "", "no version"},
		{"seal.xlsx", "approved", "<layout>999</layout>", "a newer version"},
		{"seal.xlsx", "approved", "", "no version"},
	} {
		g := &qa.Signer{Time: when.AddDate(1, 0, 0)}
		k := takeApart(t, olderFile(t, c.file))
		k.match(item, `<layout>\d+</layout>`, c.layout)
		v := exports.Verify(resign(t, k, c.meaning, g), nil)
		if v.State != exports.Unreadable || !slices.Equal(codes(v), []string{"layout-unknown"}) || !strings.Contains(v.Reasons[0].Text, c.want) {
			t.Errorf("%s, %q: got %s, %v; want it unreadable, %s", c.file, c.layout, v.State, v.Reasons, c.want)
		}
	}
}

// TestSignOlder signs an earlier draft: where this version computes the same result it is written anew, else it is refused. A
// signed one takes a further signature as it is.
func TestSignOlder(t *testing.T) {
	bert := person(t, "Bert")
	st := opcsign.Statement{Meaning: "prepared", Time: when.AddDate(1, 0, 0)}
	if _, err := exports.Sign(olderFile(t, "draft.xlsx"), bert, st); err == nil || !strings.Contains(err.Error(), "this version computes otherwise") {
		t.Errorf("a draft that this version computes otherwise: got %v, want it refused", err)
	}
	rec := record(t)
	pkg, err := exports.Workbook(rec)
	if err != nil {
		t.Fatal(err)
	}
	k := takeApart(t, pkg)
	k.match(item, `<layout>\d+</layout>`, "<layout>1</layout>")
	if pkg, err = exports.Sign(k.bytes(), bert, st); err != nil {
		t.Fatalf("a draft of the layout before: got %v, want it signed", err)
	}
	if v := exports.Verify(pkg, nil); v.State != exports.Intact || !v.Rebuilt {
		t.Errorf("got %s, rebuilt %v, want it intact and of this layout", v.State, v.Rebuilt)
	}
	st.Meaning = "approved"
	if pkg, err = exports.Sign(olderFile(t, "small.xlsx"), bert, st); err != nil {
		t.Fatal(err)
	}
	if v := exports.Verify(pkg, nil); v.State != exports.Intact || len(v.Signatures) != 3 {
		t.Errorf("got %s, %d signatures, want it intact with three", v.State, len(v.Signatures))
	}
}
