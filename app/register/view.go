package register

import "fmt"

// Place is the record that lay open when the program ended without closing it; 0 where none did.
func (r *Register) Place() (int64, error) {
	var id int64
	if err := r.view.QueryRow("SELECT coalesce(max(record), 0) FROM place").Scan(&id); err != nil {
		return 0, fmt.Errorf("register: %w", err)
	}
	return id, nil
}

// At says which record lies open now; 0 where none does.
func (r *Register) At(id int64) error {
	if _, err := r.view.Exec("UPDATE place SET record = ?", id); err != nil {
		return fmt.Errorf("register: %w", err)
	}
	return nil
}

// SetView keeps how a record is looked at. It is no act.
func (r *Register) SetView(id int64, view []byte) error {
	if _, err := r.view.Exec("UPDATE records SET view = ? WHERE id = ?", view, id); err != nil {
		return fmt.Errorf("register: %w", err)
	}
	return nil
}

// View is how a record was looked at last; nil where that is not known.
func (r *Register) View(id int64) ([]byte, error) {
	var view []byte
	if err := r.view.QueryRow("SELECT view FROM records WHERE id = ?", id).Scan(&view); err != nil {
		return nil, fmt.Errorf("register: %w", err)
	}
	return view, nil
}
