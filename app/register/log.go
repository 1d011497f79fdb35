package register

import (
	"bufio"
	"encoding/json"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
)

// log is the name of the second copy of all acts: a line each, only appended. It is read when the database is damaged, and is
// never needed otherwise.
const log = "acts.log"

// logged is one line of the log.
type logged struct {
	Entry Entry
	Act   Act
}

// append writes an act that is in the database to the log.
func (r *Register) append(e Entry, a Act) error {
	line, err := json.Marshal(logged{e, a})
	if err != nil {
		return err
	}
	f, err := os.OpenFile(filepath.Join(r.dir, log), os.O_APPEND|os.O_CREATE|os.O_WRONLY, 0o600)
	if err != nil {
		return err
	}
	_, err = f.Write(append(line, '\n'))
	return errors.Join(err, f.Close())
}

// fromLog adds to what was read of a damaged database what the log holds besides. A line that cannot be read is passed over.
func fromLog(dir string, of func(id int64) *remains) error {
	f, err := os.Open(filepath.Join(dir, log))
	if errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	if err != nil {
		return err
	}
	defer func() { _ = f.Close() }() // it is only read
	lines := bufio.NewReader(f)
	for {
		text, err := lines.ReadBytes('\n')
		var l logged
		if json.Unmarshal(text, &l) == nil && l.Entry.ID != 0 && l.Act.Digest == l.Act.digest() {
			r := of(l.Entry.ID)
			if _, ok := r.acts[l.Act.Number]; !ok {
				r.acts[l.Act.Number] = l.Act
			}
			r.last = max(r.last, l.Act.Number)
			if !r.named || l.Entry.Acts > r.entry.Acts {
				r.entry, r.named = l.Entry, true
			}
		}
		if err != nil {
			return nil // the end, or what lies behind a place that cannot be read
		}
	}
}
