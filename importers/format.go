package importers

import (
	"bytes"
	"path"
	"strings"
)

// content is what a file holds by its first bytes, whatever its name.
type content struct {
	kind  contentKind
	found string // in words
	do    string // for what is not read
}

type contentKind int

const (
	unreadable contentKind = iota
	workbookContent
	odsContent
	textContent
)

// endings are what each kind that is read is called.
var endings = map[contentKind]string{workbookContent: ".xlsx", odsContent: ".ods", textContent: ".csv or .txt"}

const binaryFile = "a binary file of a kind that is not read"

const saveAnew = "open it in the spreadsheet program and save it as .xlsx"

// signatures are the first bytes of files that hold no table that is read here (each format's own specification; the archive
// formats by their published magic numbers).
var signatures = []struct{ bytes, found, do string }{
	{"%PDF", "a PDF file", "export the readings as a table: .xlsx or .csv"},
	{"{\\rtf", "a text document (.rtf)", "save the table in it as .csv or .xlsx"},
	{"\x1f\x8b", "a gzip archive", "unpack it and open the file inside"},
	{"7z\xbc\xaf\x27\x1c", "a 7-Zip archive", "unpack it and open the file inside"},
	{"Rar!\x1a\x07", "a RAR archive", "unpack it and open the file inside"},
	{"BZh", "a bzip2 archive", "unpack it and open the file inside"},
	{"\xfd7zXZ", "an xz archive", "unpack it and open the file inside"},
	{"\x28\xb5\x2f\xfd", "a Zstandard archive", "unpack it and open the file inside"},
	{"\x89PNG", "a picture (.png)", "a picture holds no readings: open the file that it was made of"},
	{"\xff\xd8\xff", "a picture (.jpg)", "a picture holds no readings: open the file that it was made of"},
	{"GIF8", "a picture (.gif)", "a picture holds no readings: open the file that it was made of"},
	{"II*\x00", "a picture (.tif)", "a picture holds no readings: open the file that it was made of"},
	{"MM\x00*", "a picture (.tif)", "a picture holds no readings: open the file that it was made of"},
	{"SQLite format 3", "a database file", "export the readings as .csv or .xlsx"},
	{"MZ", "a program", "name the file with the readings"},
	{"\x7fELF", "a program", "name the file with the readings"},
	{"\x09\x00\x04\x00", "an old .xls file", saveAnew},
	{"\x09\x02\x06\x00", "an old .xls file", saveAnew},
	{"\x09\x04\x06\x00", "an old .xls file", saveAnew},
	{"\x09\x08", "an old .xls file", saveAnew},
}

// sniff says what a file holds. It looks at the beginning, and of archives at the names of their parts.
func sniff(data []byte) content {
	switch {
	case bytes.HasPrefix(data, []byte("PK\x03\x04")), bytes.HasPrefix(data, []byte("PK\x05\x06")):
		return sniffZip(data)
	case bytes.HasPrefix(data, []byte("\xd0\xcf\x11\xe0")):
		return sniffOLE(data)
	}
	for _, s := range signatures {
		if bytes.HasPrefix(data, []byte(s.bytes)) && (s.bytes != "MZ" && s.bytes != "BZh" && s.bytes != "GIF8" || bytes.IndexByte(data[:min(len(data), 512)], 0) >= 0) {
			return content{found: s.found, do: s.do}
		}
	}
	head := data[:min(len(data), 8<<10)]
	start := bytes.ToLower(bytes.TrimLeft(bytes.TrimPrefix(head, []byte("\xef\xbb\xbf")), " \t\r\n"))
	begins := func(texts ...string) bool {
		for _, s := range texts {
			if bytes.HasPrefix(start, []byte(s)) {
				return true
			}
		}
		return false
	}
	switch {
	case begins("<!doctype html", "<html", "<table", "<head", "<meta", "<body", "<style"):
		return content{found: "a web page", do: saveAnew}
	case begins("mime-version:", "from: <saved by"):
		return content{found: "a web archive", do: saveAnew}
	case begins("<?xml", "<workbook", "<office:document"):
		switch {
		case bytes.Contains(start, []byte("urn:schemas-microsoft-com:office:spreadsheet")):
			return content{found: "an XML spreadsheet of 2003", do: saveAnew}
		case bytes.Contains(start, []byte("office:document")):
			return content{found: "a flat OpenDocument file (.fods)", do: "save it as .ods or .xlsx"}
		case bytes.Contains(start, []byte("<html")):
			return content{found: "a web page", do: saveAnew}
		}
		return content{found: "an XML file", do: "save the readings as .xlsx or .csv"}
	case begins("%!ps"):
		return content{found: "a printer file", do: "export the readings as a table: .xlsx or .csv"}
	case wideText(data) != "", bytes.HasPrefix(data, []byte("\xff\xfe")), bytes.HasPrefix(data, []byte("\xfe\xff")), bytes.IndexByte(head, 0) < 0:
		return content{kind: textContent, found: "a text file"}
	}
	return content{found: binaryFile, do: "save the readings as .xlsx, .ods or .csv"}
}

// sniffZip tells the kinds of zip packages apart by the names of their parts.
func sniffZip(data []byte) content {
	const odf = "mimetypeapplication/vnd.oasis.opendocument."
	if len(data) > 200 && string(data[30:30+len(odf)]) == odf {
		return content{kind: odsContent, found: "an OpenDocument file (.ods)"}
	}
	directory := data[max(0, len(data)-4<<20):] // the directory stands at the end
	has := func(name string) bool { return bytes.Contains(directory, []byte(name)) }
	switch {
	case has("xl/workbook.xml"):
	case has("xl/workbook.bin"):
		return content{found: "a binary workbook (.xlsb)", do: saveAnew}
	case has("word/document.xml"):
		return content{found: "a text document (.docx)", do: "copy its table into a spreadsheet and save that as .xlsx"}
	case has("ppt/presentation.xml"):
		return content{found: "a presentation (.pptx)", do: "open the file with the readings"}
	case has("Index/Document.iwa"), has("Index.zip"):
		return content{found: "a spreadsheet of Numbers", do: "export it as .xlsx"}
	case has("content.xml") && has("META-INF/manifest.xml"):
		return content{kind: odsContent, found: "an OpenDocument file (.ods)"}
	}
	return content{kind: workbookContent, found: "a zip file or workbook (.xlsx)"}
}

// sniffOLE tells the kinds of compound files apart by the names of their streams, which are UTF-16 (MS-CFB, 2.6.1).
func sniffOLE(data []byte) content {
	has := func(name string) bool {
		wide := make([]byte, 0, 2*len(name))
		for _, c := range []byte(name) {
			wide = append(wide, c, 0)
		}
		return bytes.Contains(data, wide)
	}
	switch {
	case has("EncryptedPackage"):
		return content{found: "a workbook that is encrypted with a password", do: "open it in the spreadsheet program and save it without a password"}
	case has("WordDocument"):
		return content{found: "an old text document (.doc)", do: "copy its table into a spreadsheet and save that as .xlsx"}
	}
	return content{found: "an old .xls (or password-protected) file", do: "this is an old .xls (or password-protected) file; save it as .xlsx: in the spreadsheet program choose Save as and the type .xlsx, without a password"}
}

// namedAs is the kind that a file's name claims, unreadable where it claims none that is read; known says that the ending is one
// of those that are refused for what they are.
func namedAs(name string) (kind contentKind, ending string) {
	ending = strings.ToLower(path.Ext(strings.ReplaceAll(name, `\`, "/")))
	switch ending {
	case ".xlsx", ".xlsm", ".xltx", ".xltm":
		return workbookContent, ending
	case ".ods", ".ots":
		return odsContent, ending
	case ".csv", ".tsv", ".txt":
		return textContent, ending
	}
	return unreadable, ending
}

// mislabelled are endings that claim what is not read; a file with one of them is refused whatever it holds.
var mislabelled = map[string]bool{".xls": true, ".xlsb": true, ".pdf": true, ".doc": true, ".docx": true, ".htm": true, ".html": true, ".xml": true, ".zip": true, ".fods": true}

// checkContent refuses what is not read, and a name that claims another kind than the file is.
func checkContent(name string, data []byte) (content, *FileError) {
	is := sniff(data)
	claims, ending := namedAs(name)
	want := "an .xlsx or .ods workbook or a text file"
	if claims != unreadable {
		want = map[contentKind]string{workbookContent: "an .xlsx workbook", odsContent: "an .ods spreadsheet", textContent: "text"}[claims] + " as its name says"
	}
	if is.found == binaryFile && claims == textContent { // what is wrong with the text is said with its line
		is = content{kind: textContent, found: "a text file"}
	}
	switch {
	case is.kind == unreadable:
		return is, fileError(name, "found %s, want %s; %s", is.found, want, is.do)
	case claims != unreadable && claims != is.kind:
		return is, fileError(name, "found %s, want %s; if it holds the readings, name it %s, or save it as .xlsx from the spreadsheet program", is.found, want, endings[is.kind])
	case mislabelled[ending]:
		return is, fileError(name, "found %s named %s, want %s under its own name; name it %s, or save it as .xlsx", is.found, ending, want, endings[is.kind])
	}
	return is, nil
}
