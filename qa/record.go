package qa

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"time"
)

// RecordFormat names the format of a Record as it is embedded in the workbook.
const RecordFormat = "lotpair.record/1"

// Record is everything about one comparison. It is what the signed workbook carries and what verification recomputes.
type Record struct {
	Format   string   `json:"format"`
	Plan     Plan     `json:"plan"`
	PlanFile File     `json:"plan_file"` // the plan as a file: name, digest, size
	Readings Readings `json:"readings"`
	Result   Result   `json:"result"`
	Trail    Trail    `json:"trail"`
	Signer   *Signer  `json:"signer,omitempty"` // who signs first; nil until then

	Supersedes []Superseded `json:"supersedes,omitempty"` // all earlier records in whose place this one stands, oldest first
}

// Signer is the first signer as printed in the workbook; later signatures are stated by the signatures themselves.
type Signer struct {
	Name         string    `json:"name"`
	Title        string    `json:"title,omitempty"`
	Organization string    `json:"organization,omitempty"`
	Meaning      string    `json:"meaning"`
	Reason       string    `json:"reason,omitempty"`
	Disposition  string    `json:"disposition,omitempty"`
	Time         time.Time `json:"time"`
	Fingerprint  string    `json:"fingerprint"`           // SHA-256 of the certificate
	Certificate  string    `json:"certificate,omitempty"` // its issuer, serial number, validity and algorithm in words
}

// NewRecord ties plan, readings and result together and opens the trail with the acts that led to them.
func NewRecord(plan Plan, planFile File, readings Readings, result Result, who string, when time.Time) Record {
	trail := Trail{}.
		With(when, who, "opened the plan", planFile.Name, "sha-256 "+planFile.SHA256).
		With(when, who, "opened the readings", fileNames(readings), "").
		With(when, who, "compared", string(result.Verdict), "")
	return Record{Format: RecordFormat, Plan: plan, PlanFile: planFile, Readings: readings, Result: result, Trail: trail}
}

func fileNames(r Readings) string {
	names, seen := "", map[string]bool{}
	for _, l := range []Lot{r.Reference, r.Candidate} {
		for _, f := range l.Files {
			if seen[f.Name] {
				continue
			}
			seen[f.Name] = true
			if names != "" {
				names += ", "
			}
			names += f.Name
		}
	}
	return names
}

// Recompute runs the comparison again from the record's own plan and readings.
func (r Record) Recompute() (Result, error) {
	return Compare(r.Plan, r.Readings, Run{Software: r.Result.Software, Seal: r.Result.Seal, Attempts: r.Result.Attempts})
}

// SealDigest is the SHA-256 of what a seal covers: criterion, characteristics and performance as canonical JSON (fixed field
// order, no white space), in lower-case hexadecimal. Title, files, layout and exclusions are not covered (contract: plan).
func (p Plan) SealDigest() string {
	text, err := json.Marshal(struct {
		Criterion       Criterion        `json:"criterion"`
		Characteristics []Characteristic `json:"characteristic"`
		Performance     *PerformancePlan `json:"performance"`
	}{p.Criterion, p.Characteristics, p.Performance})
	if err != nil { // only a non-finite number can do this, and Validate refuses those
		return ""
	}
	sum := sha256.Sum256(text)
	return hex.EncodeToString(sum[:])
}
