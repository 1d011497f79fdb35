package register

import (
	"database/sql"
	"fmt"
	"sort"
	"time"
)

// salvage takes over what can be read of a damaged database, row by row: a page that cannot be read costs its own rows.
type salvage struct {
	from   *sql.DB
	to     *Register
	damage *Damage
}

// remains is what was read of one record.
type remains struct {
	entry Entry
	named bool
	view  []byte
	acts  map[int]Act
	last  int // the highest number known of
}

func (s salvage) all() error {
	all := map[int64]*remains{}
	of := func(id int64) *remains {
		if all[id] == nil {
			all[id] = &remains{acts: map[int]Act{}}
		}
		return all[id]
	}
	s.rows("records", func(row int64) error {
		e, err := scanEntry(s.from.QueryRow("SELECT "+entryColumns+" FROM records r WHERE r.rowid = ?", row))
		if err != nil {
			return err
		}
		r := of(e.ID)
		r.entry, r.named, r.last = e, true, max(r.last, e.Acts)
		_ = s.from.QueryRow("SELECT view FROM records WHERE rowid = ?", row).Scan(&r.view) // how it was looked at may be lost
		return nil
	})
	s.rows("acts", func(row int64) error {
		var record int64
		if err := s.from.QueryRow("SELECT record FROM acts WHERE rowid = ?", row).Scan(&record); err != nil {
			return err
		}
		a, err := scanAct(s.from.QueryRow("SELECT number, time, who, what, attempt, state, before, digest FROM acts WHERE rowid = ?", row))
		if err != nil {
			return err
		}
		r := of(record)
		r.acts[a.Number], r.last = a, max(r.last, a.Number)
		return nil
	})
	if err := fromLog(s.to.dir, of); err != nil {
		return err
	}
	ids := make([]int64, 0, len(all))
	for id := range all {
		ids = append(ids, id)
	}
	sort.Slice(ids, func(i, j int) bool { return ids[i] < ids[j] })
	sort.SliceStable(ids, func(i, j int) bool { return all[ids[i]].entry.Changed.Before(all[ids[j]].entry.Changed) })
	tx, err := s.to.db.Begin()
	if err != nil {
		return err
	}
	defer func() { _ = tx.Rollback() }() // after Commit this does nothing
	for i, id := range ids {
		if err := s.take(tx, id, int64(i+1), all[id]); err != nil {
			return err
		}
	}
	return tx.Commit()
}

// rows calls read for every row that a table may have. Rows are asked for one by one, because one walk through the table
// would end at the first page that cannot be read. After many rows in a row that are not there the table has ended.
func (s salvage) rows(table string, read func(row int64) error) {
	const gap = 2000
	last := int64(gap)
	var most int64
	if err := s.from.QueryRow("SELECT max(rowid) FROM " + table).Scan(&most); err == nil {
		last = most
	}
	for row := int64(1); row <= last; row++ {
		if read(row) == nil && last < row+gap && most == 0 {
			last = row + gap
		}
	}
}

// take writes one record with its acts up to the first gap.
func (s salvage) take(tx *sql.Tx, id, change int64, r *remains) error {
	var kept []Act
	for n := 1; n <= r.last; n++ {
		a, ok := r.acts[n]
		if !ok {
			break
		}
		kept = append(kept, a)
	}
	kept = kept[:whole(kept)]
	s.damage.LostActs += r.last - len(kept)
	if len(kept) == 0 {
		return nil // nothing of it can be opened
	}
	e := r.entry
	if !r.named {
		s.damage.Unnamed++
		e = Entry{Title: fmt.Sprintf("record %d, its name was lost", id), Changed: kept[len(kept)-1].Time}
	}
	if _, err := tx.Exec("INSERT INTO records (id, origin, title, supports, reference, candidate, verdict, signatures, changed, changes, acts, view) VALUES (?,?,?,?,?,?,?,?,?,?,?,?)",
		id, e.Origin, e.Title, e.Supports, e.Reference, e.Candidate, e.Verdict, e.Signatures, e.Changed.Format(time.RFC3339Nano), change, len(kept), r.view); err != nil {
		return err
	}
	for _, a := range kept {
		if err := insert(tx, id, a); err != nil {
			return err
		}
	}
	if _, err := tx.Exec("INSERT INTO found (rowid, words) VALUES (?, ?)", change, e.words()); err != nil {
		return err
	}
	s.damage.Records++
	s.damage.Acts += len(kept)
	return nil
}
