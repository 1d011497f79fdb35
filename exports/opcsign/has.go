package opcsign

import (
	"bytes"
	"strings"
)

// HasSignature says whether anything in a file looks like a signature, sound or not: such a file must never be
// overwritten. It errs on the side of yes, and works on damaged files.
func HasSignature(pkg []byte) bool {
	// Names of entries stand unpacked in the archive, even in a damaged one.
	name := strings.Trim(sigFolder, "/")
	for rest := pkg; len(rest) > 0; {
		i := bytes.IndexByte(rest, '_')
		if i < 0 {
			break
		}
		rest = rest[i:]
		if len(rest) >= len(name) && bytes.EqualFold(rest[:len(name)], []byte(name)) {
			return true
		}
		rest = rest[1:]
	}
	c, err := openContainer(pkg)
	return err == nil && c.traces()
}
