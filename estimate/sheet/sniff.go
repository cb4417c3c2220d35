package sheet

import (
	"bytes"
	"fmt"
	"mime"
	"strings"
)

type format uint8

const (
	formatCSV format = iota
	formatXLSX
)

func (f format) String() string {
	if f == formatXLSX {
		return "an XLSX workbook"
	}
	return "a CSV file"
}

// wanted is the remedy that suits every file of another format.
const wanted = "post an XLSX workbook or a CSV file in UTF-8"

// foreign lists beginnings of files of other formats.
var foreign = []struct{ magic, what string }{
	{"%PDF-", "is a PDF document"},
	{"{\\rtf", "is an RTF document"},
	{"\x1f\x8b", "is compressed with gzip"},
	{"\x89PNG", "is a picture"},
	{"\xff\xd8\xff", "is a picture"},
	{"GIF8", "is a picture"},
	{"Rar!", "is a RAR archive"},
	{"7z\xbc\xaf", "is a 7z archive"},
	{"SQLite format 3", "is a database"},
}

// sniff tells the format by content, or refuses it by name.
func sniff(data []byte) (format, error) {
	if len(bytes.TrimSpace(data)) == 0 {
		return 0, malformed("is empty", wanted)
	}
	for _, f := range foreign {
		if bytes.HasPrefix(data, []byte(f.magic)) {
			return 0, unsupported(f.what, wanted)
		}
	}
	if bytes.HasPrefix(data, []byte("\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1")) {
		return 0, compoundFile(data)
	}
	if bytes.HasPrefix(data, []byte("PK\x03\x04")) || bytes.HasPrefix(data, []byte("PK\x05\x06")) {
		return formatXLSX, nil
	}
	return formatCSV, sniffText(data)
}

// compoundFile tells an encrypted workbook from one of the old format. Both are
// OLE compound files; their directory holds stream names in UTF-16.
func compoundFile(data []byte) error {
	if bytes.Contains(data, []byte("E\x00n\x00c\x00r\x00y\x00p\x00t\x00e\x00d\x00P\x00a\x00c\x00k\x00a\x00g\x00e\x00")) {
		return unsupported("is encrypted", "take its password off and post it again")
	}
	return unsupported("is a workbook of the old .xls format, or another old office document", saveAgain)
}

func sniffText(data []byte) error {
	head := bytes.ToLower(bytes.TrimLeft(data[:min(len(data), 512)], "\xef\xbb\xbf \t\r\n"))
	switch {
	case bytes.HasPrefix(head, []byte("<")):
		return unsupported("is an HTML or XML text", saveAgain)
	case bytes.HasPrefix(head, []byte("{")), bytes.HasPrefix(head, []byte("[{")):
		return unsupported("is a JSON text", wanted)
	}
	return nil
}

// declared lists the media types under which each format may come. The old
// spreadsheet type is what some browsers send for CSV files as well.
var declared = map[string]string{
	"":                             "both",
	"application/octet-stream":     "both",
	"binary/octet-stream":          "both",
	"application/vnd.ms-excel":     "both",
	"text/csv":                     "csv",
	"application/csv":              "csv",
	"text/plain":                   "csv",
	"text/tab-separated-values":    "csv",
	"application/zip":              "xlsx",
	"application/x-zip-compressed": "xlsx",
	MediaTypeXLSX:                  "xlsx",
	"application/vnd.ms-excel.sheet.macroenabled.12": "xlsx",
}

// The registered media types of the two formats (RFC 7111; IANA register).
const (
	MediaTypeXLSX = "application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
	MediaTypeCSV  = "text/csv"
)

// checkDeclared refuses a declared media type that contradicts the content.
func (f format) checkDeclared(contentType string) error {
	media := contentType
	if parsed, _, err := mime.ParseMediaType(contentType); err == nil {
		media = parsed
	}
	media = strings.ToLower(strings.TrimSpace(media))
	is, known := declared[media]
	if !known {
		return unsupported(fmt.Sprintf("is declared as %q", media), "declare "+MediaTypeXLSX+" or "+MediaTypeCSV)
	}
	if is == "csv" && f != formatCSV || is == "xlsx" && f != formatXLSX {
		return unsupported(fmt.Sprintf("is declared as %q but is %v", media, f), "declare it as what it is")
	}
	return nil
}
