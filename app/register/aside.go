package register

import (
	"errors"
	"os"
	"path/filepath"
)

// ErrAside says that another window found the database damaged and put it aside: an act on it would be seen by nobody. The
// register is to be opened again, and the act done there.
var ErrAside = errors.New("register: found the database put aside by another window that recovered it, want the recovered one; open the register again")

// remember looks at the database's file as it was opened.
func (r *Register) remember() error {
	info, err := os.Stat(filepath.Join(r.dir, database))
	r.opened = info
	return err
}

// Aside says whether the database that is open is no longer the one of the folder.
func (r *Register) Aside() bool {
	now, err := os.Stat(filepath.Join(r.dir, database))
	return err != nil || !os.SameFile(now, r.opened)
}
