package app

import (
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"

	"lotpair/app/desk"
	"lotpair/exports"
	"lotpair/exports/opcsign"
	"lotpair/qa"
	"lotpair/qa/published"
)

// askQualify offers the installation check and says what came of the last one.
func (w *window) askQualify() {
	if w.busy() {
		return
	}
	f := w.newForm()
	f.add("", wrapped(desk.QualifyText), "")
	f.add("Last check", wrapped(w.lastCheck()), "")
	f.ask("Check this installation", "Check now", func() error {
		w.qualify()
		return nil
	})
}

// qualify runs the published checks and signs, verifies and changes one record.
func (w *window) qualify() {
	const place = "Checking this installation"
	w.work(place, func(watch qa.Watch) change {
		q := exports.NewQualification(now(), w.software(), publishedLines(), w.recordSteps(watch))
		if err := w.keepCheck(q); err != nil {
			return failed(place, err)
		}
		return func(s desk.State) desk.State {
			w.checked, w.jobs.then = &q, w.showCheck
			return s.CheckedInstallation(checkText(q), q.Off == 0)
		}
	})
}

// software is this program as a record states it.
func (w *window) software() qa.Software {
	s := w.build.software()
	s.Calculation = qa.Calculation
	return s
}

func publishedLines() []exports.CheckLine {
	var out []exports.CheckLine
	for _, o := range published.Run() {
		l := exports.CheckLine{ID: o.ID, Quantity: o.Quantity, Source: o.Source, Want: o.Want, Got: o.Got, Error: o.Error, Allowed: o.Relative, Holds: o.Holds}
		if o.Err != nil {
			l.Got, l.Error, l.Fault = 0, 0, o.Err.Error()
		}
		out = append(out, l)
	}
	return out
}

// recordSteps read, compare, sign, verify and change the worked example.
func (w *window) recordSteps(watch qa.Watch) []exports.StepLine {
	const name = "example/plan.toml"
	data, err := sample.ReadFile(name)
	if err == nil {
		var rec qa.Record
		if rec, err = w.compareByPlan(watch, name, data, sample.ReadFile); err == nil {
			return exports.CheckRecord(rec, now(), zone(now().Location().String()))
		}
	}
	return []exports.StepLine{{Step: "the worked example is compared", Fault: err.Error()}}
}

func checkText(q exports.Qualification) string {
	return desk.CheckText(q.Time, q.Software.Version, len(q.Checks)+len(q.Record), q.Off)
}

const checkFile = "installation-check.json"

// keepCheck keeps the check in the folder of the register, for the next window.
func (w *window) keepCheck(q exports.Qualification) error {
	if w.register == nil {
		return nil
	}
	data, err := json.MarshalIndent(q, "", " ")
	if err != nil {
		return err
	}
	return os.WriteFile(filepath.Join(w.register.Dir(), checkFile), data, 0o600)
}

// lastCheck says what came of the last installation check.
func (w *window) lastCheck() string {
	q := w.checked
	if q == nil && w.register != nil {
		var kept exports.Qualification
		if data, err := os.ReadFile(filepath.Join(w.register.Dir(), checkFile)); err == nil && json.Unmarshal(data, &kept) == nil {
			q = &kept
		}
	}
	if q == nil {
		return "This installation was not checked yet."
	}
	text := checkText(*q)
	if now := w.software(); q.Software.Version != now.Version || q.Software.Revision != now.Revision {
		text += " That was another version of the program: check again."
	}
	return text
}

// showCheck lists what was checked; it can be copied, and saved as a report.
func (w *window) showCheck() {
	q := w.checked
	if q == nil || w.dialog != nil {
		return
	}
	rows := [][]string{{"check", "quantity", "published", "here", "holds", "source"}}
	for _, c := range q.Checks {
		here := qa.Plain(c.Got)
		if c.Fault != "" {
			here = c.Fault
		}
		rows = append(rows, []string{c.ID, c.Quantity, w.shown(qa.Plain(c.Want)), w.shown(here), holds(c.Holds), c.Source})
	}
	for _, s := range q.Record {
		rows = append(rows, []string{"record", s.Step, "", s.Fault, holds(s.Holds), ""})
	}
	w.showTable("Installation check", []string{checkText(*q), desk.QualifyText}, rows, newButton(w.palette, "Save the report", plain, func() {
		w.leaveDialog()
		w.askReport(*q)
	}))
}

func holds(b bool) string {
	if b {
		return "holds"
	}
	return "IS OFF"
}

// askReport asks where the report goes, and with which identity it is signed.
func (w *window) askReport(q exports.Qualification) {
	f := w.newForm()
	to := f.text("File", w.home("installation-check.xlsx"), "no existing file is written over")
	key := w.identityLine(f, "signs the report as prepared; empty leaves it unsigned")
	pass := f.secret("Passphrase", "")
	f.ask("Save the report of the installation check", "Save", func() error {
		if err := filled("a file name")(to.Text); err != nil {
			return err
		}
		file, word := key.Text, pass.Text
		w.saveBytes("Report", withExtension(to.Text), func() ([]byte, error) {
			data, err := exports.QualificationReport(q)
			if err != nil || file == "" {
				return data, err
			}
			id, err := openIdentity(file, word)
			if err != nil {
				return nil, err
			}
			at := now()
			st := opcsign.Statement{Name: id.Name(), Title: id.Title(), Organization: id.Organization(), Meaning: "prepared", Time: at, Zone: zone(at.Location().String())}
			if data, err = opcsign.Sign(data, id.Key, id.Chain, st); err != nil {
				return nil, fmt.Errorf("report: %w", err)
			}
			return data, nil
		})
		return nil
	})
}

// home is a name in the user's home folder.
func (w *window) home(name string) string {
	home, err := os.UserHomeDir()
	if err != nil {
		home = "."
	}
	return filepath.Join(home, name)
}
