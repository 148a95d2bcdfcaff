package register

import (
	"regexp"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestMatches(t *testing.T) {
	for _, c := range []struct {
		pattern, text string
		want          bool
	}{
		{"", "", true}, {"", "a", false}, {"a", "a", true}, {"a", "b", false}, {"a", "aa", false},
		{"*", "", true}, {"*", "abc", true}, {"a*", "a", true}, {"a*c", "abbc", true}, {"a*c", "abcb", false},
		{"*b*", "abc", true}, {"*ab", "aab", true}, {"**", "x", true}, {"?", "", false}, {"?", "é", true}, {"??", "é", false},
		{`\*`, "*", true}, {`\*`, "a", false}, {`\?x`, "?x", true}, {`a\`, `a\`, true}, {`a\\*`, `a\b`, true},
		{"a*a*a*b", strings.Repeat("a", 400), false},
	} {
		if got := matches(c.pattern, c.text); got != c.want {
			t.Errorf("matches(%q, %q) = %v", c.pattern, c.text, got)
		}
	}
}

// Against the regular expressions of the library.
func TestMatchesAsRegexp(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		pattern := rapid.StringOfN(rapid.SampledFrom([]rune(`ab*?\é`)), 0, 8, -1).Draw(t, "pattern")
		text := rapid.StringOfN(rapid.SampledFrom([]rune(`ab*?\é`)), 0, 10, -1).Draw(t, "text")
		var b strings.Builder
		b.WriteString(`(?s)\A`)
		for r := []rune(pattern); len(r) > 0; r = r[1:] {
			switch {
			case r[0] == '*':
				b.WriteString(".*")
			case r[0] == '?':
				b.WriteString(".")
			case r[0] == '\\' && len(r) > 1:
				r = r[1:]
				fallthrough
			default:
				b.WriteString(regexp.QuoteMeta(string(r[0])))
			}
		}
		b.WriteString(`\z`)
		if got, want := matches(pattern, text), regexp.MustCompile(b.String()).MatchString(text); got != want {
			t.Fatalf("matches(%q, %q) = %v", pattern, text, got)
		}
	})
}
