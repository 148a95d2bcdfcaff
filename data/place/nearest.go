package place

import "strings"

// Nearest returns the candidate that word was probably meant to be, or "" if
// none is near. Near means an edit distance (insertions, deletions,
// replacements and exchanges of neighbours, each counting 1; the restricted
// distance of Damerau and Levenshtein) of at most a third of the word's length,
// and at least 1; case, blanks, hyphens and underscores do not count.
func Nearest(word string, candidates []string) string {
	w := fold(word)
	if len(w) == 0 || len(w) > 64 {
		return ""
	}
	best, bestDistance := "", max(1, len(w)/3)+1
	for _, c := range candidates {
		if d := distance(w, fold(c)); d < bestDistance {
			best, bestDistance = c, d
		}
	}
	return best
}

func fold(s string) []rune {
	s = strings.ToLower(s)
	s = strings.NewReplacer(" ", "", "_", "", "-", "").Replace(s)
	return []rune(s)
}

// distance keeps three rows of the table d[i][j] = distance of a[:i] and b[:j].
func distance(a, b []rune) int {
	before := make([]int, len(b)+1)
	last := make([]int, len(b)+1)
	row := make([]int, len(b)+1)
	for j := range last {
		last[j] = j
	}
	for i := 1; i <= len(a); i++ {
		row[0] = i
		for j := 1; j <= len(b); j++ {
			replace := last[j-1]
			if a[i-1] != b[j-1] {
				replace++
			}
			row[j] = min(replace, last[j]+1, row[j-1]+1)
			if i > 1 && j > 1 && a[i-1] == b[j-2] && a[i-2] == b[j-1] {
				row[j] = min(row[j], before[j-2]+1)
			}
		}
		before, last, row = last, row, before
	}
	return last[len(b)]
}
