package inventory

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"strings"
	"unicode/utf16"
	"unicode/utf8"
)

// sheetRecord is one record of the text: its cells with the blanks about them taken off.
type sheetRecord struct {
	line  int
	cells []string
}

// cell is "" beyond the end.
func (r sheetRecord) cell(i int) string {
	if i < len(r.cells) {
		return r.cells[i]
	}
	return ""
}

// filled counts the cells that hold something.
func (r sheetRecord) filled() int {
	n := 0
	for _, c := range r.cells {
		if c != "" {
			n++
		}
	}
	return n
}

// windows are the letters of Windows-1252 at 0x80 to 0x9f; elsewhere it is Latin-1.
const windows = "€\u0081‚ƒ„…†‡ˆ‰Š‹Œ\u008dŽ\u008f\u0090‘’“”•–—˜™š›œ\u009džŸ"

// decodeSheet brings the bytes to text: UTF-8 or UTF-16 by its mark, UTF-8 where it is valid, else Windows-1252.
func decodeSheet(data []byte) (text string, encoding string) {
	switch {
	case bytes.HasPrefix(data, []byte("\xef\xbb\xbf")):
		data = data[3:]
	case bytes.HasPrefix(data, []byte("\xff\xfe")):
		return utf16Text(data[2:], 0), "UTF-16"
	case bytes.HasPrefix(data, []byte("\xfe\xff")):
		return utf16Text(data[2:], 1), "UTF-16"
	}
	if utf8.Valid(data) {
		return composed.Replace(string(data)), ""
	}
	letters := []rune(windows)
	var b strings.Builder
	for _, c := range data {
		if c >= 0x80 && c < 0xa0 {
			b.WriteRune(letters[c-0x80])
		} else {
			b.WriteRune(rune(c))
		}
	}
	return b.String(), "Windows-1252"
}

// composed puts letters and the dots over them together.
var composed = strings.NewReplacer("a\u0308", "ä", "o\u0308", "ö", "u\u0308", "ü", "A\u0308", "Ä", "O\u0308", "Ö", "U\u0308", "Ü")

// utf16Text reads UTF-16 with the low byte of each pair at the given place.
func utf16Text(data []byte, low int) string {
	pairs := make([]uint16, len(data)/2)
	for i := range pairs {
		pairs[i] = uint16(data[2*i+low]) | uint16(data[2*i+1-low])<<8
	}
	return string(utf16.Decode(pairs))
}

// delimiterOf is the tab or the semicolon where half the lines that are not blank hold one, else the comma.
func delimiterOf(text string) rune {
	lines, tabs, semicolons := 0, 0, 0
	for line := range strings.Lines(text) {
		if strings.Trim(line, " \r\n") == "" {
			continue
		}
		lines++
		if strings.Contains(line, "\t") {
			tabs++
		}
		if strings.Contains(line, ";") {
			semicolons++
		}
	}
	switch {
	case lines > 0 && 2*tabs >= lines:
		return '\t'
	case lines > 0 && 2*semicolons >= lines:
		return ';'
	}
	return ','
}

// splitSheet cuts the text into records that hold something.
func splitSheet(text string, delimiter rune) ([]sheetRecord, []Fault) {
	if !strings.Contains(text, "\n") {
		text = strings.ReplaceAll(text, "\r", "\n")
	}
	r := csv.NewReader(strings.NewReader(text))
	r.Comma, r.LazyQuotes, r.FieldsPerRecord = delimiter, true, -1
	var records []sheetRecord
	var faults []Fault
	for {
		fields, err := r.Read()
		if len(fields) == 0 {
			if err != nil && len(records) == 0 && err.Error() != "EOF" {
				faults = append(faults, Fault{Fix: fmt.Sprintf("the text does not part into cells: %v", err)})
			}
			return records, faults
		}
		line, _ := r.FieldPos(0)
		rec := sheetRecord{line: line, cells: make([]string, len(fields))}
		for i, f := range fields {
			if strings.Contains(f, "\n") && strings.ContainsRune(f, delimiter) {
				faults = append(faults, Fault{Line: line, Value: firstLine(f), Fix: "a quotation mark opens here and swallows the lines below: close it"})
			}
			rec.cells[i] = strings.Join(strings.Fields(strings.ReplaceAll(f, "\u00a0", " ")), " ")
		}
		if rec.filled() > 0 {
			records = append(records, rec)
		}
	}
}

func firstLine(text string) string {
	head, _, _ := strings.Cut(text, "\n")
	return strings.TrimSpace(head)
}

// missing tells whether a cell says that nothing was measured.
func missing(cell string) bool {
	switch strings.ToLower(cell) {
	case "", "-", "--", "–", "—", "−", ".", "na", "n/a", "#n/a", "n.a.", "nan", "null", "k.a.":
		return true
	}
	return false
}
