package schedule

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"spanwright/estimate/sheet"
	"spanwright/structural/unit"
)

// The arrangements, as they stand in Member.Arrangement.
const (
	simple     = "simple"
	cantilever = "cantilever"
	fixedBoth  = "fixed both ends"
	propped    = "propped"
	overhang   = "overhang"
	twoSpans   = "two equal spans"
	strut      = "strut"
	notSized   = "not sized"
	atPlaces   = "positions"
)

// arrangements are the words of the column Support, with the words that mean the
// same in the trade.
var arrangements = []struct {
	word string
	same []string
}{
	{simple, []string{"simply supported", "simple span", "simple beam"}},
	{cantilever, []string{"cantilevered"}},
	{fixedBoth, []string{"fixed-fixed", "fixed at both ends", "both ends fixed"}},
	{propped, []string{"propped cantilever"}},
	{overhang, []string{"overhanging"}},
	{twoSpans, []string{"2 equal spans"}},
	{strut, nil},
	{notSized, nil},
	{atPlaces, []string{"support positions"}},
}

func supportNames() []string {
	var words []string
	for _, a := range arrangements {
		words = append(words, a.word)
	}
	return words
}

func supportWords() string { return strings.Join(supportNames(), ", ") }

// arrangement settles how the member is held: the word of Support, or the given
// positions. The second result tells whether "simple" is a default.
func (r *row) arrangement(f *fields) (text, bool) {
	switch {
	case f.support.state == bad || f.support.state == blank && f.supportsState == bad:
		return text{state: bad}, false
	case f.support.state == blank && f.supportsState == given:
		return text{given, atPlaces}, false
	case f.support.state == blank && f.unheld():
		return text{given, notSized}, false
	case f.support.state == blank && r.byMassUnsaid(f):
		r.missing(colSupport, "the row has a mass and no section", "write not sized, or name a section in Section or family")
		return text{state: bad}, false
	case f.support.state == blank:
		return text{given, simple}, true
	}
	word, ok := supportWord(f.support.value)
	if !ok {
		var words []string
		for _, a := range arrangements {
			words = append(words, a.word)
		}
		r.fault(colSupport, f.support.value, "is no support word", didYouMean(near(f.support.value, words), "accepted are "+supportWords()))
		return text{state: bad}, false
	}
	switch {
	case word == atPlaces && f.supportsState == blank:
		r.missing(colPositions, "the support positions are blank", `enter them, such as "0 fixed; 28"`)
		return text{state: bad}, false
	case word != atPlaces && f.supportsState == given:
		r.fault(colPositions, r.cells[colPositions].Text, "contradicts Support, which says "+word, "leave one of the two blank")
		return text{state: bad}, false
	}
	return text{given, word}, false
}

// byMassUnsaid tells whether a row is secondary steel in all but its support word.
func (r *row) byMassUnsaid(f *fields) bool {
	noSection := f.product.state == blank || f.product.state == given && r.products.find(f.product.value, findProduct).wrong != nil
	return f.mass.state == given && noSection
}

func supportWord(found string) (string, bool) {
	key := fold(found)
	for _, a := range arrangements {
		if fold(a.word) == key || slices.ContainsFunc(a.same, func(s string) bool { return fold(s) == key }) {
			return a.word, true
		}
	}
	return "", false
}

const (
	pinned = "pinned"
	fixed  = "fixed"
)

// positions reads Support positions: "0; 28; 42", "0 fixed; 28", sorted.
func (r *row) positions() ([]Support, state) {
	c := r.cells[colPositions]
	if r.layout.lost[colPositions] {
		return nil, bad
	}
	if c.Kind != sheet.Text && c.Kind != sheet.Number {
		n := r.quantity(colPositions, unit.Length, positions)
		return nil, n.state
	}
	var list []Support
	for part := range strings.SplitSeq(c.Text, ";") {
		if strings.TrimSpace(part) == "" {
			continue
		}
		s, wrong := r.onePosition(sheet.Cell{Column: c.Column, Kind: c.Kind, Text: part})
		if wrong != nil {
			r.judge(colPositions, wrong)
		}
		if s == nil {
			return nil, bad
		}
		list = append(list, *s)
	}
	if len(list) == 0 {
		return nil, blank
	}
	slices.SortStableFunc(list, func(a, b Support) int { return cmpFloat(a.Position, b.Position) })
	return list, given
}

func cmpFloat(a, b float64) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// onePosition reads "28", "28 m pinned". A nil support without a complaint has its
// fault reported at the header.
func (r *row) onePosition(c sheet.Cell) (*Support, *complaint) {
	s := Support{Kind: pinned}
	line := strings.Join(strings.Fields(c.Text), " ")
	lower := strings.ToLower(line)
	for _, kind := range []string{pinned, fixed} {
		if strings.HasSuffix(lower, kind) && len(lower) == len(line) {
			s.Kind, line = kind, strings.TrimSpace(line[:len(line)-len(kind)])
			break
		}
	}
	c.Text = line
	n, wrong := readQuantity(c, r.comma, unit.Length, r.layout.units[colPositions], "positions such as 0 fixed; 28; 42")
	switch {
	case wrong != nil && r.bare(colPositions, unit.Length, c):
		return nil, nil
	case wrong != nil:
		return nil, wrong
	case n.state == blank:
		return nil, &complaint{shorten(r.cells[colPositions].Text), "names a support without its position", "positions such as 0 fixed; 28; 42"}
	case !positions.holds(n.value):
		return nil, &complaint{shorten(c.Text), "is out of bounds", positions.words}
	}
	s.Position = n.value
	return &s, nil
}

// hold gives the supports of an arrangement on a length, nil where the row does
// not allow them; the fault is then reported.
func (r *row) hold(word string, f *fields) []Support {
	L := f.length.value
	switch word {
	case simple, strut:
		return []Support{{0, pinned}, {L, pinned}}
	case cantilever:
		return []Support{{0, fixed}}
	case fixedBoth:
		return []Support{{0, fixed}, {L, fixed}}
	case propped:
		return []Support{{0, fixed}, {L, pinned}}
	case twoSpans:
		return []Support{{0, pinned}, {unit.Round(L/2, unit.Digits), pinned}, {L, pinned}}
	case overhang:
		return r.overhanging(f)
	case atPlaces:
		return r.atPlaces(f)
	}
	return nil
}

func (r *row) overhanging(f *fields) []Support {
	inner := unit.Round(f.length.value-f.overhang.value, unit.Digits)
	switch {
	case f.overhang.state == bad:
		return nil
	case f.overhang.state == blank:
		r.missing(colOverhang, "the overhang is blank", "enter its length, which is part of Length")
		return nil
	case !(inner > samePlace*f.length.value), !(f.overhang.value > samePlace*f.length.value):
		r.fault(colOverhang, r.cells[colOverhang].Text, "is not shorter than the member, or not above 0: the member is "+metres(f.length.value), "an overhang above 0 and below the length, each part more than a two-hundredth of it")
		return nil
	}
	return []Support{{0, pinned}, {inner, pinned}}
}

func (r *row) atPlaces(f *fields) []Support {
	found, L := r.cells[colPositions].Text, f.length.value
	held := len(f.supports) > 1
	for i, s := range f.supports {
		held = held || s.Kind == fixed
		switch {
		case !(s.Position <= L):
			r.fault(colPositions, found, fmt.Sprintf("the support at %s is outside the member, %s", metres(s.Position), metres(L)), "positions from 0 to the length")
			return nil
		case i > 0 && !(s.Position-f.supports[i-1].Position > samePlace*L):
			r.fault(colPositions, found, "two supports stand at "+metres(s.Position), "one support at a place")
			return nil
		}
	}
	if !held {
		r.fault(colPositions, found, "one pinned support does not hold a member", "two supports, or one fixed")
		return nil
	}
	return f.supports
}

// samePlace is the part of the length within which two supports are taken as one:
// a shorter span is a slip of the hand, and would be blamed on the section.
const samePlace = 0.005

func metres(v float64) string { return unit.Format(v, unit.Must("m"), 6) }

// isUpright tells whether a strut stands: its own weight then acts along it.
func isUpright(kind string) bool {
	return hasWord(kind, "column", "post", "leg", "tower")
}

// hasWord tells whether one of the words, or its plural, is a word of the text.
func hasWord(text string, words ...string) bool {
	for w := range strings.FieldsFuncSeq(strings.ToLower(text), notLetter) {
		if slices.Contains(words, w) || slices.Contains(words, strings.TrimSuffix(w, "s")) {
			return true
		}
	}
	return false
}

func notLetter(r rune) bool { return !(r >= 'a' && r <= 'z') && r < math.MaxInt8 }
