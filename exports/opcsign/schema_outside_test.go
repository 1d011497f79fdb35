//go:build outside

package opcsign

import (
	"fmt"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"lotpair/exports/identity"
)

// TestOutsideSchema has xmllint hold every signature part against the published schema of XML signatures, and what in it is of
// the package and office namespaces against the standards' words (testdata/schema). What is out of order is refused.
func TestOutsideSchema(t *testing.T) {
	schema, err := filepath.Abs(filepath.Join("testdata", "schema", "signature.xsd"))
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	validates := func(name, part string) (bool, string) {
		file := filepath.Join(dir, name+".xml")
		write(t, file, []byte(part))
		out, err := exec.Command("xmllint", "--nonet", "--noout", "--schema", schema, file).CombinedOutput()
		return err == nil && strings.Contains(string(out), "validates"), string(out)
	}
	parts := 0
	for _, ids := range [][]identity.Identity{
		{key(t, "prepared")},
		{rsaIdentity(t)},
		{key(t, "reviewed")},
		{key(t, "prepared"), key(t, "reviewed"), key(t, "approved")},
	} {
		b := workbook(t)
		for i, id := range ids {
			st := statement(id, people[i%3])
			st.Reason = strings.Repeat("<reason & \"so on\"> ", 20*i) // cut where office programs show it
			var err error
			if b, err = Sign(b, id.Key, id.Chain, st); err != nil {
				t.Fatal(err)
			}
		}
		p := takeApart(t, b)
		for i := range ids {
			part := fmt.Sprintf("_xmlsignatures/sig%d.xml", i+1)
			parts++
			if ok, out := validates(fmt.Sprintf("part%d", parts), p.get(part)); !ok {
				t.Errorf("%d signatures, %s: %s", len(ids), part, out)
			}
		}
	}
	t.Logf("%d signature parts are of the schema's form", parts)

	good := takeApart(t, signed(t, 1)).get(sig1)
	for _, c := range []struct{ name, old, by string }{
		{"no reference", "<SignatureMethod", "<Reference/><SignatureMethod"},
		{"value out of place", "<SignedInfo>", "<SignatureValue>AAAA</SignatureValue><SignedInfo>"},
		{"digest no base64", "<DigestValue>", "<DigestValue>A"},
		{"property without target", ` Target="#idPackageSignature"`, ""},
		{"an Id twice", `Id="idOfficeObject"`, `Id="idPackageObject"`},
		{"time of another form", "YYYY-MM-DDThh:mm:ssTZD", "DD.MM.YYYY"},
		{"time that is none", "<mdssi:Value>2", "<mdssi:Value>x2"},
		{"relationship without its id", " SourceId=", " Source="},
		{"comment too long", "<SignatureComments>", "<SignatureComments>" + strings.Repeat("x", 256)},
		{"office fields out of order", "<SetupID></SetupID><SignatureText></SignatureText>", "<SignatureText></SignatureText><SetupID></SetupID>"},
	} {
		bad := strings.Replace(good, c.old, c.by, 1)
		if bad == good {
			t.Errorf("%s: found nothing to change", c.name)
		}
		if ok, _ := validates("bad", bad); ok {
			t.Errorf("%s: xmllint lets it pass", c.name)
		}
	}
}
