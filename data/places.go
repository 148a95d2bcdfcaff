package data

import (
	"fmt"
	"slices"
	"strings"
)

// Places names the rows of points for people, file by file in the order of first
// appearance: "isotherms.csv:12-18, 40; other.csv:3". Neighbouring lines of the
// file are drawn together.
func Places(points []Point) string {
	var files []string
	lines := map[string][]int{}
	for _, p := range points {
		if _, ok := lines[p.File]; !ok {
			files = append(files, p.File)
		}
		lines[p.File] = append(lines[p.File], p.Row)
	}
	var parts []string
	for _, f := range files {
		list := lines[f]
		slices.Sort(list)
		list = slices.Compact(list)
		var spans []string
		for i := 0; i < len(list); {
			j := i
			for j+1 < len(list) && list[j+1] == list[j]+1 {
				j++
			}
			if i == j {
				spans = append(spans, fmt.Sprint(list[i]))
			} else {
				spans = append(spans, fmt.Sprintf("%d-%d", list[i], list[j]))
			}
			i = j + 1
		}
		parts = append(parts, f+":"+strings.Join(spans, ", "))
	}
	return strings.Join(parts, "; ")
}
