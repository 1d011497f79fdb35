package exports

import "lotpair/qa"

// Watched writes under a watch: it is told how far a large workbook has come, and can stop it. What was stopped is a
// *qa.StoppedError, and nothing of it is left. The functions of the same names write unwatched.
type Watched struct{ watch qa.Watch }

// Under writes under the watch.
func Under(w qa.Watch) Watched { return Watched{watch: w} }

// writing is what the watch is told, with the sheet and the last row written.
const writing = "writing"
