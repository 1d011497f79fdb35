package app

import (
	"errors"
	"fmt"
	"os"
	"path"
	"path/filepath"
	"strings"
	"time"

	"fyne.io/fyne/v2"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/exports/opcsign"
	"lotpair/importers"
	"lotpair/qa"
)

// mostBytes is the largest file that is opened (contract: console, bounds).
const mostBytes = 256 << 20

// readFile reads a file of at most mostBytes.
func readFile(name string) ([]byte, error) {
	info, err := os.Stat(name)
	if err != nil {
		return nil, err
	}
	if info.Size() > mostBytes {
		return nil, fmt.Errorf("%s: found %d bytes, want at most %d; choose a smaller file", name, info.Size(), int64(mostBytes))
	}
	return os.ReadFile(name)
}

// askOpen asks for a file and opens it.
func (w *window) askOpen() {
	if w.state.Job.Name != "" || w.dialog != nil {
		return
	}
	side := w.sideOfKeys()
	w.chooseFile("Open a file", opening, func(name string) { w.bring(name, side, readFile) })
}

// askBring asks for a file of readings for the page of one lot.
func (w *window) askBring(side qa.Side) {
	if w.state.Job.Name != "" || w.dialog != nil {
		return
	}
	w.chooseFile("Readings of the "+string(side), opening[1:], func(name string) { w.bring(name, side, readFile) })
}

// opening are the endings of the files that can be opened.
var opening = []string{".toml", ".xlsx", ".xlsm", ".ods", ".csv", ".tsv", ".txt"}

// dropped opens a file that was dropped on the window, on the page below it.
func (w *window) dropped(at fyne.Position, files []fyne.URI) {
	switch {
	case w.busy() || len(files) == 0:
	case len(files) > 1:
		err := fmt.Errorf("found %d files, want one at a time; drop the reference's file on the left page and the candidate's on the right one", len(files))
		w.apply(failed("Dropping files", err))
	default:
		w.bring(files[0].Path(), w.sideAt(at), readFile)
	}
}

// sideOfKeys is the page that the keys are on; empty where they are elsewhere.
func (w *window) sideOfKeys() qa.Side {
	switch f := w.win.Canvas().Focused(); {
	case f == nil:
	case f == w.leftRows.content || f == w.act.bringLeft:
		return qa.Reference
	case f == w.rightRows.content || f == w.act.bringRight:
		return qa.Candidate
	default:
		for _, side := range []qa.Side{qa.Reference, qa.Candidate} {
			for _, name := range []string{" lot", " source"} {
				if l := w.draft[string(side)+name].line; l != nil && f == l {
					return side
				}
			}
		}
	}
	return ""
}

// sideAt is the page at a place of the window; empty where there is none.
func (w *window) sideAt(at fyne.Position) qa.Side {
	page := pageWidth(w.win.Canvas().Size().Width)
	switch {
	case !w.state.Open:
		return ""
	case at.X < page:
		return qa.Reference
	case at.X > w.win.Canvas().Size().Width-page:
		return qa.Candidate
	}
	return ""
}

// open opens a plan, a workbook or a file of readings, whichever it is.
func (w *window) open(name string, read func(string) ([]byte, error)) { w.bring(name, "", read) }

// bring opens a file on the page of one lot.
func (w *window) bring(name string, side qa.Side, read func(string) ([]byte, error)) {
	place, masked, by := "Opening "+filepath.Base(name), !w.state.Sealed(), w.readBy()
	w.opens(name)
	w.work(place, func(watch qa.Watch) change {
		read := w.keeping(read)
		data, err := read(name)
		if err != nil {
			return failed(place, err)
		}
		switch strings.ToLower(filepath.Ext(name)) {
		case ".toml":
		case ".xlsx":
			if _, err := exports.ReadRecord(data); !errors.Is(err, exports.ErrNoRecord) || opcsign.HasSignature(data) {
				return w.openWorkbook(place, name, data)
			}
			return w.lookInto(watch, name, data, side, masked, by)
		default:
			return w.lookInto(watch, name, data, side, masked, by)
		}
		if c := beginByPlan(name, data); c != nil {
			return c
		}
		rec, err := w.compareByPlan(watch, name, data, read)
		if err != nil {
			return failed(place, err)
		}
		if c := w.sameAgain(watch, place, origin(rec.PlanFile, rec.Readings)); c != nil {
			return c
		}
		return func(s desk.State) desk.State { return s.Opened(name, rec) }
	})
}

// beginByPlan begins a comparison by a plan that names no files yet; nil where it names them, or is faulty besides.
func beginByPlan(name string, data []byte) change {
	plan, err := importers.LoadDraft(filepath.Base(name), data)
	if err != nil || plan.Reference.File != "" && plan.Candidate.File != "" {
		return nil
	}
	file := qa.FileOf(filepath.Base(name), data)
	return func(s desk.State) desk.State { return s.BegunBy(name, plan, file, person(), now()) }
}

// openWorkbook verifies a workbook and takes the record that is in it.
func (w *window) openWorkbook(place, name string, data []byte) change {
	v := exports.Verify(data, w.trusted)
	switch {
	case v.Sealed != nil:
		return openSeal(place, name, data, v)
	case v.Record == nil:
		return failed(place, errors.New(strings.Join(workbookOf(name, v).Reasons, "\n")))
	}
	rec, book := *v.Record, w.workbookOf(name, v)
	book.SHA256 = qa.FileOf(name, data).SHA256
	return func(s desk.State) desk.State { return s.OpenedWorkbook(rec, book) }
}

// sameAgain opens the record that was made of the same plan and the same files before, where that one is still open to
// changes: it goes on where it was left. It is nil where there is none.
func (w *window) sameAgain(watch qa.Watch, place, of string) change {
	if w.register == nil {
		return nil
	}
	e, ok, err := w.register.From(of)
	if err != nil {
		return failed(place, err)
	}
	if !ok {
		return nil
	}
	e, next, view, err := w.again(watch, e.ID)
	if err != nil || next.Closed() {
		return nil // it is made anew
	}
	return func(s desk.State) desk.State {
		w.entry = e
		if err := w.register.At(e.ID); err != nil {
			return s.Failed(place, err)
		}
		return s.Reopened(next, view)
	}
}

// workbookOf is what verification found with the certificates that are trusted here.
func (w *window) workbookOf(name string, v exports.Verification) desk.Workbook {
	out := workbookOf(name, v)
	out.Judged = len(w.trusted) > 0
	return out
}

// workbookOf is what verification found, as the desk keeps it.
func workbookOf(name string, v exports.Verification) desk.Workbook {
	out := desk.Workbook{Path: name, State: string(v.State), Missing: v.MissingMeanings, Trusted: v.AllTrusted(), Differences: v.Differences, Otherwise: v.ComputedOtherwise()}
	if v.Record != nil {
		out.Agreement = v.Agreement()
		for i := len(v.Record.Supersedes) - 1; i >= 0; i-- {
			out.Supersedes = append(out.Supersedes, exports.SupersedesText(v.Record.Supersedes[i]))
		}
	}
	for _, s := range v.Signatures {
		out.Signatures = append(out.Signatures, desk.Signature{
			Signer: s.Signer, Title: s.Title, Organization: s.Organization, Meaning: s.Meaning, Reason: s.Reason,
			Disposition: s.Disposition, Time: s.Time, Valid: s.Valid, CoversAll: s.CoversAll, Fingerprint: s.Fingerprint, Trusted: s.Trusted, Doubt: s.Doubt,
		})
	}
	for _, r := range v.Reasons {
		out.Reasons = append(out.Reasons, r.Error())
	}
	return out
}

// compareByPlan goes the whole way from a plan file to the record.
func (w *window) compareByPlan(watch qa.Watch, name string, data []byte, read func(string) ([]byte, error)) (qa.Record, error) {
	plan, err := importers.LoadPlan(filepath.Base(name), data)
	if err != nil {
		return qa.Record{}, err
	}
	if faults := plan.Validate(); len(faults) > 0 {
		var lines []string
		for _, f := range faults {
			lines = append(lines, f.Error())
		}
		return qa.Record{}, errors.New(strings.Join(lines, "\n"))
	}
	readings, err := importers.Under(watch).Read(plan, func(file string) ([]byte, error) {
		if !filepath.IsAbs(file) {
			file = beside(name, file)
		}
		return read(file)
	})
	if err != nil {
		return qa.Record{}, err
	}
	attempts, err := w.attempts(plan, nil)
	if err != nil {
		return qa.Record{}, err
	}
	result, err := qa.Compare(plan, readings, qa.Run{
		Software: w.build.software(),
		Seal:     qa.Seal{Digest: plan.SealDigest(), Readings: "unknown"},
		Attempts: attempts,
		Watch:    watch,
	})
	if err != nil {
		return qa.Record{}, err
	}
	return qa.NewRecord(plan, qa.FileOf(filepath.Base(name), data), readings, result, person(), now()), nil
}

// attempts counts the run that is about to be made with those that the register knows of,
// and those of the records that this one supersedes.
func (w *window) attempts(p qa.Plan, earlier []qa.Superseded) (qa.Attempts, error) {
	out := qa.Attempts{Known: 1, KeptBy: "not counted"}
	if w.register != nil {
		n, err := w.register.Attempts(attempt(p))
		if err != nil {
			return out, err
		}
		out = qa.Attempts{Known: n + 1, KeptBy: "register of this machine"}
	}
	if n := len(earlier) + 1; n > out.Known {
		out = qa.Attempts{Known: n, KeptBy: "the records that this one supersedes"}
	}
	return out, nil
}

// beside is a file in the folder of another.
func beside(name, file string) string {
	if strings.HasPrefix(name, "example/") { // the sample's names are the program's own, not the system's
		return path.Join(path.Dir(name), file)
	}
	return filepath.Join(filepath.Dir(name), filepath.FromSlash(file))
}

func absolute(name string) string {
	if a, err := filepath.Abs(name); err == nil {
		return a
	}
	return name
}

// now is the time of an act, in whole seconds with its offset.
func now() time.Time { return time.Now().Truncate(time.Second) }
