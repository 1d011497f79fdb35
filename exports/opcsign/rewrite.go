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

// byLast are the changes by name, where the last of a name holds, and the names in their order.
func byLast(changes []change) (map[string]change, []string) {
	last, names := map[string]change{}, []string{}
	for _, c := range changes {
		if _, ok := last[c.name]; !ok {
			names = append(names, c.name)
		}
		last[c.name] = c
	}
	return last, names
}

// with is the archive as the changes make it, the other entries as they are packed: entries that exist are replaced in their
// place, new ones come last in the order given.
func (a *archive) with(changes []change) (*archive, error) {
	last, names := byLast(changes)
	out, done := &archive{byName: map[string]*entry{}}, map[string]bool{}
	put := func(c change) error {
		done[c.name] = true
		if c.content == nil {
			return nil
		}
		e, err := packed(c)
		out.entries = append(out.entries, e)
		return err
	}
	for _, e := range a.entries {
		c, changed := last[e.name]
		if !changed {
			out.entries = append(out.entries, e)
		} else if err := put(c); err != nil {
			return nil, err
		}
	}
	for _, n := range names {
		if !done[n] {
			if err := put(last[n]); err != nil {
				return nil, err
			}
		}
	}
	out.checkNames()
	return out, nil
}

// rewrite copies an archive entry by entry as it is packed, but for the changes.
func rewrite(pkg []byte, changes []change) ([]byte, error) {
	r, err := zip.NewReader(bytes.NewReader(pkg), int64(len(pkg)))
	if err != nil {
		return nil, notPackage("found %v", err)
	}
	last, names := byLast(changes)
	var out bytes.Buffer
	room := len(pkg) + 1<<10
	for _, c := range last {
		room += len(c.content) + 1<<8
	}
	out.Grow(room)
	w := zip.NewWriter(&out)
	done := map[string]bool{}
	for _, f := range r.File {
		c, changed := last[f.Name]
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
	for _, n := range names {
		if c := last[n]; !done[n] && c.content != nil {
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

// packed makes an entry of content.
func packed(c change) (*entry, error) {
	e := &entry{name: c.name, crc: crc32.ChecksumIEEE(c.content), size: int64(len(c.content)), packed: c.content}
	if len(c.content) > 0 {
		var b bytes.Buffer
		f, err := flate.NewWriter(&b, flate.DefaultCompression)
		if err != nil {
			return nil, err
		}
		if _, err := f.Write(c.content); err != nil {
			return nil, err
		}
		if err := f.Close(); err != nil {
			return nil, err
		}
		e.method, e.packed = zip.Deflate, b.Bytes()
	}
	e.packSize = len(e.packed)
	return e, nil
}

// writeEntry packs an entry here, so its sizes stand in the local header and no descriptor follows: readers that do not
// look at the directory can read it. Without a time, equal content gives equal bytes.
func writeEntry(w *zip.Writer, c change) error {
	e, err := packed(c)
	if err != nil {
		return err
	}
	to, err := w.CreateRaw(&zip.FileHeader{Name: e.name, Method: e.method, CRC32: e.crc, UncompressedSize64: uint64(e.size), CompressedSize64: uint64(e.packSize)})
	if err != nil {
		return err
	}
	_, err = to.Write(e.packed)
	return err
}
