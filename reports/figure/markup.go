package figure

import "strings"

// Level says how a piece of text stands to the line.
type Level int

// The levels.
const (
	OnLine Level = iota
	Sub
	Super
)

// Piece is a stretch of text on one level.
type Piece struct {
	Text  string
	Level Level
}

// Pieces takes markup apart: "G_{e} (10^{6} Pa)" gives five pieces. A sign
// without its closing brace is text like any other; braces do not nest.
func Pieces(s string) []Piece {
	var out []Piece
	add := func(text string, level Level) {
		if text != "" {
			out = append(out, Piece{text, level})
		}
	}
	from := 0
	for i := 0; i+1 < len(s); {
		if (s[i] != '^' && s[i] != '_') || s[i+1] != '{' {
			i++
			continue
		}
		end := strings.IndexByte(s[i:], '}')
		if end < 0 {
			break
		}
		level := Sub
		if s[i] == '^' {
			level = Super
		}
		add(s[from:i], OnLine)
		add(s[i+2:i+end], level)
		i += end + 1
		from = i
	}
	add(s[from:], OnLine)
	return out
}

// Plain returns the text of s without markup.
func Plain(s string) string {
	var b strings.Builder
	for _, p := range Pieces(s) {
		b.WriteString(p.Text)
	}
	return b.String()
}
