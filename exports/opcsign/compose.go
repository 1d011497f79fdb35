package opcsign

import (
	"crypto"
	"crypto/x509"
	"encoding/base64"
	"fmt"
	"strings"
)

// composer writes a signature part. Default namespace is XML signature's on the root; Object and SignedInfo declare
// nothing, which keeps the canonical form of the parts that are digested plain.
type composer struct {
	n      int // of sigN.xml
	suffix string
	w      strings.Builder
}

// id makes an Id that no other signature of the package has. The standard prescribes that of the package object, and
// office programs look for those of the signature and the office object, so these three stay.
func (c *composer) id(name string) string { return name + c.suffix }

// put writes markup with values; the values are escaped for text and for attributes in double quotes alike.
func (c *composer) put(markup string, values ...string) {
	args := make([]any, len(values))
	for i, v := range values {
		args[i] = strings.ReplaceAll(textEscape.Replace(v), `"`, "&quot;")
	}
	fmt.Fprintf(&c.w, markup, args...)
}

func (c *composer) take() string {
	s := c.w.String()
	c.w.Reset()
	return s
}

func b64(b []byte) string { return base64.StdEncoding.EncodeToString(b) }

// compose makes the signature part for the package as it is.
func (c *container) compose(n int, key crypto.Signer, chain []*x509.Certificate, st Statement, before []previous) ([]byte, error) {
	w := &composer{n: n}
	if n > 1 {
		w.suffix = fmt.Sprint(n)
	}
	if err := c.putPackageObject(w, st); err != nil {
		return nil, err
	}
	w.putOffice(st)
	w.putStatement(st, before)
	w.putProperties(chain[0], st)
	objects := w.take()

	w.put("<KeyInfo><X509Data>")
	for _, cert := range chain {
		w.put("<X509Certificate>%s</X509Certificate>", b64(cert.Raw))
	}
	w.put("</X509Data></KeyInfo>")
	tail := w.take() + objects + "</Signature>"

	head := `<?xml version="1.0" encoding="UTF-8" standalone="no"?>` + "\n" + `<Signature xmlns="` + dsSpace + `" Id="idPackageSignature">`
	doc, err := parseXML([]byte(head + tail))
	if err != nil {
		return nil, err
	}
	w.putSignedInfo(doc.root, chain[0])
	info := w.take()
	if doc, err = parseXML([]byte(head + info + tail)); err != nil {
		return nil, err
	}
	value, err := signValue(key, sum(crypto.SHA256, canonical(doc.root.kids[0])))
	if err != nil {
		return nil, err
	}
	return []byte(head + info + "<SignatureValue>" + b64(value) + "</SignatureValue>" + tail), nil
}

// putSignedInfo writes what is signed: the digests of the objects of the signature as composed so far.
func (c *composer) putSignedInfo(root *node, leaf *x509.Certificate) {
	kind, _, _ := keyProblem(leaf.PublicKey)
	c.put(`<SignedInfo><CanonicalizationMethod Algorithm="%s"/><SignatureMethod Algorithm="%s"/>`, c14n, moreSpace+kind+"-sha256")
	refs := []struct{ id, typ, transforms string }{
		{packageID, dsSpace + "Object", ""},
		{"idOfficeObject", dsSpace + "Object", ""},
		{c.id("idRecordStatement"), dsSpace + "Object", ""},
		{c.id("idSignedProperties"), "http://uri.etsi.org/01903#SignedProperties", `<Transforms><Transform Algorithm="` + c14n + `"/></Transforms>`},
	}
	ids := map[string]*node{}
	root.walk(func(n *node) {
		if id, ok := n.attr("Id"); ok {
			ids[id] = n
		}
	})
	for _, r := range refs {
		c.put(`<Reference Type="%s" URI="#%s">`, r.typ, r.id)
		c.w.WriteString(r.transforms)
		c.putDigest(sum(crypto.SHA256, canonical(ids[r.id])))
		c.put("</Reference>")
	}
	c.put("</SignedInfo>")
}

func (c *composer) putDigest(d []byte) {
	c.put(`<DigestMethod Algorithm="%s"/><DigestValue>%s</DigestValue>`, sha256URI, b64(d))
}

// putPackageObject writes the manifest of all parts and relationships, and the time.
func (c *container) putPackageObject(w *composer, st Statement) error {
	w.put(`<Object Id="%s"><Manifest>`, packageID)
	for _, p := range c.parts() {
		if c.apart[p] {
			continue
		}
		w.put(`<Reference URI="%s?ContentType=%s">`, p, c.types.of(p))
		if relsSource(p) != "" {
			w.put(`<Transforms><Transform Algorithm="%s">`, relsFilter)
			for _, r := range c.rels[p] {
				w.put(`<mdssi:RelationshipReference xmlns:mdssi="%s" SourceId="%s"/>`, opcSpace, r.id)
			}
			w.put(`</Transform><Transform Algorithm="%s"/></Transforms>`, c14n)
			w.putDigest(sum(crypto.SHA256, transformed(c.rels[p])))
		} else {
			d, err := c.digest(p, crypto.SHA256)
			if err != nil {
				return err
			}
			w.putDigest(d)
		}
		w.put("</Reference>")
	}
	w.put(`</Manifest><SignatureProperties><SignatureProperty Id="%s" Target="#idPackageSignature"><mdssi:SignatureTime xmlns:mdssi="%s">`, w.id("idSignatureTime"), opcSpace)
	w.put(`<mdssi:Format>YYYY-MM-DDThh:mm:ssTZD</mdssi:Format><mdssi:Value>%s</mdssi:Value></mdssi:SignatureTime></SignatureProperty></SignatureProperties></Object>`, st.Time.UTC().Format(timeForm))
	return nil
}

// putOffice writes the properties that office programs show. Their fields on a screen and on versions are required by
// the schema and say nothing here.
func (c *composer) putOffice(st Statement) {
	c.put(`<Object Id="idOfficeObject"><SignatureProperties><SignatureProperty Id="%s" Target="#idPackageSignature"><SignatureInfoV1 xmlns="%s">`, c.id("idOfficeV1Details"), officeSpace)
	c.put(`<SetupID></SetupID><SignatureText></SignatureText><SignatureImage></SignatureImage><SignatureComments>%s</SignatureComments>`, comments(st))
	c.put(`<WindowsVersion>0.0</WindowsVersion><OfficeVersion>0.0</OfficeVersion><ApplicationVersion>0.0</ApplicationVersion><Monitors>1</Monitors>` +
		`<HorizontalResolution>1024</HorizontalResolution><VerticalResolution>768</VerticalResolution><ColorDepth>32</ColorDepth>` +
		`<SignatureProviderId>{00000000-0000-0000-0000-000000000000}</SignatureProviderId><SignatureProviderUrl></SignatureProviderUrl>` +
		`<SignatureProviderDetails>9</SignatureProviderDetails><SignatureType>1</SignatureType></SignatureInfoV1></SignatureProperty></SignatureProperties></Object>`)
}

// putStatement writes our own statement: everything, with the local time, and the earlier signatures.
func (c *composer) putStatement(st Statement, before []previous) {
	c.put(`<Object Id="%s"><SignatureProperties><SignatureProperty Id="%s" Target="#idPackageSignature"><lp:Statement xmlns:lp="%s">`, c.id("idRecordStatement"), c.id("idRecordStatementProperty"), statementSpace)
	c.put("<lp:Name>%s</lp:Name><lp:Title>%s</lp:Title><lp:Organization>%s</lp:Organization>", st.Name, st.Title, st.Organization)
	c.put("<lp:Meaning>%s</lp:Meaning><lp:Reason>%s</lp:Reason><lp:Disposition>%s</lp:Disposition>", st.Meaning, st.Reason, st.Disposition)
	c.put("<lp:Time>%s</lp:Time><lp:Zone>%s</lp:Zone>", st.Time.Format(timeForm), st.Zone)
	for _, p := range before {
		c.put(`<lp:Previous Part="%s" Digest="%s"/>`, p.part, b64(p.digest))
	}
	c.put("</lp:Statement></SignatureProperty></SignatureProperties></Object>")
}

// putProperties writes the XAdES properties (ETSI TS 101 903 v1.3.2): certificate, time, role and commitment.
func (c *composer) putProperties(leaf *x509.Certificate, st Statement) {
	c.put(`<Object><xd:QualifyingProperties xmlns:xd="%s" Target="#idPackageSignature"><xd:SignedProperties Id="%s"><xd:SignedSignatureProperties>`, xadesSpace, c.id("idSignedProperties"))
	c.put("<xd:SigningTime>%s</xd:SigningTime><xd:SigningCertificate><xd:Cert><xd:CertDigest>", st.Time.UTC().Format(timeForm))
	c.putDigest(sum(crypto.SHA256, leaf.Raw))
	c.put("</xd:CertDigest><xd:IssuerSerial><X509IssuerName>%s</X509IssuerName><X509SerialNumber>%s</X509SerialNumber></xd:IssuerSerial></xd:Cert></xd:SigningCertificate>", leaf.Issuer.String(), leaf.SerialNumber.String())
	c.put("<xd:SignaturePolicyIdentifier><xd:SignaturePolicyImplied/></xd:SignaturePolicyIdentifier>")
	if st.Title != "" {
		c.put("<xd:SignerRole><xd:ClaimedRoles><xd:ClaimedRole>%s</xd:ClaimedRole></xd:ClaimedRoles></xd:SignerRole>", st.Title)
	}
	proof := "http://uri.etsi.org/01903/v1.2.2#ProofOfApproval"
	if st.Meaning == "prepared" {
		proof = "http://uri.etsi.org/01903/v1.2.2#ProofOfCreation"
	}
	c.put("</xd:SignedSignatureProperties><xd:SignedDataObjectProperties><xd:CommitmentTypeIndication><xd:CommitmentTypeId><xd:Identifier>%s</xd:Identifier><xd:Description>%s</xd:Description></xd:CommitmentTypeId>", proof, st.Meaning)
	c.put("<xd:AllSignedDataObjects/></xd:CommitmentTypeIndication></xd:SignedDataObjectProperties></xd:SignedProperties></xd:QualifyingProperties></Object>")
}
