package table

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"math"
	"strings"

	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"

	"phaselag/data/place"
	"phaselag/data/workbook"
)

const (
	// headBytes is how much of a stream is looked at for its headings, separator,
	// decimal sign and encoding.
	headBytes = 256 << 10
	// longestLine is the longest line of a stream in bytes.
	longestLine = 1 << 20
)

// Stream reads a table row by row and holds only its head: signals against time
// have millions of rows. It is understood from its first rows as Read understands a
// table; what Read refuses further down, Next refuses there.
type Stream struct {
	Table *Table // its Rows are the first rows only

	lines   *bufio.Reader
	line    int // of the last line read
	block   int
	pending bool
	begun   bool
	ended   bool
	cells   []Cell

	rows []Row // of a workbook, which is in memory anyway
}

// At is where a row of a stream stands.
type At struct {
	Line  int
	Block int // from 0; grows with blank lines, repeated headings and lines of text
}

// NewStream understands the head of a table. Errors are *place.Error.
func NewStream(name string, r io.Reader, s Settings) (*Stream, error) {
	head := make([]byte, headBytes)
	n, err := io.ReadFull(r, head)
	head = head[:n]
	whole := errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF)
	if err != nil && !whole {
		return nil, &place.Error{File: name, Err: err}
	}
	if workbook.Is(head) {
		return workbookStream(name, io.MultiReader(bytes.NewReader(head), r), s)
	}
	if s.Sheet != "" {
		return nil, &place.Error{File: name, What: fmt.Sprintf("the sheet %q of a file that is no workbook", clip(s.Sheet)), Hint: "leave sheet out"}
	}
	sample := head
	if !whole {
		sample = head[:wholeLines(head)]
		if len(sample) == 0 {
			return nil, &place.Error{File: name, Line: 1, What: fmt.Sprintf("no line ends in the first %d kB", headBytes>>10), Hint: "is this a text table of signals?"}
		}
	}
	t, err := Read(name, sample, s)
	if err != nil {
		return nil, err
	}
	if t.Columns[len(t.Columns)-1].Derived {
		return nil, &place.Error{File: name, Line: t.HeaderLine, What: "signals in several blocks of columns", Hint: "write the segments below each other, with a column that numbers them"}
	}
	all := io.MultiReader(bytes.NewReader(head), r)
	text := bufio.NewReaderSize(decoded(all, t.Encoding, head), longestLine)
	return &Stream{Table: t, lines: text}, nil
}

// wholeLines is the length of the whole lines at the start of b.
func wholeLines(b []byte) int {
	end := bytes.LastIndexByte(b, '\n') + 1
	if end == 0 {
		end = bytes.LastIndexByte(b, '\r') + 1
	}
	// A line feed of UTF-16LE has its zero byte behind it.
	if end > 0 && end < len(b) && b[end] == 0 && end%2 == 1 {
		end++
	}
	return end
}

// decoded turns the bytes into UTF-8 without a byte order mark.
func decoded(r io.Reader, encoding string, head []byte) io.Reader {
	switch encoding {
	case "UTF-16LE":
		return unicode.UTF16(unicode.LittleEndian, unicode.UseBOM).NewDecoder().Reader(r)
	case "UTF-16BE":
		return unicode.UTF16(unicode.BigEndian, unicode.UseBOM).NewDecoder().Reader(r)
	case "Windows-1252":
		return charmap.Windows1252.NewDecoder().Reader(r)
	}
	if bytes.HasPrefix(head, []byte("\xef\xbb\xbf")) {
		_, _ = io.CopyN(io.Discard, r, 3)
	}
	return r
}

func workbookStream(name string, r io.Reader, s Settings) (*Stream, error) {
	content, err := io.ReadAll(io.LimitReader(r, maxBytes+1))
	if err != nil {
		return nil, &place.Error{File: name, Err: err}
	}
	if len(content) > maxBytes {
		return nil, &place.Error{File: name, What: fmt.Sprintf("larger than %d MB", maxBytes>>20), Hint: "export long signals as text"}
	}
	tables, err := ReadAll(name, content, s)
	if err != nil {
		return nil, err
	}
	if len(tables) > 1 {
		return nil, &place.Error{File: name, What: "signals on several sheets", Hint: fmt.Sprintf("name one: reading: {sheet: %s}", Quote(tables[0].Sheet))}
	}
	return &Stream{Table: tables[0], rows: tables[0].Rows}, nil
}

// Next reads the next row: the numbers of the columns, in SI, into values (NaN
// where nothing was measured), and the texts of other columns into texts. At the end
// of the table the error is io.EOF.
func (s *Stream) Next(columns []int, values []float64, textColumns []int, texts []string) (At, error) {
	if s.lines == nil {
		if len(s.rows) == 0 {
			return At{}, io.EOF
		}
		row := s.rows[0]
		s.rows = s.rows[1:]
		for i, c := range textColumns {
			texts[i] = s.Table.Text(row, c)
		}
		for i, c := range columns {
			v, err := s.Table.Value(row, c)
			if err != nil {
				return At{}, s.Table.Placed(err)
			}
			values[i] = v
		}
		return At{row.Line, row.Block}, nil
	}
	first := s.Table.Rows[0].Line
	for {
		raw, err := s.nextLine()
		if err != nil {
			return At{}, err
		}
		if s.line < first {
			continue
		}
		if err := s.cut(raw); err != nil {
			return At{}, err
		}
		if len(s.cells) == 0 {
			s.pending = true
			continue
		}
		if _, ok := quick(s.cells[0].Text, s.Table.Decimal[0]); !ok && !hasNumber(s.cells) {
			if len(s.cells) == 1 || sameTexts(s.cells, s.Table.Headings()) || s.units() {
				s.pending = true
				continue
			}
		}
		if s.pending && s.begun {
			s.block++
		}
		s.pending, s.begun = false, true
		break
	}
	at := At{s.line, s.block}
	for i, c := range textColumns {
		texts[i] = ""
		if c < len(s.cells) {
			texts[i] = s.cells[c].Text
		}
	}
	for i, c := range columns {
		values[i] = math.NaN()
		if c >= len(s.cells) {
			continue
		}
		x, err := s.Table.number(s.cells[c])
		if err != nil {
			return at, err
		}
		if math.IsNaN(x) || math.IsInf(x, 0) {
			values[i] = x
			continue
		}
		values[i] = s.Table.Columns[c].Unit.SI(x)
	}
	return at, nil
}

// units reports whether the line repeats the row of units.
func (s *Stream) units() bool {
	if s.Table.UnitsLine == 0 {
		return false
	}
	for i, c := range s.cells {
		if i < len(s.Table.Columns) && c.Text != "" && strings.Trim(c.Text, "[]() ") != s.Table.Columns[i].UnitText {
			return false
		}
	}
	return true
}

// nextLine gives the next line without its end; it is valid until the next call.
func (s *Stream) nextLine() ([]byte, error) {
	if s.ended {
		return nil, io.EOF
	}
	raw, err := s.lines.ReadSlice('\n')
	switch {
	case errors.Is(err, bufio.ErrBufferFull):
		return nil, &place.Error{File: s.Table.File, Line: s.line + 1, What: fmt.Sprintf("a line of more than %d MB", longestLine>>20), Hint: "lines must end with a line feed"}
	case errors.Is(err, io.EOF):
		s.ended = true
		if len(raw) == 0 {
			return nil, io.EOF
		}
	case err != nil:
		return nil, &place.Error{File: s.Table.File, Line: s.line + 1, Err: err}
	}
	s.line++
	return bytes.TrimRight(raw, "\r\n"), nil
}

// cut fills cells with those of a line.
func (s *Stream) cut(raw []byte) error {
	g := gridder{separator: s.Table.Separator[0], cells: s.cells[:0]}
	text := string(raw)
	if strings.IndexByte(text, '"') >= 0 {
		next, _ := g.quotedRow(text, 0, s.line)
		if next < len(text) {
			return &place.Error{File: s.Table.File, Line: s.line, What: "a quoted cell over several lines among signals", Hint: "write one sample a line"}
		}
	} else {
		g.plainRow(text, s.line)
	}
	s.cells = g.cells
	for len(s.cells) > 0 && s.cells[len(s.cells)-1].Text == "" {
		s.cells = s.cells[:len(s.cells)-1]
	}
	return nil
}
