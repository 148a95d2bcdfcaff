package table

import (
	"bytes"
	"encoding/binary"
	"strings"
	"unicode/utf16"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"

	"phaselag/data/place"
)

// decode turns the bytes of a file into text and names the encoding. The order
// of the tests: byte order mark; valid UTF-8 without zero bytes; zero bytes in
// every other place, which is UTF-16 of mostly Latin text; else Windows-1252.
func decode(b []byte) (text, encoding string, err error) {
	switch {
	case bytes.HasPrefix(b, []byte("\xef\xbb\xbf")):
		text, encoding = string(bytes.ToValidUTF8(b[3:], []byte("\ufffd"))), "UTF-8"
	case bytes.HasPrefix(b, []byte("\xff\xfe")):
		text, encoding = decode16(b[2:], binary.LittleEndian), "UTF-16LE"
	case bytes.HasPrefix(b, []byte("\xfe\xff")):
		text, encoding = decode16(b[2:], binary.BigEndian), "UTF-16BE"
	case utf8.Valid(b) && bytes.IndexByte(b, 0) < 0:
		text, encoding = string(b), "UTF-8"
	default:
		even, odd := zeros(b)
		half := len(b) / 2
		switch {
		case len(b) >= 4 && len(b)%2 == 0 && odd*2 > half && even == 0:
			text, encoding = decode16(b, binary.LittleEndian), "UTF-16LE"
		case len(b) >= 4 && len(b)%2 == 0 && even*2 > half && odd == 0:
			text, encoding = decode16(b, binary.BigEndian), "UTF-16BE"
		default:
			s, e := charmap.Windows1252.NewDecoder().Bytes(b)
			if e != nil {
				return "", "", binaryFile()
			}
			text, encoding = string(s), "Windows-1252"
		}
	}
	if controls(text)*100 > len(text) || strings.IndexByte(text, 0) >= 0 {
		return "", "", binaryFile()
	}
	return text, encoding, nil
}

func binaryFile() error {
	return &place.Error{
		What: "this is not a text table",
		Hint: "export the results as CSV or as tabulator-separated text",
	}
}

func decode16(b []byte, order binary.ByteOrder) string {
	u := make([]uint16, len(b)/2)
	for i := range u {
		u[i] = order.Uint16(b[2*i:])
	}
	return string(utf16.Decode(u))
}

func zeros(b []byte) (even, odd int) {
	for i, c := range b {
		if c != 0 {
			continue
		}
		if i%2 == 0 {
			even++
		} else {
			odd++
		}
	}
	return even, odd
}

// controls counts the characters that no table has.
func controls(s string) int {
	n := 0
	for _, r := range s {
		if r < 0x20 && r != '\n' && r != '\r' && r != '\t' && r != '\f' || r == 0x7f {
			n++
		}
	}
	return n
}
