package exports

import (
	"crypto/sha256"
	"crypto/x509"
	"encoding/hex"
	"fmt"
	"slices"
	"strings"
	"time"

	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// State is what verification found of a record, the first that holds in this order (contract: console).
type State string

// The states of a record.
const (
	Unreadable State = "unreadable" // no package, or no record in it
	Changed    State = "changed"    // something is not as it was signed
	Unsigned   State = "unsigned"
	Disagrees  State = "disagrees"  // the recomputation or the sheets differ from the record
	Incomplete State = "incomplete" // a required meaning is missing, or two meanings were signed with one key
	Intact     State = "intact"
)

// SignatureView is one signature as verification reports it.
type SignatureView struct {
	Signer       string `json:"signer"`
	Title        string `json:"title,omitempty"`
	Organization string `json:"organization,omitempty"`
	Meaning      string `json:"meaning"`
	Reason       string `json:"reason,omitempty"`
	Disposition  string `json:"disposition,omitempty"`
	Time         string `json:"time"` // local, with offset
	Valid        bool   `json:"valid"`
	Trusted      *bool  `json:"trusted"` // nil where no trusted certificates were given
	CoversAll    bool   `json:"covers_all"`
	Fingerprint  string `json:"fingerprint"` // SHA-256 of the certificate

	Certificate *x509.Certificate `json:"-"` // nil where none could be read
	Doubt       string            `json:"-"` // why it is not trusted, empty else
}

// Verification is what was checked of a record and what was found (contract: lotpair.verify/1).
type Verification struct {
	State           State
	Signatures      []SignatureView
	MissingMeanings []string
	UnsignedParts   []string
	Reasons         []opcsign.Reason
	Agrees          bool     // the recomputation and the sheets agree with the record
	Differences     []string // where they do not
	Rebuilt         bool     // the workbook is, part for part, what this program makes of the record in it
	Record          *qa.Record
	Sealed          *Sealed // of a seal, which is no record

	broken bool   // the signatures are
	digest string // of the record's content, as its sheets print it
}

// Verify checks every signature and part of a workbook, recomputes the result from the readings embedded in it and lays the
// sheets that the record must give beside those the file holds. roots are the trusted certificates; nil judges no trust.
func Verify(pkg []byte, roots []*x509.Certificate) Verification {
	v := Verification{State: Intact, Signatures: []SignatureView{}, MissingMeanings: []string{}, UnsignedParts: []string{}, Differences: []string{}}
	report, err := opcsign.Verify(pkg, roots)
	if err != nil {
		v.State = Unreadable
		v.reason("not-a-package", "", err.Error())
		return v
	}
	v.signatures(report)
	v.broken = !unsignedOrSound(report)
	if s, layout, err := readSeal(pkg); err == nil {
		if !knownLayout(layout) {
			v.unknownLayout(report, layout)
			return v
		}
		v.Sealed = &s
		v.sealed(pkg, s, layout)
		v.printed(report, s.Signer)
		v.clocks(report, moment{s.Time, "sealed"})
		v.conclude(report)
		return v
	}
	rec, x, err := readRecord(pkg)
	if err != nil {
		// Where signatures are broken besides, that is the nearer fault.
		v.reason("no-record", recordPart, err.Error())
		v.State = Unreadable
		if len(report.Signatures) > 0 && !report.Sound() {
			v.State = Changed
		}
		return v
	}
	if !knownLayout(x.Layout) {
		v.unknownLayout(report, x.Layout)
		return v
	}
	v.Record = &rec
	v.recompute(pkg, rec, x)
	v.meanings(report, rec)
	v.printed(report, rec.Signer)
	v.clocks(report, lastAct(rec.Trail))
	v.conclude(report)
	return v
}

// sealed checks a seal in itself: its digest is that of its plan, and its sheet states it.
func (v *Verification) sealed(pkg []byte, s Sealed, layout int) {
	v.Agrees = true
	if s.Digest != s.Plan.SealDigest() {
		v.disagree("seal-differs", recordPart, "the digest of the criterion is not that of the plan in the seal")
	}
	if layout < Layout {
		v.olderSeal(pkg, s, layout)
		return
	}
	v.laid(pkg, s.book())
}

// printed checks that the first signature is by the signer whom the sheets name: else one person's signature would stand under
// another's name.
func (v *Verification) printed(report opcsign.Report, p *qa.Signer) {
	if len(report.Signatures) == 0 {
		return
	}
	first, fingerprint := report.Signatures[0], v.Signatures[0].Fingerprint
	st := first.Statement
	switch {
	case p != nil && p.Certificate != "" && (first.Certificate == nil || p.Certificate != certificateText(first.Certificate)):
		v.disagree("signer-differs", first.Part, fmt.Sprintf("the sheets say that the first signer's certificate is %q, and it is another", p.Certificate))
	case p == nil:
		v.disagree("signer-differs", first.Part, fmt.Sprintf("the sheets call this an unsigned draft, and it is signed by %s", st.Name))
	case p.Name != st.Name || p.Meaning != st.Meaning || p.Title != st.Title || p.Organization != st.Organization || p.Reason != st.Reason ||
		p.Disposition != st.Disposition || !p.Time.Truncate(time.Second).Equal(st.Time) || p.Fingerprint != fingerprint:
		v.disagree("signer-differs", first.Part, fmt.Sprintf("the sheets name %s (%s, %s) as the first signer, the signature is by %s (%s, %s)",
			p.Name, p.Meaning, localTime(p.Time), st.Name, st.Meaning, localTime(st.Time)))
	}
}

// conclude gives the state, the first that holds.
func (v *Verification) conclude(report opcsign.Report) {
	switch {
	case v.broken:
		v.State = Changed
	case len(report.Signatures) == 0:
		v.State = Unsigned
	case !v.Agrees:
		v.State = Disagrees
	case len(v.MissingMeanings) > 0 || v.has("same-signer"):
		v.State = Incomplete
	}
}

// unsignedOrSound says that nothing is wrong with the signatures, of which there may be none.
func unsignedOrSound(r opcsign.Report) bool {
	return len(r.Reasons) == 0 && (len(r.Signatures) == 0 || r.Sound())
}

func (v *Verification) reason(code, part, text string) {
	v.Reasons = append(v.Reasons, opcsign.Reason{Code: code, Part: part, Text: text})
}

func (v *Verification) has(code string) bool {
	for _, r := range v.Reasons {
		if r.Code == code {
			return true
		}
	}
	return false
}

func (v *Verification) signatures(report opcsign.Report) {
	v.Reasons = append(v.Reasons, report.Reasons...)
	v.UnsignedParts = append(v.UnsignedParts, report.UnsignedParts...)
	for _, s := range report.Signatures {
		v.Reasons = append(v.Reasons, s.Reasons...)
		view := SignatureView{
			Signer: s.Statement.Name, Title: s.Statement.Title, Organization: s.Statement.Organization, Meaning: s.Statement.Meaning,
			Reason: s.Statement.Reason, Disposition: s.Statement.Disposition, Valid: s.Valid, Trusted: s.Trusted, CoversAll: s.CoversAll,
			Certificate: s.Certificate, Doubt: s.Doubt,
		}
		if !s.Statement.Time.IsZero() {
			view.Time = s.Statement.Time.Format(time.RFC3339)
		}
		if s.Certificate != nil {
			sum := sha256.Sum256(s.Certificate.Raw)
			view.Fingerprint = hex.EncodeToString(sum[:])
			if view.Signer == "" {
				view.Signer = s.Certificate.Subject.CommonName
			}
		}
		v.Signatures = append(v.Signatures, view)
	}
}

// recompute runs the comparison again and compares it with the record and the record with the sheets.
func (v *Verification) recompute(pkg []byte, rec qa.Record, x *recordXML) {
	v.Agrees = true
	v.again(rec)
	if i := rec.Trail.Broken(); i >= 0 {
		v.disagree("trail-broken", recordPart, fmt.Sprintf("entry %d of the trail does not hold the digest of the one before it", i+1))
	}
	if rec.Result.Seal.Digest != rec.Plan.SealDigest() {
		v.disagree("seal-differs", recordPart, "the digest of the criterion is not that of the plan in the record")
	}
	if x.Layout < Layout {
		var err error
		if v.digest, err = storedDigest(pkg, x); err != nil {
			v.disagree("sheets-differ", "", err.Error())
			return
		}
		v.olderRecord(pkg, rec, x)
		return
	}
	b, digest, err := bookOf(rec)
	if err != nil {
		v.disagree("sheets-differ", "", err.Error())
		return
	}
	v.digest = digest
	v.laid(pkg, b)
}

// again runs the comparison again. A record that another calculation made may differ: then its sheets are held against its own
// result, and that the two calculations part is said, with the verdicts first. A calculation that never was is no excuse.
func (v *Verification) again(rec qa.Record) {
	const told = 3
	other := rec.Result.Software.Calculation
	excused := other != qa.Calculation && other > 0
	again, err := rec.Recompute()
	switch {
	case err != nil && excused:
		v.reason("calculation-version", recordPart, fmt.Sprintf("the record was computed by calculation %d, and this program, which is calculation %d, cannot make it again: %v; use the version that wrote it (%s)",
			other, qa.Calculation, err, orWord(rec.Result.Software.Version, "see the sheet Method")))
		return
	case err != nil:
		v.disagree("recomputation", "", fmt.Sprintf("the comparison cannot be made again: %v", err))
		return
	}
	again.Software.Calculation = other // the number is not a difference by itself
	d := differences(rec.Result, again, largest(rec.Readings))
	if !excused {
		for _, t := range d {
			v.disagree("recomputation", recordPart, t)
		}
		return
	}
	if len(d) == 0 {
		return
	}
	slices.SortStableFunc(d, func(a, b string) int { return rank(a) - rank(b) })
	v.reason("calculation-version", recordPart, fmt.Sprintf("the record was computed by calculation %d, this program is calculation %d, and they differ in %s; use the version that wrote it (%s). %s",
		other, qa.Calculation, qa.Count(len(d), "value", "values"), orWord(rec.Result.Software.Version, "see the sheet Method"), strings.Join(d[:min(told, len(d))], ". ")))
}

// rank puts verdicts before all other differences.
func rank(difference string) int {
	if path, _, _ := strings.Cut(difference, ":"); path == "verdict" || strings.HasSuffix(path, ".verdict") {
		return 0
	}
	return 1
}

func (v *Verification) disagree(code, part, text string) {
	v.Agrees = false
	v.Differences = append(v.Differences, text)
	if !v.has(code) {
		v.reason(code, part, text)
	}
}

// meanings finds the required meanings that no valid signature has, and meanings that share a key.
func (v *Verification) meanings(report opcsign.Report, rec qa.Record) {
	signed, keys := map[string]bool{}, map[string]string{}
	expected := map[string]string{}
	for _, q := range rec.Plan.RequiredMeanings() {
		expected[q.Meaning] = q.Name
	}
	for _, s := range report.Signatures {
		if !s.Valid || s.Certificate == nil {
			continue
		}
		signed[s.Statement.Meaning] = true
		if name := expected[s.Statement.Meaning]; name != "" && !strings.EqualFold(name, s.Statement.Name) {
			v.reason("signer-expected", s.Part, fmt.Sprintf("found it signed as %s by %s, and the record expects %s; ask whether the one may sign for the other", s.Statement.Meaning, s.Statement.Name, name))
		}
		key := string(s.Certificate.RawSubjectPublicKeyInfo)
		if before, ok := keys[key]; ok && before != s.Statement.Meaning {
			v.reason("same-signer", s.Part, fmt.Sprintf("%s and %s were signed with the same key; a complete record needs different persons", before, s.Statement.Meaning))
		}
		keys[key] = s.Statement.Meaning
	}
	for _, q := range rec.Plan.RequiredMeanings() {
		if !signed[q.Meaning] {
			v.MissingMeanings = append(v.MissingMeanings, q.Meaning)
		}
	}
}

// AllTrusted says whether there is a signature and every signer is trusted.
func (v Verification) AllTrusted() bool {
	for _, s := range v.Signatures {
		if s.Trusted == nil || !*s.Trusted {
			return false
		}
	}
	return len(v.Signatures) > 0
}

// Headline is the state in words. Without trust it says that who signed is not established: anyone can make a certificate
// with any name in it.
func (v Verification) Headline() string {
	h := string(v.State)
	if v.State != Intact && v.State != Incomplete {
		return h
	}
	if v.ComputedOtherwise() {
		h += "; this version computes another result"
	}
	if !v.AllTrusted() {
		h += "; who signed is not established"
	}
	return h
}

// ComputedOtherwise says that this version's calculation gives another result than the one that made the record.
func (v Verification) ComputedOtherwise() bool { return v.has("calculation-version") }

// Agreement says what the recomputation and the sheets gave.
func (v Verification) Agreement() string {
	of := "and its sheets"
	if v.has("layout-version") {
		of = "and the figures on its sheets; an earlier version wrote them, and their wording was not compared"
	}
	switch {
	case !v.Agrees:
		return "the result computed again, or the sheets, DISAGREE with the record"
	case v.ComputedOtherwise():
		return "computed again by this version the result DIFFERS from the record, which another calculation made; the record agrees with itself " + of
	}
	return "the result computed again agrees with the record " + of
}

// Signers are the identities, without their keys, that signed a record.
func Signers(pkg []byte) ([]identity.Identity, error) {
	report, err := opcsign.Verify(pkg, nil)
	if err != nil {
		return nil, fmt.Errorf("signatures: %w", err)
	}
	var out []identity.Identity
	for _, s := range report.Signatures {
		if s.Certificate != nil {
			out = append(out, identity.Identity{Chain: s.Chain})
		}
	}
	return out, nil
}
