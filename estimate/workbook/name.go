package workbook

import (
	"fmt"
	"strings"
)

// longestName bounds a cell's name; the format allows 255 characters.
const longestName = 80

// namer gives cells names that no two share.
type namer struct{ taken map[string]bool }

func newNamer() *namer {
	n := &namer{taken: map[string]bool{}}
	for _, s := range []string{NameBase, NameBaseAsPriced, NameBaseDifference, NameContingency, NameAtConfidence} {
		n.taken[s] = true
	}
	return n
}

// name returns prefix_id in small letters, digits and _; an id that begins with
// the prefix is not given it twice. A name that is taken gets _2, _3 and so on.
func (n *namer) name(prefix, id string) string {
	base := slug(id)
	if !strings.HasPrefix(base, prefix+"_") {
		base = strings.TrimSuffix(prefix+"_"+base, "_")
	}
	if len(base) > longestName {
		base = base[:longestName]
	}
	name := base
	for i := 2; n.taken[name]; i++ {
		name = fmt.Sprintf("%s_%d", base, i)
	}
	n.taken[name] = true
	return name
}

// slug keeps letters and digits of ASCII, small, and puts one _ for each run of
// other characters.
func slug(s string) string {
	var out strings.Builder
	gap := false
	for _, r := range strings.ToLower(s) {
		if ('a' <= r && r <= 'z') || ('0' <= r && r <= '9') {
			if gap && out.Len() > 0 {
				out.WriteByte('_')
			}
			out.WriteRune(r)
			gap = false
			continue
		}
		gap = true
	}
	return out.String()
}
