package exports

import (
	"bytes"
	"encoding/json"
	"fmt"

	"lotpair/qa"
)

// ResultJSON writes a result as the contract has it (lotpair.result/1), indented, with a line break at the end.
func ResultJSON(r qa.Result) ([]byte, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	if err := e.Encode(r); err != nil {
		return nil, fmt.Errorf("result: %w", err)
	}
	return b.Bytes(), nil
}
