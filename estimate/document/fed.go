package document

import (
	"maps"
	"slices"
	"strings"

	"spanwright/estimate/assumption"
)

// Fed returns the ids of the figures that feeds name, sorted. In a feed {mark},
// {item} and {group} stand for those of the member m; a feed that ends in /* names
// every figure one step below. The feed quantities[input] names everything that
// follows from the quantities of the take-off that depend on that input of the
// schedule: of the member's items, or of all where m is nil.
func (d Document) Fed(feeds []string, m *Member) []string {
	set := map[string]bool{}
	figures := d.Figures()
	for _, f := range feeds {
		if input, ok := strings.CutPrefix(f, "quantities["); ok {
			d.fedBy(strings.TrimSuffix(input, "]"), m, set)
			continue
		}
		if f == "member/{mark}/net" && m != nil && m.Net == 0 {
			continue // a row of concrete
		}
		p := substitute(f, m)
		for id := range figures {
			if id == p || below(id, p) {
				set[id] = true
			}
		}
	}
	if _, taxed := figures["tax"]; taxed && set["contingency"] {
		set["tax"] = true
	}
	return slices.Sorted(maps.Keys(set))
}

// below tells whether id is one step below a pattern that ends in /*.
func below(id, pattern string) bool {
	head, ok := strings.CutSuffix(pattern, "*")
	return ok && strings.HasSuffix(head, "/") && strings.HasPrefix(id, head) && !strings.Contains(id[len(head):], "/")
}

// substitute puts the member's own names into a feed.
func substitute(feed string, m *Member) string {
	if m == nil {
		return feed
	}
	return strings.NewReplacer("{mark}", assumption.Segment(m.Mark), "{item}", m.Item, "{group}", assumption.Segment(m.Group)).Replace(feed)
}

// fedBy adds what follows from the quantities that depend on an input.
func (d Document) fedBy(input string, m *Member, set map[string]bool) {
	moved := map[[2]string]bool{} // item, driver
	for _, it := range d.Items {
		for _, q := range it.Quantities {
			if !ofMember(it.ID, m) || !slices.Contains(q.Depends, input) {
				continue
			}
			moved[[2]string{it.ID, q.Driver}] = true
			id := QuantityID(it.ID, q.Driver)
			set[id] = true
			if step := id[strings.LastIndexByte(id, '/')+1:]; step == "net" || step == "delivered" || step == "purchased" {
				set["group/"+assumption.Segment(it.Group)+"/"+step] = true
			}
		}
	}
	lines := d.movedLines(moved)
	for _, l := range d.Lines {
		if !lines[l.ID] {
			continue
		}
		for _, f := range []string{l.ID, "category/" + l.Category, "group/" + assumption.Segment(l.Group) + "/amount", "base", "range", "contingency"} {
			set[f] = true
		}
	}
	if d.Carbon == nil {
		return
	}
	for _, l := range d.Carbon.Lines {
		if moved[[2]string{l.Item, l.Driver}] {
			set[l.ID], set["carbon/module/"+l.Module], set["carbon/total"], set["carbon/range"] = true, true, true, true
		}
	}
}

// movedLines are the lines of quantities that moved, and the percentages that are
// taken of them.
func (d Document) movedLines(quantities map[[2]string]bool) map[string]bool {
	moved := map[string]bool{}
	for _, l := range d.Lines {
		if l.Item != "" && quantities[[2]string{l.Item, l.Driver}] {
			moved[l.ID] = true
		}
	}
	rates := map[string]bool{}
	for _, l := range d.Lines {
		if moved[l.ID] {
			rates[l.RateID] = true
		}
	}
	for _, l := range d.Lines { // what a rate's lines lack to its minimum
		if l.Item == "" && len(l.Of) == 0 && rates[l.RateID] && l.ID != "line/"+l.Group+"/"+strings.TrimPrefix(l.RateID, "rate/") {
			moved[l.ID] = true
		}
	}
	for again := true; again; { // a percentage may stand before the lines that it is taken of
		again = false
		for _, l := range d.Lines {
			if !moved[l.ID] && slices.ContainsFunc(l.Of, func(id string) bool { return moved[id] }) {
				moved[l.ID], again = true, true
			}
		}
	}
	return moved
}

func ofMember(item string, m *Member) bool {
	return m == nil || item == m.Item || item == m.ConcreteItem || slices.Contains(m.JointItems, item)
}

// QuantityID is the id of the figure of an item's quantity of a driver.
func QuantityID(item, driver string) string {
	switch driver {
	case "net tonnes":
		driver = "net"
	case "delivered tonnes":
		driver = "delivered"
	case "purchased tonnes":
		driver = "purchased"
	}
	return "item/" + item + "/" + driver
}
