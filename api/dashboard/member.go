package dashboard

import (
	"fmt"
	"strconv"

	"spanwright/estimate/chart"
	"spanwright/estimate/document"
)

const membersPerPage = 250

// members are one page of a document's members, under the heads of their groups.
type members struct {
	Groups          []memberGroup
	From, To, Total string // the members shown, counted from 1
	Paged           bool
	Previous, Next  string // URLs, or empty
}

type memberGroup struct {
	Group string
	Rows  []memberRow
}

// memberRow is one member with its sizing.
type memberRow struct {
	Anchor, Mark, Kind, Description string
	Quantity, Length                string
	Arrangement, Section, Grade     string
	Net                             string // kg, of all pieces
	Governing, Utilisation          string
	Bar                             string // length of the utilisation's bar, 0 to 100; empty without one
	Sized                           bool
	Fails                           bool
	Unsafe                          bool // another unsafe finding names it, or a split ratio is below 1
	Summary                         string
	Checks                          []checkRow
	Rejected                        []string
	Reactions                       []reactionRow
	Ratios                          []ratioRow
}

type checkRow struct {
	ID, Utilisation, Clause string
	Governs, Fails          bool
}

type reactionRow struct{ Position, Max, Min, Moment string }

// ratioRow compares the split method with the exact envelope for one effect.
type ratioRow struct {
	Effect, Where, Split, Exact, Unit, Ratio string
	Unsafe                                   bool
}

// memberPage reads the number of a page of members, from 1; empty is the first.
func memberPage(text string, total int) (int, error) {
	if text == "" {
		return 1, nil
	}
	n, err := strconv.Atoi(text)
	if last := max(1, (total+membersPerPage-1)/membersPerPage); err != nil || n < 1 || n > last {
		return 0, errNoPage
	}
	return n, nil
}

// newMembers makes one page of the members; url is the scheme's.
func newMembers(d document.Document, page int, url string) members {
	from := (page - 1) * membersPerPage
	to := min(from+membersPerPage, len(d.Members))
	out := members{From: count(min(from+1, to)), To: count(to), Total: count(len(d.Members)), Paged: len(d.Members) > membersPerPage}
	link := func(n int) string { return fmt.Sprintf("%s&members=%d#members", url, n) }
	if page > 1 {
		out.Previous = link(page - 1)
	}
	if to < len(d.Members) {
		out.Next = link(page + 1)
	}
	unsafe := map[string]bool{}
	for _, f := range d.Findings {
		if f.Severity == document.Unsafe {
			unsafe[f.Subject] = true
		}
	}
	for i, m := range d.Members[from:to] {
		if n := len(out.Groups); n == 0 || out.Groups[n-1].Group != m.Group {
			out.Groups = append(out.Groups, memberGroup{Group: m.Group})
		}
		last := &out.Groups[len(out.Groups)-1]
		last.Rows = append(last.Rows, newMemberRow(m, from+i+1, unsafe[m.Mark]))
	}
	return out
}

func newMemberRow(m document.Member, number int, unsafe bool) memberRow {
	r := memberRow{
		Anchor: "member-" + strconv.Itoa(number), Mark: m.Mark, Kind: m.Kind, Description: m.Description,
		Quantity: count(m.Quantity), Length: plain(float64(m.Length)),
		Arrangement: orDash(m.Arrangement), Section: orDash(m.Section), Grade: m.Grade, Net: places(float64(m.Net), 1),
		Sized: len(m.Checks) > 0, Fails: !m.Passes, Governing: orDash(m.Governing), Utilisation: dash,
	}
	if r.Sized {
		u := float64(m.Utilisation)
		r.Utilisation, r.Bar = utilisation(u), strconv.Itoa(int(100*min(max(u, 0), 1)))
	}
	for _, c := range m.Checks {
		r.Checks = append(r.Checks, checkRow{ID: c.ID, Utilisation: utilisation(float64(c.Utilisation)), Clause: c.Clause,
			Governs: c.ID == m.Governing, Fails: !(c.Utilisation <= 1+rounding)})
	}
	for _, x := range m.Rejected {
		r.Rejected = append(r.Rejected, fmt.Sprintf("%s: %s at %s", x.Section, x.Check, utilisation(float64(x.Utilisation))))
	}
	for _, x := range m.Reactions {
		row := reactionRow{Position: plain(float64(x.Position)), Max: places(float64(x.Max), 1), Min: places(float64(x.Min), 1), Moment: dash}
		if x.Moment != 0 {
			row.Moment = places(float64(x.Moment), 1)
		}
		r.Reactions = append(r.Reactions, row)
	}
	below := 0
	for _, x := range m.Ratios {
		r.Ratios = append(r.Ratios, ratioRow{Effect: x.Effect, Where: x.Where, Split: chart.ThreeFigures(float64(x.Split)), Exact: chart.ThreeFigures(float64(x.Exact)),
			Unit: x.Unit, Ratio: ratio(float64(x.Ratio)), Unsafe: x.Unsafe})
		if x.Unsafe {
			below++
		}
	}
	r.Unsafe = below > 0 || unsafe && !r.Fails
	r.Summary = summary(len(m.Checks), len(m.Ratios), below)
	return r
}

// summary says what the details of a member hold.
func summary(checks, ratios, below int) string {
	switch {
	case checks == 0 && ratios == 0:
		return ""
	case ratios == 0:
		return fmt.Sprintf("%d checks", checks)
	case below == 0:
		return fmt.Sprintf("%d checks; split method safe in all %d effects", checks, ratios)
	default:
		return fmt.Sprintf("%d checks; split method unsafe in %d of %d effects", checks, below, ratios)
	}
}

func orDash(s string) string {
	if s == "" {
		return dash
	}
	return s
}
