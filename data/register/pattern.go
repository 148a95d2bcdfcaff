package register

// matches reports whether a pattern fits a whole text. * stands for any
// characters, ? for exactly one, \ takes the next character as it is.
//
// Only the last * is ever tried again: if the rest fits anywhere behind an
// earlier one, it also fits behind the last. That bounds the work by the
// product of the lengths.
func matches(pattern, text string) bool {
	p, t := []rune(pattern), []rune(text)
	i, k := 0, 0
	star, from := -1, 0 // where the last * stands, and where its rest was tried last
	for k < len(t) {
		switch {
		case i < len(p) && p[i] == '*':
			star, from = i, k
			i++
			continue
		case i < len(p) && p[i] == '?':
			i++
			k++
			continue
		case i < len(p):
			at := i
			if p[at] == '\\' && at+1 < len(p) {
				at++
			}
			if p[at] == t[k] {
				i = at + 1
				k++
				continue
			}
		}
		if star < 0 {
			return false
		}
		from++
		i, k = star+1, from
	}
	for i < len(p) && p[i] == '*' {
		i++
	}
	return i == len(p)
}
