package opcsign

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"hash/crc32"
)

// change is an entry to write anew, or to leave out where content is nil.
type change struct {
	name    string
	content []byte
}

// rewrite copies an archive entry by entry as it is packed, but for the changes: entries that exist are replaced in
// their place, new ones come last in the order given.
func rewrite(pkg []byte, changes []change) ([]byte, error) {
	r, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		return nil, notPackage("found %v", err)
	}
	byName := map[string]change{}
	for _, c := range changes {
		byName[c.name] = c
	}
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	done := map[string]bool{}
	for _, f := range r.File {
		c, changed := byName[f.Name]
		done[f.Name] = true
		switch {
		case !changed:
			err = w.Copy(f)
		case c.content != nil:
			err = writeEntry(w, c)
		}
		if err != nil {
			return nil, err
		}
	}
	for _, c := range changes {
		if !done[c.name] && c.content != nil {
			if err := writeEntry(w, c); err != nil {
				return nil, err
			}
		}
	}
	if err := w.Close(); err != nil {
		return nil, err
	}
	return out.Bytes(), nil
}

// writeEntry packs an entry here, so its sizes stand in the local header and no descriptor follows: readers that do not
// look at the directory can read it. Without a time, equal content gives equal bytes.
func writeEntry(w *zip.Writer, c change) error {
	h := &zip.FileHeader{Name: c.name, CRC32: crc32.ChecksumIEEE(c.content), UncompressedSize64: uint64(len(c.content))}
	packed := c.content
	if len(c.content) > 0 {
		var b bytes.Buffer
		f, err := flate.NewWriter(&b, flate.DefaultCompression)
		if err != nil {
			return err
		}
		if _, err := f.Write(c.content); err != nil {
			return err
		}
		if err := f.Close(); err != nil {
			return err
		}
		h.Method, packed = zip.Deflate, b.Bytes()
	}
	h.CompressedSize64 = uint64(len(packed))
	e, err := w.CreateRaw(h)
	if err != nil {
		return err
	}
	_, err = e.Write(packed)
	return err
}
