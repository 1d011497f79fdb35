package opcsign

// The catalogue of reason codes. They are stable: programs and records may hold them. A code is never given another
// meaning; new ones are added.
const (
	// The archive.
	codeNotPackage   = "not-a-package"      // no zip archive, or without content types or package relationships
	codeTooLarge     = "too-large"          // the file or a part exceeds a bound
	codeZipComment   = "zip-comment"        // a comment on the archive or on an entry
	codeZipTrailing  = "zip-trailing"       // bytes after the archive
	codeZipGap       = "zip-gap"            // bytes that belong to no entry, or entries that overlap
	codeZipMismatch  = "zip-mismatch"       // local header and directory disagree
	codeZipDuplicate = "zip-duplicate-name" // two entries of equal name, case apart
	codeZipName      = "zip-name"           // a name that is no part name
	codeZipMethod    = "zip-method"         // encrypted, or packed otherwise than by deflate
	codeDamaged      = "part-damaged"       // a part cannot be unpacked, or its check sum differs

	// The package.
	codeContentForm      = "content-types-form"        // [Content_Types].xml is not what the standard says
	codeContentDuplicate = "content-type-duplicate"    // two rules for one part or one ending
	codeContentUnused    = "content-type-unused"       // a rule for no part of the package
	codeContentMissing   = "content-type-missing"      // a part without a content type
	codeRelForm          = "relationships-form"        // a .rels part is not what the standard says
	codeRelDuplicate     = "relationship-duplicate-id" // two relationships of one Id in one part
	codeRelOrphan        = "relationships-orphan"      // a .rels part without its source part
	codeOrigin           = "origin"                    // no, several or a misplaced or filled signature origin
	codeStray            = "signature-stray"           // something in _xmlsignatures that is no signature of the origin
	codeNoSignature      = "signature-missing"         // a signature origin without any signature
	codeTarget           = "relationship-target"       // a link that common verifiers cannot digest; only when signing

	// The form of a signature.
	codeXML          = "xml"                  // not well-formed, or not UTF-8
	codeDTD          = "dtd"                  // a document type declaration
	codeComment      = "comment-in-signature" // a comment
	codeInstruction  = "instruction-in-signature"
	codeForm         = "signature-form" // an element, attribute or text where the standard has none
	codeNested       = "nested-signature"
	codeDuplicateID  = "duplicate-id"
	codeReference    = "reference"           // a reference that names nothing signable in this signature
	codeTwice        = "reference-duplicate" // a thing referenced twice
	codeUnreferenced = "unreferenced-object" // an Object that is not signed
	codePackage      = "package-object"      // no, or more than one, or a misplaced package object
	codeTransform    = "transform"           // another transform or canonicalisation than those the standard asks for
	codeWeak         = "weak-algorithm"      // SHA-1, or an RSA key below 2048 bits
	codeAlgorithm    = "algorithm"           // another algorithm, or one that does not go with the key

	// What is signed.
	codeDigest       = "digest-mismatch"      // content is not as it was signed
	codeValue        = "signature-value"      // the signature does not verify with the certificate's key
	codePartMissing  = "part-missing"         // a signed part is not there
	codeType         = "content-type-changed" // a signed part has another content type now
	codeRelMissing   = "relationship-missing" // a signed relationship is not there
	codeUnsigned     = "unsigned-part"        // a part that this signature leaves out
	codeRelUnsigned  = "relationship-unsigned"
	codePrevMissing  = "previous-missing"     // an earlier signature that this one names is gone
	codePrevChanged  = "previous-changed"     // an earlier signature is not the one that this one names
	codePrevUnlisted = "previous-unlisted"    // an earlier signature that this one does not name
	codeStatement    = "statement-missing"    // no signed statement, or more than one
	codeStatementBad = "statement-form"       // a statement that cannot be read
	codeDiffers      = "statement-differs"    // statement, certificate and the fields that office programs show disagree
	codeCertificate  = "certificate"          // a certificate that cannot be read or does not belong to the chain
	codeMismatch     = "certificate-mismatch" // the certificate is not the one that was signed
	codeCertTime     = "certificate-time"     // signed outside the certificate's validity
)

// coverage are the codes that leave a signature valid for what it names.
var coverage = map[string]bool{codeUnsigned: true, codeRelUnsigned: true}
