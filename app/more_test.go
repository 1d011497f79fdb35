package app

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/exports/identity"
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

// TestTrust trusts a signer, forgets them and trusts another.
func TestTrust(t *testing.T) {
	folder, dir := t.TempDir(), t.TempDir()
	w := decided(t, folder)
	file, passphrase := key(t)
	w.sign(signing{identity: file, passphrase: passphrase, meaning: "prepared", to: filepath.Join(dir, "r.xlsx")})
	noProblem(t, w)
	pem := func(file, passphrase, name string) string {
		id, err := openIdentity(file, passphrase)
		if err != nil {
			t.Fatal(err)
		}
		to := filepath.Join(dir, name)
		if err := os.WriteFile(to, id.PEM(), 0o600); err != nil {
			t.Fatal(err)
		}
		return to
	}
	header := func() string { return w.view.header.Right }
	if !strings.HasSuffix(header(), "who signed is not established") || w.view.header.Alarm {
		t.Errorf("without trust: got %q", header())
	}
	other, word := key(t)
	if err := w.trustToo(pem(other, word, "other.pem")); err != nil {
		t.Fatal(err)
	}
	if !strings.HasSuffix(header(), "a signer is NOT trusted here") || !w.view.header.Alarm {
		t.Errorf("another trusted: got %q", header())
	}
	if err := w.trustToo(pem(file, passphrase, "ada.pem")); err != nil {
		t.Fatal(err)
	}
	if !strings.HasSuffix(header(), "every signer is trusted here") || w.view.header.Alarm {
		t.Errorf("trusted: got %q", header())
	}
	if got := strings.Join(w.state.Signatures(), " "); !strings.Contains(got, "Trusted here.") || !strings.Contains(got, "agrees with the record") {
		t.Errorf("signatures: got %q", got)
	}
	w.showSignatures()
	shotOf(t, "signatures", w.win.Canvas().Capture())
	w.leaveDialog()
	note := filepath.Join(dir, "note.xlsx")
	w.saveNote(note)
	noProblem(t, w)
	if _, err := os.Stat(note); err != nil {
		t.Error(err)
	}
	w.saveSigners(filepath.Join(dir, "signers.pem"))
	data, err := os.ReadFile(filepath.Join(dir, "signers.pem"))
	if err != nil {
		t.Fatal(err)
	}
	if all, err := identity.ParsePEM(data); err != nil || len(all) != 1 {
		t.Errorf("certificates: got %d, %v", len(all), err)
	}
	id := w.entry.ID
	w = openedWith(t, inRegister(t, folder), "", 1280, 800)
	w.reopen(id)
	if len(w.trusted) != 2 || !strings.HasSuffix(header(), "every signer is trusted here") {
		t.Errorf("opened again: got %d trusted, %q", len(w.trusted), header())
	}
	w.showTrusted()
	shotOf(t, "trusted", w.win.Canvas().Capture())
	w.leaveDialog()
	for len(w.trusted) > 0 {
		if err := w.forget(w.trusted[0]); err != nil {
			t.Fatal(err)
		}
	}
	if !strings.HasSuffix(header(), "who signed is not established") {
		t.Errorf("forgotten: got %q", header())
	}
}

// TestInstallationIsChecked runs the installation check, which the next window remembers.
func TestInstallationIsChecked(t *testing.T) {
	folder := t.TempDir()
	w := openedWith(t, inRegister(t, folder), "", 1280, 800)
	if got := w.lastCheck(); got != "This installation was not checked yet." {
		t.Errorf("before: got %q", got)
	}
	w.qualify()
	noProblem(t, w)
	shotOf(t, "check", w.win.Canvas().Capture())
	if w.checked == nil || w.checked.Off != 0 || len(w.checked.Checks) < 20 || len(w.checked.Record) != 2 {
		t.Fatalf("check: got %+v", w.checked)
	}
	w.leaveDialog()
	w = openedWith(t, inRegister(t, folder), "", 1280, 800)
	if got := w.lastCheck(); !strings.Contains(got, "checks hold") {
		t.Errorf("after: got %q", got)
	}
	w.showAbout()
	shotOf(t, "about", w.win.Canvas().Capture())
	w.leaveDialog()
	w.showLicences()
	shotOf(t, "licences", w.win.Canvas().Capture())
}

// TestIdentityIsMadeAndShown makes an identity in the window and shows it, and those that signed a record.
func TestIdentityIsMadeAndShown(t *testing.T) {
	to := filepath.Join(t.TempDir(), "bo.p12")
	w := opened(t, "", 1280, 800)
	w.makeIdentity("Bo Example", "inspector", "Kettlewick (invented)", to, "a long passphrase")
	noProblem(t, w)
	all, err := identitiesOf(to, "a long passphrase")
	if err != nil || identityText(all[0])[:38] != "Bo Example, inspector, Kettlewick (inv" {
		t.Errorf("identity: got %v, %v", all, err)
	}
	if _, err := identitiesOf(to, "wrong"); err == nil {
		t.Error("a wrong passphrase: got no error")
	}
	w.makeIdentity("Bo Example", "", "", to, "x")
	if w.state.Problem.Text == "" {
		t.Error("the same file again: got it written over")
	}
}

// TestEveryFormOpensAndIsLeft opens every form and text of the window at both sizes, and leaves it by its keys.
func TestEveryFormOpensAndIsLeft(t *testing.T) {
	for _, size := range []fyne.Size{{Width: 1280, Height: 800}, {Width: 1024, Height: 700}} {
		folder := t.TempDir()
		d := openedWith(t, inRegister(t, folder), "", size.Width, size.Height)
		d.beginComparison()
		d.open(sheetFile(t), readFile)
		d.takeHeadings()
		w := openedWith(t, inRegister(t, t.TempDir()), demo(t), size.Width, size.Height)
		sealed := decided(t, t.TempDir())
		for name, x := range map[string]struct {
			w  *window
			do func()
		}{
			"terms": {d, d.askTerms}, "characteristic": {d, func() { d.askCharacteristic(1) }}, "particulars": {d, d.askParticulars}, "size": {d, d.askSize},
			"save-plan": {w, w.askSavePlan}, "supersede": {w, w.askSupersede}, "sign": {w, w.askSign}, "words": {w, w.showWords}, "keys": {w, w.showKeys},
			"trail": {w, w.showTrail}, "identity-new": {w, w.askNewIdentity}, "identity-show": {w, w.askShowIdentity}, "qualify": {w, w.askQualify},
			"trust": {w, w.showTrusted}, "about": {w, w.showAbout}, "licences": {w, w.showLicences}, "seal": {sealed, sealed.askSaveSeal}, "amend": {sealed, sealed.askAmend},
			"particulars-decided": {w, w.askParticulars},
		} {
			x.do()
			if x.w.dialog == nil {
				t.Errorf("%s: got no dialog", name)
				continue
			}
			shotOf(t, "form-"+name+"-"+qa.Plain(float64(size.Width)), x.w.win.Canvas().Capture())
			if top := x.w.win.Canvas().Overlays().Top(); top != nil {
				for _, o := range test.LaidOutObjects(top) {
					if b, ok := o.(*button); ok && b.label == "" {
						t.Errorf("%s: found a button without a name", name)
					}
				}
			}
			x.w.leaveDialog()
			if x.w.dialog != nil {
				t.Errorf("%s: it stays open", name)
			}
		}
		w.offerMore()
		shotOf(t, "more-"+qa.Plain(float64(size.Width)), w.win.Canvas().Capture())
	}
}

// TestKeysAreSeenInALongForm walks through a form that is longer than its place: what has the keys is in sight.
func TestKeysAreSeenInALongForm(t *testing.T) {
	w := openedWith(t, inRegister(t, t.TempDir()), "", 1024, 700)
	w.beginComparison()
	w.open(sheetFile(t), readFile)
	w.takeHeadings()
	w.askCharacteristic(0)
	focused := 0
	for range 40 {
		w.win.Canvas().(interface{ FocusNext() }).FocusNext()
		if f, ok := w.win.Canvas().Focused().(*field); ok && f.Text == "" {
			focused++
		}
	}
	if focused < 10 {
		t.Errorf("got the keys on %d lines, want all of the form", focused)
	}
	shotOf(t, "form-walked", w.win.Canvas().Capture())
	w.win.Canvas().Focused().TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
	if w.dialog != nil {
		t.Error("escape: it stays open")
	}
}

// TestCopies copies what the bench says, and all characteristics.
func TestCopies(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	w.copyBench()
	if got := w.app.Clipboard().Content(); !strings.HasPrefix(got, w.view.bench.Name+": ") || !strings.Contains(got, "\n") {
		t.Errorf("bench: got %q", got)
	}
	w.copyTable()
	lines := strings.Split(w.app.Clipboard().Content(), "\n")
	if len(lines) != 7 || strings.Count(lines[1], "\t") != 8 {
		t.Errorf("table: got %q", lines)
	}
}

// TestEverySentenceIsExplained clicks on each sentence and presses return on all of them.
func TestEverySentenceIsExplained(t *testing.T) {
	w := opened(t, demo(t), 1280, 800)
	y := float32(0)
	for i, g := range w.paragraphs(w.sentences.content.width) {
		w.sentences.content.Tapped(&fyne.PointEvent{Position: fyne.NewPos(60, y+g.above+2)})
		if w.dialog == nil {
			t.Errorf("sentence %d %q: got no help", i, g.lines)
		}
		if i == 1 {
			shotOf(t, "plain-words", w.win.Canvas().Capture())
		}
		w.leaveDialog()
		y += g.above + g.leading*float32(len(g.lines))
	}
	w.sentences.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyReturn})
	if w.dialog == nil {
		t.Error("return: got no help")
	}
	w.leaveDialog()
	for _, c := range []struct{ text, word string }{
		{"Ppk falls from 1.88 to 0.58; expected outside the limits: 4.0 %", "Pp, Ppk"},
		{"The difference is detectable: two-sided p < 0.0001, Welch, 66.4 degrees of freedom.", "degrees of freedom"},
		{"The interval crosses the margin.", "margin"},
	} {
		found := false
		for _, x := range desk.WordsIn(c.text) {
			found = found || x.Word == c.word
		}
		if !found {
			t.Errorf("%q: got no %q among %v", c.text, c.word, desk.WordsIn(c.text))
		}
	}
	if got := desk.WordsIn("The lots are mapped."); len(got) != 1 || got[0].Word != "lot" {
		t.Errorf("got %v, want the lot alone", got)
	}
}

// TestAveragedReadingIsLeftOut leaves out a reading that is the mean of repeats, finds it again after a kill, and puts it back.
func TestAveragedReadingIsLeftOut(t *testing.T) {
	folder, dir := t.TempDir(), t.TempDir()
	text := "Lot,Part,Bore [mm]\n"
	for i := range 24 {
		text += []string{"A", "B"}[i/12] + "," + qa.Plain(float64(i%12/2+1)) + ",40.0" + qa.Plain(float64(10+i*7%13)) + "\n"
	}
	file := filepath.Join(dir, "repeats.csv")
	if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	w := openedWith(t, inRegister(t, folder), file, 1280, 800)
	noProblem(t, w)
	w.states(w.state.Playing(2, importers.PlaysRepeated))
	noProblem(t, w)
	w.takeHeadings()
	w.chooseKind(desk.InTheUnit)
	typing(w, "margin", "0.05")
	w.sealDraft()
	w.takeKept()
	noProblem(t, w)
	leave := w.view.pages[qa.Candidate].Readings.At(2)
	if !strings.Contains(leave.Source.Cell, ", ") {
		t.Fatalf("reading: got %+v, want the mean of two cells", leave)
	}
	w.change("Leaving out", func(s desk.State) (desk.State, error) { return s.LeftOut(leave.Source, "burr", "tester", now()) })
	w.compare()
	noProblem(t, w)
	n := w.state.Record.Result.Characteristics[0].Candidate.N
	id := w.entry.ID
	w = openedWith(t, inRegister(t, folder), "", 1280, 800)
	w.reopen(id)
	noProblem(t, w)
	if got := w.state.Record.Result.Characteristics[0].Candidate; got.N != n || got.N != 5 {
		t.Errorf("opened again: got n %d, want %d", got.N, n)
	}
	w.change("Putting back", func(s desk.State) (desk.State, error) { return s.PutBack(leave.Source, "tester", now()) })
	w.compare()
	noProblem(t, w)
	if got := w.state.Record.Result.Characteristics[0].Candidate.N; got != 6 {
		t.Errorf("put back: got n %d, want 6", got)
	}
}

// TestUnreadCellIsLeftOut leaves out a cell that is no number, which until then leaves its characteristic undecided, and puts it back.
func TestUnreadCellIsLeftOut(t *testing.T) {
	dir := t.TempDir()
	text := "Lot,Part,Bore [mm]\n"
	for i := range 24 {
		text += []string{"A", "B"}[i/12] + "," + qa.Plain(float64(i+1)) + ",40.0" + qa.Plain(float64(10+i*7%13)) + "\n"
	}
	text = strings.Replace(text, "B,20,40.013", "B,20,4O.013", 1)
	file := filepath.Join(dir, "typed.csv")
	if err := os.WriteFile(file, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	w := openedWith(t, inRegister(t, t.TempDir()), file, 1280, 800)
	w.takeHeadings()
	w.chooseKind(desk.InTheUnit)
	typing(w, "margin", "0.05")
	w.sealDraft()
	w.takeKept()
	noProblem(t, w)
	if got := w.state.Record.Result.Verdict; got != qa.Undecided {
		t.Fatalf("verdict: got %s, want undecided while a cell is not read; %q", got, text)
	}
	at := w.view.pages[qa.Candidate].Readings.At(0)
	w.onReading(qa.Candidate, 0)
	shotOf(t, "unread", w.win.Canvas().Capture())
	if w.dialog == nil {
		t.Fatal("the cell: got no question")
	}
	w.leaveDialog()
	if _, err := w.state.WithoutUnread(at.Source, "  "); err == nil {
		t.Error("without a reason: got it left out")
	}
	p, err := w.state.WithoutUnread(at.Source, "typing error, sheet 3")
	if err != nil {
		t.Fatal(err)
	}
	w.reread("Leaving out", p, "left out", at.Source, "typing error, sheet 3")
	noProblem(t, w)
	w.compare()
	noProblem(t, w)
	if r := w.state.Record.Result; r.Verdict != qa.Equivalent || r.Characteristics[0].Candidate.Excluded != 1 {
		t.Errorf("left out: got %s, %+v", r.Verdict, r.Characteristics[0].Candidate)
	}
	if p, err = w.state.WithUnread(at.Source); err != nil {
		t.Fatal(err)
	}
	w.reread("Putting back", p, "put back", at.Source, "")
	w.compare()
	if got := w.state.Record.Result.Verdict; got != qa.Undecided {
		t.Errorf("put back: got %s", got)
	}
	w.undo()
	if len(w.state.Record.Plan.Reading.Exclude) != 1 {
		t.Error("undo: got the cell still put back")
	}
}

// TestColumnsFarToTheRight walks through a sheet of many columns by its buttons and by its keys.
func TestColumnsFarToTheRight(t *testing.T) {
	file := filepath.Join(t.TempDir(), "wide.csv")
	text := "Lot,Part"
	for c := range 200 {
		text += ",Hole " + string(rune('A'+c%26)) + qa.Plain(float64(c))
	}
	for r := range 12 {
		text += "\n" + []string{"A", "B"}[r/6] + "," + qa.Plain(float64(r%6+1))
		for c := range 200 {
			text += "," + qa.Plain(float64(10+(r*7+c)%9)+0.5)
		}
	}
	if err := os.WriteFile(file, []byte(text+"\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	for _, size := range []fyne.Size{{Width: 1280, Height: 800}, {Width: 1024, Height: 700}} {
		w := opened(t, file, size.Width, size.Height)
		noProblem(t, w)
		w.act.unmask.act()
		for _, more := w.sheetColumns(size.Width * 0.625); more > 0; _, more = w.sheetColumns(size.Width * 0.625) {
			before := w.sheetFrom
			w.act.columnsRight.act()
			if w.sheetFrom == before {
				t.Fatal("the button: got no further")
			}
		}
		columns, _ := w.sheetColumns(size.Width * 0.625)
		if last := columns[len(columns)-1].at; last != 201 {
			t.Errorf("last column: got %d, want 201", last)
		}
		shotOf(t, "wide-"+qa.Plain(float64(size.Width)), w.win.Canvas().Capture())
		for _, x := range crowded(w) {
			t.Errorf("at %v: %s", size.Width, x)
		}
		w.states(w.state.Playing(202, importers.PlaysNothing))
		noProblem(t, w)
		if got := w.sheetSaid.Columns[201].Plays; got != importers.PlaysNothing {
			t.Errorf("last column: got %s", got)
		}
		w.sheetRows.content.FocusGained()
		for range 250 {
			w.sheetRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyLeft})
		}
		w.sheetRows.content.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEnd})
		if w.sheetFrom != 0 || w.sheetCursor != 12 {
			t.Errorf("keys: got column %d, row %d", w.sheetFrom, w.sheetCursor)
		}
	}
}

// TestParticularsAfterTheComparison states them without another attempt, and not what would change the verdict.
func TestParticularsAfterTheComparison(t *testing.T) {
	w := openedWith(t, inRegister(t, t.TempDir()), demo(t), 1280, 800)
	before := w.state.Record.Result
	p := w.state.Record.Plan
	p.Record.Revision = "D"
	w.keepParticulars(p)
	noProblem(t, w)
	if r := w.state.Record; r.Plan.Record.Revision != "D" || r.Result.Attempts != before.Attempts || r.Result.Verdict != before.Verdict {
		t.Errorf("stated: got %+v", r.Plan.Record)
	}
	alpha := 0.2
	p.Criterion.Alpha = &alpha
	w.keepParticulars(p)
	if w.state.Problem.Text == "" {
		t.Error("another alpha: got it taken as a particular")
	}
	w.apply(desk.State.Read)
	w.undo()
	if w.state.Record.Plan.Record.Revision == "D" {
		t.Error("undo: got the revision still there")
	}
}
