package importers

import (
	"lotpair/importers/cells"
	"lotpair/qa"
)

// unreadCells gathers the cells of one characteristic that are no numbers, by what is wrong with them.
type unreadCells struct {
	kinds []*Problem
	at    map[[2]string][]string
}

func (u *unreadCells) add(c cells.Cell, p *Problem) {
	key := [2]string{p.Want, p.Do}
	if u.at == nil {
		u.at = map[[2]string][]string{}
	}
	if u.at[key] == nil {
		u.kinds = append(u.kinds, p)
	}
	u.at[key] = append(u.at[key], c.Name()+" "+quoted(c.Text))
}

// warn tells of them where no plan is there yet: what was found, what was wanted and what to do.
func (u *unreadCells) warn(t *table, name string) {
	for _, p := range u.kinds {
		at := u.at[[2]string{p.Want, p.Do}]
		t.warn(qa.WarnUnread, "%s: %s read (%s), want %s; %s. Until then no verdict is given.", name, qa.Count(len(at), "cell is not", "cells are not"), join2(at), p.Want, p.Do)
	}
}
