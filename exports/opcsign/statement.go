package opcsign

import "time"

// Statement is what a person declares by a signature.
type Statement struct {
	Name         string    // the signer, as in the certificate's common name
	Title        string    // job title, may be empty
	Organization string    // may be empty
	Meaning      string    // prepared, reviewed, approved, ...
	Reason       string    // in the signer's words, may be empty
	Disposition  string    // what becomes of the lot, may be empty
	Time         time.Time // local time with its offset, whole seconds
	Zone         string    // name of the time zone, such as Europe/Berlin; may be empty
}
