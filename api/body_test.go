package api

import (
	"strings"
	"testing"
)

// RFC 8259 lets readers choose what to do with a key that is given twice; here it
// is refused, wherever it stands.
func TestCheckJSON(t *testing.T) {
	for _, c := range []struct{ body, pointer, problem string }{
		{`{}`, "", ""}, {`[]`, "", ""}, {`null`, "", ""}, {`1e400`, "", ""}, {` {"a":{"b":1},"b":[{"b":1},{"b":2}]} `, "", ""}, {`{"a":1,"A":2}`, "", ""},
		{`{"a":1,"a":2}`, "/a", "twice"}, {`{"x":[0,{"b":1,"b":1}]}`, "/x/1/b", "twice"}, {`{"a":1,"\u0061":2}`, "/a", "twice"}, {`{"a/b":1,"a/b":2}`, "/a~1b", "twice"},
		{`{"a":{"a":1},"a":2}`, "/a", "twice"},
		{`{} {}`, "", "follows"}, {`{}x`, "", "follows"}, {`1 2`, "", "follows"}, {`{}]`, "", "follows"},
		{`{`, "", "too early"}, {`{"a":`, "/a", "too early"}, {`[1,`, "/1", "too early"}, {``, "", "too early"}, {`{"a":[1`, "/a", "too early"},
		{`{"a" 1}`, "/a", "syntax"}, {`{a:1}`, "", "syntax"}, {`[1 2]`, "/1", "syntax"}, {`{"a":01}`, "", "syntax"}, {`{"a":tru}`, "/a", "syntax"}, {`[1}`, "", "syntax"}, {`'a'`, "", "syntax"},
		{"{\"a\":\"\xff\"}", "", "UTF-8"}, {"\xef\xbb\xbf{}", "", "syntax"},
		{strings.Repeat("[", 64) + strings.Repeat("]", 64), "", ""},
		{strings.Repeat("[", 66) + strings.Repeat("]", 66), strings.Repeat("/0", 65), "deeply"},
		{strings.Repeat(`[`, 100_000), strings.Repeat("/0", 65), "deeply"},
	} {
		p := checkJSON([]byte(c.body))
		shown := c.body[:min(len(c.body), 40)]
		if (p == nil) != (c.problem == "") {
			t.Errorf("%s: problem %+v, want %q", shown, p, c.problem)
			continue
		}
		if p == nil {
			continue
		}
		if p.Status != 400 || len(p.Faults) != 1 || p.Faults[0].Pointer != c.pointer || !strings.Contains(p.Faults[0].Problem, c.problem) {
			t.Errorf("%s: status %d, faults %+v; want %q at %q", shown, p.Status, p.Faults, c.problem, c.pointer)
		}
	}
}
