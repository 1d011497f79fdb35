package app

import "lotpair/app/desk"

// showWords says what the words and numbers mean, with the terms of the standards.
func (w *window) showWords() {
	var rows [][]string
	for _, x := range desk.Words {
		rows = append(rows, []string{x.Word, x.Means, x.Term})
	}
	rows = append([][]string{{"word", "means", "term of a standard"}}, rows...)
	w.showTable("Words and what they mean", nil, w.tableShown(rows))
}

// showKeys lists the keys.
func (w *window) showKeys() {
	w.showTable("Keys", nil, append([][]string{{"key", "does"}}, desk.Keys...))
}

// showTrail shows what was done, by whom and when.
func (w *window) showTrail() {
	if !w.state.Open {
		return
	}
	rows := [][]string{{"time", "who", "what", "on", "why"}}
	for _, a := range w.state.Trail() {
		rows = append(rows, a[:])
	}
	w.showTable("What was done", w.state.TrailText(), rows)
}
