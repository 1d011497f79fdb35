package register

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
)

// KeepFile keeps the bytes of a source file and returns their digest. What is kept already is not written again.
func (r *Register) KeepFile(data []byte) (digest string, err error) {
	sum := sha256.Sum256(data)
	digest = hex.EncodeToString(sum[:])
	path := r.file(digest)
	if info, err := os.Stat(path); err == nil && info.Size() == int64(len(data)) {
		return digest, nil
	}
	fail := func(err error) (string, error) { return "", fmt.Errorf("register, file %.12s: %w", digest, err) }
	if err := os.MkdirAll(filepath.Dir(path), 0o700); err != nil {
		return fail(err)
	}
	beside, err := os.CreateTemp(filepath.Dir(path), "being-written-")
	if err != nil {
		return fail(err)
	}
	_, err = beside.Write(data)
	err = errors.Join(err, beside.Sync(), beside.Close())
	if err == nil {
		err = os.Rename(beside.Name(), path)
	}
	if err != nil {
		_ = os.Remove(beside.Name()) // it may be gone already
		return fail(err)
	}
	return digest, nil
}

// File gives the bytes of a kept file back. Bytes that are not as they were kept are an error.
func (r *Register) File(digest string) ([]byte, error) {
	if b, err := hex.DecodeString(digest); err != nil || len(b) != sha256.Size {
		return nil, fmt.Errorf("register, file: found the digest %q, want 64 hexadecimal digits", digest)
	}
	data, err := os.ReadFile(r.file(digest))
	if errors.Is(err, fs.ErrNotExist) {
		return nil, fmt.Errorf("register, file %.12s: found none, want the bytes that were kept; open the file again from where it came", digest)
	}
	if err != nil {
		return nil, fmt.Errorf("register, file %.12s: %w", digest, err)
	}
	if sum := sha256.Sum256(data); hex.EncodeToString(sum[:]) != digest {
		return nil, fmt.Errorf("register, file %.12s: found other bytes than were kept; open the file again from where it came", digest)
	}
	return data, nil
}

func (r *Register) file(digest string) string {
	return filepath.Join(r.dir, "files", digest[:2], digest)
}
