package app

import (
	"encoding/json"
	"errors"
	"fmt"
	"strings"

	"lotpair/app/desk"
	"lotpair/app/register"
	"lotpair/exports"
	"lotpair/importers"
	"lotpair/qa"
)

// kept is what an act came to, as the register keeps it: what cannot be found again from the kept files. Readings are read
// from them again and the result is computed again, so that a record that is opened again is one that was checked again.
type kept struct {
	Format   string       `json:"format"`
	Path     string       `json:"path"`
	Plan     *qa.Plan     `json:"plan,omitempty"`
	PlanFile qa.File      `json:"plan_file"`
	Files    []qa.File    `json:"files,omitempty"`
	Drafting bool         `json:"drafting,omitempty"`
	Seen     bool         `json:"seen,omitempty"`
	Trail    qa.Trail     `json:"trail,omitempty"`
	Compared bool         `json:"compared"`
	Seal     qa.Seal      `json:"seal"`
	Attempts qa.Attempts  `json:"attempts"`
	Workbook keptWorkbook `json:"workbook"`

	Supersedes []qa.Superseded `json:"supersedes,omitempty"`
}

// keptWorkbook is the file that holds the record; without a digest it was written and not signed.
type keptWorkbook struct {
	Path   string `json:"path,omitempty"`
	SHA256 string `json:"sha256,omitempty"`
	Opened bool   `json:"opened,omitempty"`
}

const keptFormat = "lotpair.kept/1"

func keptOf(s desk.State) kept {
	r := s.Record
	k := kept{
		Format: keptFormat, Path: s.Path, Plan: &r.Plan, PlanFile: r.PlanFile, Trail: r.Trail, Compared: s.Compared, Seal: r.Result.Seal, Attempts: r.Result.Attempts,
		Workbook:   keptWorkbook{Path: s.Workbook.Path, SHA256: s.Workbook.SHA256, Opened: s.Workbook.Opened},
		Supersedes: r.Supersedes,
	}
	k.Drafting, k.Seen = s.Drafting, s.Seen
	if s.Drafting {
		k.Files = s.Files
		return k
	}
	seen := map[string]bool{}
	for _, l := range []qa.Lot{r.Readings.Reference, r.Readings.Candidate} {
		for _, f := range l.Files {
			if !seen[f.Name] {
				k.Files, seen[f.Name] = append(k.Files, f), true
			}
		}
	}
	return k
}

// attempt says what was run, to count how often it was: the criterion and the lots it was held against.
func attempt(p qa.Plan) string {
	return strings.Join([]string{p.SealDigest(), p.Reference.Lot, p.Candidate.Lot}, "\n")
}

// origin says of what a comparison was made: the same plan on the same files is the same record.
func origin(plan qa.File, r qa.Readings) string {
	all := []string{"plan " + plan.SHA256}
	for _, l := range []qa.Lot{r.Reference, r.Candidate} {
		for _, f := range l.Files {
			all = append(all, f.SHA256)
		}
	}
	return strings.Join(all, " ")
}

// entryOf is how the register's list shows the record.
func entryOf(s desk.State, e register.Entry) register.Entry {
	p := s.Record.Plan
	e.Title, e.Supports = s.Header().Title, p.Supports
	e.Reference, e.Candidate = s.LotName(qa.Reference), s.LotName(qa.Candidate)
	switch {
	case s.Compared:
		e.Verdict = string(s.Record.Result.Verdict)
	case s.Drafting && s.Sealed():
		e.Verdict = "criterion sealed"
	case s.Drafting:
		e.Verdict = "being prepared"
	default:
		e.Verdict = "not compared"
	}
	if s.Drafting {
		e.Reference, e.Candidate = p.Reference.Lot, p.Candidate.Lot
	}
	var signed []string
	for _, g := range s.Workbook.Signatures {
		text := g.Meaning + " by " + g.Signer
		if !g.Valid {
			text += ", not valid"
		}
		signed = append(signed, text)
	}
	e.Signatures = strings.Join(signed, "; ")
	return e
}

// keep keeps the act that led to the state. Without a register nothing is kept and nothing fails.
// One whose database another window put aside is opened again first.
func (w *window) keep(next desk.State) error {
	err := w.keepHere(next)
	if !errors.Is(err, register.ErrAside) {
		return err
	}
	if err := w.followRegister(); err != nil {
		return err
	}
	return w.keepHere(next)
}

// followRegister opens the register that another window recovered.
func (w *window) followRegister() error {
	r, _, err := register.Open(w.register.Dir(), now())
	if err != nil {
		return err
	}
	_ = w.register.Close() // it was put aside: what it says when it is closed tells nothing more
	w.register = r
	return nil
}

func (w *window) keepHere(next desk.State) error {
	if w.register == nil || !next.Open {
		return nil
	}
	state, err := json.Marshal(keptOf(next))
	if err != nil {
		return fmt.Errorf("keeping: %w", err)
	}
	act := register.Act{Time: now(), Who: person(), What: next.Last(), State: state}
	if strings.HasPrefix(act.What, "opened the plan") || strings.HasPrefix(act.What, "took the readings") || act.What == "compared" {
		act.Attempt = attempt(next.Record.Plan)
	}
	e := entryOf(next, w.entry)
	if begins := strings.HasPrefix(act.What, "opened the ") || strings.HasPrefix(act.What, "began "); begins || e.ID == 0 {
		e.ID, e.Acts, e.Origin = 0, 0, origin(next.Record.PlanFile, next.Record.Readings)
		switch {
		case next.Workbook.Opened:
			e.Origin = "workbook " + next.Workbook.SHA256
		case next.Drafting:
			e.Origin = ""
		}
		e, err = w.register.Add(e, act)
	} else {
		e, err = w.register.Keep(e, act)
	}
	if err != nil {
		return err
	}
	w.entry = e
	return w.register.At(e.ID)
}

// keepFile keeps the bytes of a file where there is a register.
func (w *window) keepFile(data []byte) (string, error) {
	if w.register == nil {
		return "", nil
	}
	return w.register.KeepFile(data)
}

// keeping is a way of reading files that keeps what it read.
func (w *window) keeping(read func(string) ([]byte, error)) func(string) ([]byte, error) {
	return func(name string) ([]byte, error) {
		data, err := read(name)
		if err == nil {
			_, err = w.keepFile(data)
		}
		return data, err
	}
}

// reopen opens a record of the register as it was left.
func (w *window) reopen(id int64) {
	const place = "Opening a record"
	w.work(place, func(watch qa.Watch) change {
		e, next, view, err := w.again(watch, id)
		if err != nil {
			return w.mended(place, err)
		}
		return func(s desk.State) desk.State {
			w.entry = e
			if err := w.register.At(e.ID); err != nil {
				return s.Failed(place, err)
			}
			return s.Reopened(next, view)
		}
	})
}

// mended is the change that says an error; where the database itself is broken it is recovered as far as it goes first.
func (w *window) mended(place string, err error) change {
	if !register.Damaged(err) {
		return failed(place, err)
	}
	return func(s desk.State) desk.State {
		if w.register.Aside() { // another window recovered it already
			if err := w.followRegister(); err != nil {
				return s.Failed(place, err)
			}
			w.entry = register.Entry{}
			w.find()
			return s.Failed("The register", errors.New("another window found it damaged and recovered it; open the record again"))
		}
		dir := w.register.Dir()
		_ = w.register.Close() // it is broken: what it says when it is closed tells nothing more
		r, damage, err := register.Recover(dir, now())
		w.register, w.entry = r, register.Entry{}
		if err != nil {
			w.register = nil
			return s.Failed("The register is damaged and cannot be recovered; nothing will be kept", err)
		}
		w.find()
		return s.Failed("The register", errors.New(damage.String()))
	}
}

// again makes the state of a record of the register from what was kept.
func (w *window) again(watch qa.Watch, id int64) (register.Entry, desk.State, desk.View, error) {
	var view desk.View
	e, acts, err := w.register.Record(id)
	if err != nil {
		return e, desk.State{}, view, err
	}
	var k kept
	if err := json.Unmarshal(acts[len(acts)-1].State, &k); err != nil {
		return e, desk.State{}, view, fmt.Errorf("record %d: %w", id, err)
	}
	if k.Format != keptFormat {
		return e, desk.State{}, view, fmt.Errorf("record %d: found the format %q, want %q; use the version of Lotpair that kept it, or a later one", id, k.Format, keptFormat)
	}
	if data, err := w.register.View(id); err == nil && len(data) > 0 {
		_ = json.Unmarshal(data, &view) // how it was looked at may be lost
	}
	s, err := w.rebuilt(watch, k)
	return e, s, view, err
}

// rebuilt reads the kept files again and compares again.
func (w *window) rebuilt(watch qa.Watch, k kept) (desk.State, error) {
	if k.Workbook.SHA256 != "" {
		data, err := w.register.File(k.Workbook.SHA256)
		if err != nil {
			return desk.State{}, err
		}
		v := exports.Verify(data, w.trusted)
		book := w.workbookOf(k.Workbook.Path, v)
		book.SHA256, book.Opened = k.Workbook.SHA256, k.Workbook.Opened
		if v.Record == nil {
			return desk.State{}, errors.New(strings.Join(book.Reasons, "\n"))
		}
		return desk.State{Path: k.Path, Record: *v.Record, Compared: true, Workbook: book}, nil
	}
	if k.Plan == nil {
		return desk.State{}, errors.New("record: found no plan, want one; the register does not hold what it should")
	}
	if k.Drafting {
		rec := qa.Record{Format: qa.RecordFormat, Plan: *k.Plan, PlanFile: k.PlanFile, Trail: k.Trail, Result: qa.Result{Seal: k.Seal}, Supersedes: k.Supersedes}
		return desk.State{Path: k.Path, Record: rec, Drafting: true, Seen: k.Seen, Files: k.Files}, nil
	}
	digests := map[string]string{}
	for _, f := range k.Files {
		digests[f.Name] = f.SHA256
	}
	readings, err := importers.Under(watch).Read(*k.Plan, func(name string) ([]byte, error) { return w.register.File(digests[name]) })
	if err != nil {
		return desk.State{}, err
	}
	result, err := qa.Compare(*k.Plan, readings, qa.Run{Software: w.build.software(), Seal: k.Seal, Attempts: k.Attempts, Watch: watch})
	if err != nil {
		return desk.State{}, err
	}
	rec := qa.Record{Format: qa.RecordFormat, Plan: *k.Plan, PlanFile: k.PlanFile, Readings: readings, Result: result, Trail: k.Trail, Supersedes: k.Supersedes}
	return desk.State{Path: k.Path, Record: rec, Compared: k.Compared, Workbook: desk.Workbook{Path: k.Workbook.Path}}, nil
}
