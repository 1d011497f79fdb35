// Package register keeps the records of this machine: every act at once, in a database of one folder, and beside it a second
// copy of the acts and the bytes of every source file by their digest. It stores bytes and knows nothing of what they mean; the window encodes them.
//
// An act that was acknowledged is never lost and never changed: acts are only appended, each holds the digest of the one
// before it, and the database refuses to change or remove one. Several programs may use one folder at the same time.
package register
