package ratebook

import (
	"fmt"
	"strings"
)

// Validate reports everything wrong with one multiplier as an *InvalidError.
func (m Multiplier) Validate() error {
	c := &checker{}
	c.multiplier("", m)
	return c.err()
}

// multipliers checks those of the book and those of site conditions.
func (c *checker) multipliers(b Book) {
	for i, m := range b.Multipliers {
		c.multiplier(fmt.Sprintf("/multipliers/%d", i), m)
	}
	names := map[string]bool{}
	for i, m := range b.Site {
		p := fmt.Sprintf("/site_multipliers/%d", i)
		c.oneOf(p+"/condition", m.Condition, siteConditions())
		c.multiplier(p, m.Multiplier)
		c.want(m.Scope == BookScope || !m.Scope.valid(), p+"/scope", string(m.Scope), string(BookScope)+": a site condition holds for the whole job")
		c.want(!names[m.Name], p+"/name", m.Name, "a name that no other site multiplier has: those of one name override each other")
		names[m.Name] = true
	}
}

// siteConditions are those that a job may name.
func siteConditions() []string {
	return []string{"over water", "tidal", "live plant", "height", "weather"}
}

func (c *checker) multiplier(field string, m Multiplier) {
	c.want(strings.TrimSpace(m.Name) != "" && len(m.Name) <= maxName, field+"/name", m.Name, "a name of 1 to 80 characters")
	c.want(m.Scope.valid(), field+"/scope", string(m.Scope), "member, group, family, scheme, project or rate book")
	c.subject(field, m.Scope, m.Subject)
	c.want(len(m.Categories) > 0, field+"/categories", "", "at least one category")
	for i, cat := range m.Categories {
		c.oneOf(fmt.Sprintf("%s/categories/%d", field, i), cat, Categories())
	}
	c.spread(field+"/spread", m.Spread, 0, maxFactor, figurePlaces)
	c.group(field+"/group", m.Group)
	c.want(m.Reason != "" && len([]rune(m.Reason)) <= 2000, field+"/reason", m.Reason, "why it is so, in 1 to 2000 characters")
}

// subject wants one where the scope names something, and none elsewhere.
func (c *checker) subject(field string, s Scope, subject string) {
	switch {
	case s.named():
		c.want(subject != "", field+"/subject", subject, "the "+string(s)+" that it is for")
	default:
		c.want(subject == "", field+"/subject", subject, "nothing: the scope "+string(s)+" needs no subject")
	}
	c.want(len([]rune(subject)) <= 200, field+"/subject", subject, "at most 200 characters")
}
