package app

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/importers"
	"lotpair/qa"
)

// decided is a window with a comparison that was drafted, sealed and decided in it.
func decided(t *testing.T, folder string) *window {
	t.Helper()
	w := openedWith(t, inRegister(t, folder), "", 1280, 800)
	w.beginComparison()
	w.open(sheetFile(t), readFile)
	w.takeHeadings()
	w.chooseKind(desk.InTheUnit)
	typing(w, "margin", "0.02")
	p := w.state.Record.Plan
	p.Title, p.Supports, p.Record.Part, p.Record.Revision = "Hub shell", "DEV-1", "HS-40", "C"
	w.keepParticulars(p)
	w.sealDraft()
	noProblem(t, w)
	w.takeKept()
	noProblem(t, w)
	return w
}

// TestTheNextLotFromAnOldPlan signs a comparison, opens its workbook, begins the next from it, and supersedes the old one.
func TestTheNextLotFromAnOldPlan(t *testing.T) {
	folder, dir := t.TempDir(), t.TempDir()
	w := decided(t, folder)
	file, passphrase := key(t)
	old := filepath.Join(dir, "old.xlsx")
	w.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", to: old})
	noProblem(t, w)
	seal := w.state.Record.Result.Seal
	w.open(old, readFile)
	noProblem(t, w)
	if !w.state.Closed() {
		t.Fatal("the workbook: got it open to changes")
	}
	w.beginFromThis()
	noProblem(t, w)
	p := w.state.Record.Plan
	if !w.state.Drafting || p.Reference.File != "" || p.Candidate.Lot != "" || len(p.Reading.Exclude) != 0 || p.Reference.Lot != "R-118" || p.Reading.Layout != importers.RowPerPart {
		t.Errorf("next: got %+v, want the plan without its files and its candidate", p)
	}
	if got := w.state.Record.Result.Seal; got != seal {
		t.Errorf("seal: got %+v, want it carried over as %+v", got, seal)
	}
	shotOf(t, "next-lot", w.win.Canvas().Capture())
	// A killed program goes on here.
	w = openedWith(t, inRegister(t, folder), "", 1280, 800)
	w.begin("", "", nil)
	if !w.state.Drafting || !w.state.Sealed() {
		t.Error("opened again: got it otherwise")
	}
	// The next file has another heading: what no longer fits is named, and the rest is read.
	next := filepath.Join(dir, "next.csv")
	text := "Lot,Part,Bore diameter [mm],Wall [mm]\n"
	for i := range 24 {
		text += []string{"R-118", "C-023"}[i/12] + "," + qa.Plain(float64(i%12+1)) + ",40.00" + qa.Plain(float64(i%7)) + ",4.0" + qa.Plain(float64(10+i%9)) + "\n"
	}
	if err := os.WriteFile(next, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	w.open(next, readFile)
	noProblem(t, w)
	if got := w.sheetSaid.Unfit; !strings.Contains(got, "Wall thickness") {
		t.Errorf("unfit: got %q, want the heading that is missing", got)
	}
	shotOf(t, "next-unfit", w.win.Canvas().Capture())
	w.act.leaveSheet.act()
	// The same file again fits: the readings of another candidate are taken under the old seal.
	w.open(sheetFile(t), readFile)
	noProblem(t, w)
	if w.sheetSaid.Unfit != "" || w.state.Sheet.Masked {
		t.Errorf("the same layout: got unfit %q, masked %v", w.sheetSaid.Unfit, w.state.Sheet.Masked)
	}
	w.takeReadings()
	noProblem(t, w)
	if !w.state.Compared || w.state.Record.Result.Seal.Time != seal.Time {
		t.Errorf("compared: got %v with the seal %+v", w.state.Compared, w.state.Record.Result.Seal)
	}
	w.supersede(old, "the wrong drawing")
	noProblem(t, w)
	if got := w.state.Record.Supersedes; len(got) != 1 || got[0].Reason != "the wrong drawing" || w.state.Record.Result.Attempts.Known < 2 {
		t.Errorf("supersedes: got %+v, attempts %+v", got, w.state.Record.Result.Attempts)
	}
	w.undo()
	if len(w.state.Record.Supersedes) != 0 {
		t.Error("undo: got the superseding still there")
	}
	w.redo()
	id := w.entry.ID
	w = openedWith(t, inRegister(t, folder), "", 1280, 800)
	w.reopen(id)
	noProblem(t, w)
	if len(w.state.Record.Supersedes) != 1 {
		t.Error("opened again: got the superseding lost")
	}
	out := filepath.Join(dir, "new.xlsx")
	w.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", to: out})
	noProblem(t, w)
	data, err := os.ReadFile(out)
	if err != nil {
		t.Fatal(err)
	}
	v := exports.Verify(data, nil)
	if v.State != exports.Intact || v.Record.Supersedes[0].File.Name != "old.xlsx" {
		t.Errorf("verified: got %s, %+v, %+v", v.State, v.Reasons, v.Record.Supersedes)
	}
	if got := strings.Join(w.state.Signatures(), "\n"); !strings.Contains(got, "Supersedes record") {
		t.Errorf("signatures: got %q, want the superseded record named", got)
	}
}

// TestPlanAndSealAreSavedAndOpened saves a plan and a seal, and begins from each again.
func TestPlanAndSealAreSavedAndOpened(t *testing.T) {
	dir := t.TempDir()
	w := openedWith(t, inRegister(t, t.TempDir()), "", 1280, 800)
	w.beginComparison()
	w.open(sheetFile(t), readFile)
	w.takeHeadings()
	w.chooseKind(desk.KeepsPpk)
	typing(w, "standard deviation", "0.004")
	noProblem(t, w)
	plan := w.state.Record.Plan
	w.savePlan(filepath.Join(dir, "hub.toml"))
	noProblem(t, w)
	data, err := os.ReadFile(filepath.Join(dir, "hub.toml"))
	if err != nil {
		t.Fatal(err)
	}
	read, err := importers.LoadPlan("hub.toml", data)
	if err != nil || !same(read, desk.Settled(plan)) {
		t.Errorf("plan: got %+v, %v, want %+v", read, err, plan)
	}
	// A plan without files begins a comparison.
	plan.Reference.File, plan.Candidate.File = "", ""
	if err := os.WriteFile(filepath.Join(dir, "open.toml"), []byte(importers.PlanText(plan)), 0o600); err != nil {
		t.Fatal(err)
	}
	w.open(filepath.Join(dir, "open.toml"), readFile)
	noProblem(t, w)
	if !w.state.Drafting || len(w.state.Record.Plan.Characteristics) != 6 || w.state.Record.PlanFile.SHA256 == "" {
		t.Errorf("by plan: got drafting %v, %+v", w.state.Drafting, w.state.Record.Plan)
	}
	w.chooseKind(desk.InTheUnit)
	typing(w, "margin", "0.05")
	w.sealDraft()
	noProblem(t, w)
	seal := w.state.Record.Result.Seal
	sealed, err := w.sealed()
	if err != nil {
		t.Fatal(err)
	}
	to := filepath.Join(dir, "hub.seal.xlsx")
	w.saveBytes("Seal", to, sealed.Workbook)
	noProblem(t, w)
	w.open(to, readFile)
	noProblem(t, w)
	if got := w.state.Record.Result.Seal; got != seal || !w.state.Drafting || w.state.Record.Trail[0].What != "sealed the criterion" {
		t.Errorf("by seal: got %+v, %+v, want %+v", got, w.state.Record.Trail, seal)
	}
	w.open(sheetFile(t), readFile)
	w.takeReadings()
	noProblem(t, w)
	if !w.state.Compared || w.view.header.Note != "before the readings were opened" {
		t.Errorf("compared by seal: got %v, %q", w.state.Compared, w.view.header.Note)
	}
	if v := w.state.Record.Trail.Broken(); v >= 0 {
		t.Errorf("trail: broken at %d", v)
	}
}
