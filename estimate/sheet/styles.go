package sheet

import (
	"strconv"
	"strings"
)

// showing is what a number format makes of a number, as far as it matters here.
type showing uint8

const (
	asNumber showing = iota
	asPercent
	asDate
)

// builtin tells the formats that have a number but no code in the file
// (ISO/IEC 29500-1, 18.8.30, with the East Asian date formats).
func builtin(id int) showing {
	switch {
	case id == 9 || id == 10:
		return asPercent
	case id >= 14 && id <= 22, id >= 27 && id <= 36, id >= 45 && id <= 47, id >= 50 && id <= 58:
		return asDate
	}
	return asNumber
}

// readStyles finds for each cell style what its number format shows.
func (b *xlsxBook) readStyles(part string) error {
	s, c, err := b.parts.scan(part)
	if err != nil {
		return err
	}
	defer c.Close()
	if err := s.root("styleSheet"); err != nil {
		return inPart(part, err)
	}
	custom := map[int]showing{}
	return inPart(part, s.all(func() error {
		switch string(s.name) {
		case "numFmts":
			return s.each(func() error {
				code, err := s.attrText("formatCode")
				if err != nil {
					return err
				}
				if id, err := strconv.Atoi(string(s.attr("numFmtId"))); err == nil {
					custom[id] = showingOf(code)
				}
				return s.skip()
			})
		case "cellXfs":
			return s.each(func() error {
				id, _ := strconv.Atoi(string(s.attr("numFmtId"))) // without one, General
				show, ok := custom[id]
				if !ok {
					show = builtin(id)
				}
				b.formats = append(b.formats, show)
				return s.skip()
			})
		}
		return s.skip()
	}))
}

// showingOf reads a format code (ISO/IEC 29500-1, 18.8.31): its first section,
// without quoted, escaped and bracketed parts; but [h], [m], [s] are durations.
func showingOf(code string) showing {
	var signs strings.Builder
	for i := 0; i < len(code); i++ {
		switch c := code[i]; c {
		case '"':
			i += max(strings.IndexByte(code[i+1:], '"')+1, 0)
		case '\\', '_', '*':
			i++
		case '[':
			end := strings.IndexByte(code[i:], ']')
			if end < 0 {
				continue
			}
			if inner := code[i+1 : i+end]; inner != "" && strings.Trim(inner, "hmsHMS") == "" {
				return asDate
			}
			i += end
		case ';':
			i = len(code)
		default:
			signs.WriteByte(c)
		}
	}
	text := strings.ToLower(signs.String())
	switch {
	case strings.HasPrefix(text, "general"):
		return asNumber
	case strings.ContainsAny(text, "ydhs"), strings.Contains(text, "m") && !strings.ContainsAny(text, "0#?"):
		return asDate
	case strings.Contains(text, "%"):
		return asPercent
	}
	return asNumber
}
