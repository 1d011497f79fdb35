package exports

import (
	"encoding/json"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"time"

	"lotpair/exports/identity"
	"lotpair/exports/opcsign"
	"lotpair/qa"
)

// SealFormat names the format of a seal as it is embedded in its workbook.
const SealFormat = "lotpair.seal/1"

// ErrNoSeal says that a workbook carries no seal.
var ErrNoSeal = errors.New("seal: found none in this workbook, want one written by lotpair-cli seal; name that file")

// Sealed is a criterion as it was fixed: the plan, the digest of what the seal covers, when and by whom.
type Sealed struct {
	Plan     qa.Plan     `json:"plan"`
	PlanFile qa.File     `json:"plan_file"`
	Digest   string      `json:"digest"`
	Time     time.Time   `json:"time"`
	Readings string      `json:"readings"` // unopened, opened or unknown at that time
	Who      string      `json:"who"`
	Software qa.Software `json:"software"`
	Signer   *qa.Signer  `json:"signer,omitempty"` // who signed first; nil where nobody did
}

// Seal fixes the criterion of a plan at the time when. readings says whether the readings had been opened: unopened, opened or
// unknown.
func Seal(plan qa.Plan, file qa.File, software qa.Software, readings, who string, when time.Time) Sealed {
	return Sealed{Plan: plan, PlanFile: file, Digest: plan.SealDigest(), Time: when.Truncate(time.Second), Readings: readings, Who: who, Software: software}
}

// Result is what a result says of the seal.
func (s Sealed) Result() qa.Seal {
	return qa.Seal{Digest: s.Digest, Time: s.Time.Format(time.RFC3339), Readings: s.Readings}
}

// Trail is a record's trail with the act of sealing before all others.
func (s Sealed) Trail(after qa.Trail, file qa.File) qa.Trail {
	word := "; the seal is not signed"
	if g := s.Signer; g != nil {
		word = "; signed as " + g.Meaning + " by " + g.Name + ", certificate sha-256 " + g.Fingerprint
	}
	t := qa.Trail{}.With(s.Time, s.Who, "sealed the criterion", file.Name, "sha-256 "+file.SHA256+word)
	for _, a := range after {
		t = t.With(a.Time, a.Who, a.What, a.On, a.Why)
	}
	return t
}

// Workbook writes the seal as an .xlsx package: one sheet that states the criterion, and the plan as custom XML. The same seal
// gives the same bytes.
func (s Sealed) Workbook() ([]byte, error) {
	return s.book().bytes()
}

func (s Sealed) book() book {
	b := book{title: s.Plan.Title, sheets: s.sheets(), record: s.encode, draft: s.Signer == nil}
	b.foot = footerText("Criterion of "+orWord(s.Plan.Title, "a comparison"), s.Plan.Supports) + "\nCriterion " + shortDigest(s.Digest)
	return b
}

// SignSeal writes a seal's workbook with its first signer and signs it.
func SignSeal(s Sealed, id identity.Identity, st opcsign.Statement) ([]byte, error) {
	if !slices.Contains(signMeanings, st.Meaning) {
		return nil, fmt.Errorf("%w, found %q", ErrMeaning, st.Meaning)
	}
	fill(&st, id)
	s.Signer = signerOf(id, st)
	pkg, err := s.Workbook()
	if err != nil {
		return nil, err
	}
	out, err := opcsign.Sign(pkg, id.Key, id.Chain, st)
	if err != nil {
		return nil, fmt.Errorf("signature: %w", err)
	}
	return out, nil
}

func (s Sealed) encode(w io.Writer) error {
	b := &recordWriter{to: w}
	b.WriteString(xml.Header)
	fmt.Fprintf(b, `<record xmlns="%s" format="%s">`, recordNamespace, SealFormat)
	b.json("seal", s)
	b.layout()
	b.WriteString("</record>")
	b.flush()
	return b.err
}

// ReadSeal takes the seal out of a workbook. It checks nothing: Verify does.
func ReadSeal(pkg []byte) (Sealed, error) {
	s, _, err := readSeal(pkg)
	return s, err
}

// readSeal gives the seal and the layout of its workbook.
func readSeal(pkg []byte) (Sealed, int, error) {
	r, _, err := opcsign.OpenPart(pkg, recordPart)
	if err != nil {
		return Sealed{}, 0, fmt.Errorf("%w (%w)", ErrNoSeal, err)
	}
	var x struct {
		XMLName xml.Name `xml:"urn:lotpair:record:1 record"`
		Seal    string   `xml:"seal"`
		Layout  int      `xml:"layout"`
	}
	// A record may hold a million readings: it is not read to its end to see that it is no seal.
	d := xml.NewDecoder(r)
	root := rootOf(d)
	if format := attribute(root, "format"); format != SealFormat {
		return Sealed{}, 0, fmt.Errorf("%w (found the format %q)", ErrNoSeal, format)
	}
	err = d.DecodeElement(&x, &root)
	if err == nil {
		_, err = io.Copy(io.Discard, r) // the part is whole
	}
	if err != nil {
		return Sealed{}, 0, fmt.Errorf("%w (%w)", ErrNoSeal, err)
	}
	var s Sealed
	if err := json.Unmarshal([]byte(x.Seal), &s); err != nil {
		return Sealed{}, 0, fmt.Errorf("seal %s: %w", recordPart, err)
	}
	return s, x.Layout, nil
}

// rootOf is the first element of a document, or one without a name.
func rootOf(d *xml.Decoder) xml.StartElement {
	for {
		t, err := d.Token()
		if err != nil {
			return xml.StartElement{}
		}
		if e, ok := t.(xml.StartElement); ok {
			return e
		}
	}
}

// SealDifferences lists where a plan departs from a sealed one, by the keys of the plan file: what the seal covers and nothing
// else. It is empty exactly where the digests are equal.
func SealDifferences(sealed, plan qa.Plan) []string {
	var out []string
	walkKeys("", coveredBy(sealed), coveredBy(plan), func(key string, was, is any) {
		out = append(out, fmt.Sprintf("%s: sealed %s, the plan has %s", key, short(was), short(is)))
	})
	return out
}

// coveredBy is what a seal covers, as plain JSON values (contract: plan, "The seal").
func coveredBy(p qa.Plan) map[string]any {
	out := map[string]any{}
	// What Validate let through can be written as JSON and read again.
	b, err := json.Marshal(map[string]any{"criterion": p.Criterion, "characteristic": p.Characteristics, "performance": p.Performance})
	if err == nil {
		err = json.Unmarshal(b, &out)
	}
	if err != nil {
		out["plan"] = err.Error()
	}
	return out
}

func walkKeys(key string, was, is any, say func(key string, was, is any)) {
	switch x := was.(type) {
	case map[string]any:
		if y, ok := is.(map[string]any); ok {
			for _, k := range keys(x, y) {
				walkKeys(join(key, k), x[k], y[k], say)
			}
			return
		}
	case []any:
		if y, ok := is.([]any); ok && len(x) == len(y) {
			for i := range x {
				walkKeys(fmt.Sprintf("%s %d%s", key, i+1, named(x[i], y[i])), x[i], y[i], say)
			}
			return
		}
		if y, ok := is.([]any); ok {
			say(key, nameList(x), nameList(y))
			return
		}
	default:
		if was == is {
			return
		}
	}
	say(key, was, is)
}

// named is the name of a characteristic in brackets, where both have the same.
func named(a, b any) string {
	x, ok := a.(map[string]any)
	y, ok2 := b.(map[string]any)
	if name, is := x["name"].(string); ok && ok2 && is && y["name"] == name {
		return " (" + name + ")"
	}
	return ""
}

func nameList(list []any) string {
	var names []string
	for _, v := range list {
		if m, ok := v.(map[string]any); ok {
			names = append(names, fmt.Sprint(m["name"]))
		} else {
			names = append(names, fmt.Sprint(v))
		}
	}
	return fmt.Sprintf("%d: %s", len(list), strings.Join(names, ", "))
}
