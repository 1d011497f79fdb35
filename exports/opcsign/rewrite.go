package opcsign

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"hash/crc32"
)

// content is a part to write, or to leave out where its bytes are nil.
type content struct {
	name  string
	bytes []byte
}

// change is a part as it is packed, or nil where it is left out.
type change struct {
	name string
	*entry
}

// packed packs contents. Equal content gives equal bytes.
func packed(contents []content) ([]change, error) {
	var b bytes.Buffer
	f, err := flate.NewWriter(&b, flate.DefaultCompression) // one for all: each takes a megabyte
	if err != nil {
		return nil, err
	}
	var out []change
	for _, c := range contents {
		if c.bytes == nil {
			out = append(out, change{name: c.name})
			continue
		}
		e := &entry{name: c.name, crc: crc32.ChecksumIEEE(c.bytes), size: int64(len(c.bytes))}
		if len(c.bytes) > 0 {
			b.Reset()
			f.Reset(&b)
			if _, err := f.Write(c.bytes); err != nil {
				return nil, err
			}
			if err := f.Close(); err != nil {
				return nil, err
			}
			e.method, e.packed = zip.Deflate, bytes.Clone(b.Bytes())
		}
		e.packSize = len(e.packed)
		out = append(out, change{c.name, e})
	}
	return out, nil
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
func (a *archive) with(changes []change) *archive {
	last, names := byLast(changes)
	out, done := &archive{byName: map[string]*entry{}}, map[string]bool{}
	put := func(e *entry) {
		if e != nil {
			out.entries = append(out.entries, e)
		}
	}
	for _, e := range a.entries {
		if c, changed := last[e.name]; changed {
			done[e.name] = true
			e = c.entry
		}
		put(e)
	}
	for _, n := range names {
		if !done[n] {
			put(last[n].entry)
		}
	}
	out.checkNames()
	return out
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
		if c.entry != nil {
			room += c.packSize + 1<<8
		}
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
		case c.entry != nil:
			err = writeEntry(w, c.entry)
		}
		if err != nil {
			return nil, err
		}
	}
	for _, n := range names {
		if c := last[n]; !done[n] && c.entry != nil {
			if err := writeEntry(w, c.entry); err != nil {
				return nil, err
			}
		}
	}
	if err := w.Close(); err != nil {
		return nil, err
	}
	return out.Bytes(), nil
}

// writeEntry writes an entry packed here, so its sizes stand in the local header and no descriptor follows: readers that do not
// look at the directory can read it.
func writeEntry(w *zip.Writer, e *entry) error {
	to, err := w.CreateRaw(&zip.FileHeader{Name: e.name, Method: e.method, CRC32: e.crc, UncompressedSize64: uint64(e.size), CompressedSize64: uint64(e.packSize)})
	if err != nil {
		return err
	}
	_, err = to.Write(e.packed)
	return err
}
