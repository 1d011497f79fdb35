package opcsign

import "crypto/x509"

// Reason is one thing that is wrong: a stable code, the part it concerns and a sentence for people.
type Reason struct {
	Code string // lower-case words joined by hyphens, see codes.go
	Part string // part name, "" for the package as a whole
	Text string
}

// Error makes a Reason usable as an error.
func (r Reason) Error() string {
	if r.Part == "" {
		return r.Text
	}
	return r.Part + ": " + r.Text
}

// Signature is one signature of a package and what became of it.
type Signature struct {
	Part        string
	Statement   Statement // read from signed elements only; zero where there are none
	Certificate *x509.Certificate
	Chain       []*x509.Certificate // leaf first, as embedded
	Valid       bool                // the signature and everything it names are as they were signed
	CoversAll   bool                // it names every part and every relationship of the package
	Trusted     *bool               // nil where no roots were given
	Doubt       string              // why it is not trusted, "" else
	Reasons     []Reason
}

// Report is what Verify found.
type Report struct {
	Signatures    []Signature // in the order sig1, sig2, ...
	UnsignedParts []string    // parts and relationships (part#id) that at least one signature leaves out, sorted
	Reasons       []Reason    // of the package itself
}

// Sound says whether the package is signed and nothing at all is wrong with it. Trust is another question.
func (r Report) Sound() bool {
	if len(r.Signatures) == 0 || len(r.Reasons) > 0 || len(r.UnsignedParts) > 0 {
		return false
	}
	for _, s := range r.Signatures {
		if !s.Valid || !s.CoversAll || len(s.Reasons) > 0 {
			return false
		}
	}
	return true
}
