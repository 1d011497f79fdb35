package importers

import (
	"errors"

	"lotpair/importers/cells"
	"lotpair/qa"
)

// Watched reads under a watch: a person sees how far a long reading has come and can stop it. A reading that was stopped
// gives a *qa.StoppedError and leaves nothing behind. The functions of the package are the methods of the zero Watched, which
// nobody watches.
type Watched struct{ watch qa.Watch }

// Under reads under the watch.
func Under(w qa.Watch) Watched { return Watched{watch: w} }

// What the watch is told, in the order of the work.
const (
	reading   = "reading"
	layingOut = "finding the layout"
	taking    = "taking the readings"
)

// watchRows is how many rows lie between two looks at the watch: well below a hundredth of a second.
const watchRows = 1 << 12

func (w Watched) told(doing, of string, done, total int64) error {
	return w.watch.Told(qa.Progress{Doing: doing, Of: of, Done: done, Total: total})
}

// stop looks at the watch now and then in a loop over rows.
func (w Watched) stop(doing, of string, row int) error {
	if row%watchRows != 0 {
		return nil
	}
	return w.watch.Stop(qa.Progress{Doing: doing, Of: of})
}

// cells is the watch over the unpacking of a workbook.
func (w Watched) cells(name string) cells.Watch {
	return func(_ string, done, whole int64) error { return w.told(reading, name, done, whole) }
}

// records is the watch over the records of a text.
func (w Watched) records(name string) func(done, total int) error {
	return func(done, total int) error { return w.told(reading, name, int64(done), int64(total)) }
}

// stopped says whether an error is that of a watch.
func stopped(err error) bool {
	var s *qa.StoppedError
	return errors.As(err, &s)
}
