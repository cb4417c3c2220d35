package section

import (
	"cmp"
	"crypto/sha256"
	"embed"
	"encoding/hex"
	"fmt"
	"slices"
	"strings"
	"sync"
)

//go:embed data/*.csv
var dataFiles embed.FS

// catalogueFiles names the embedded files in the order of Families; families
// without a file are made by dimensions only.
var catalogueFiles = []string{
	"ipe.csv", "hea.csv", "heb.csv", "hem.csv", "upn.csv", "upe.csv", "w.csv", "c.csv", "l.csv",
	"chs.csv", "pipe.csv", "shs.csv", "rhs.csv", "hss.csv", "hss-round.csv",
}

// Family is a series of sections that a member can be sized from, or a shape
// that is given by its dimensions.
type Family struct {
	Name         string // as in Section.Family
	Title        string // in words
	Standard     string // of sizes and tolerances
	ByDimensions bool   // Find also takes sizes outside the catalogue
	Sizes        int    // catalogue rows; 0 if by dimensions only: Series refuses it
}

// catalogue is all embedded data, read once. Nothing in it is changed later.
type catalogue struct {
	families []Family
	series   map[string][]Section // by family, lightest first
	index    map[string]Section   // by key of designation and aliases
	hash     string
}

var load = sync.OnceValues(read)

// read builds the catalogue from the embedded data.
func read() (*catalogue, error) {
	c := &catalogue{series: map[string][]Section{}, index: map[string]Section{}}
	h := sha256.New()
	for _, name := range catalogueFiles {
		text, err := dataFiles.ReadFile("data/" + name)
		if err != nil {
			return nil, fmt.Errorf("embedded section data: %w", err)
		}
		h.Write(text)
		t, err := readTable(text)
		if err != nil {
			return nil, fmt.Errorf("embedded section data %s: %w", name, err)
		}
		if err := c.add(t); err != nil {
			return nil, fmt.Errorf("embedded section data %s: %w", name, err)
		}
	}
	c.hash = hex.EncodeToString(h.Sum(nil))
	for _, f := range forms {
		if _, held := c.series[f.family]; !held {
			c.families = append(c.families, Family{Name: f.family, Title: f.title, Standard: f.standard, ByDimensions: true})
		}
	}
	return c, nil
}

// add builds the sections of a table and files them under every spelling.
func (c *catalogue) add(t table) error {
	name := t.head["family"]
	_, byDimensions := formOf(name)
	var list []Section
	for _, r := range t.rows {
		s, err := t.section(r)
		if err != nil {
			return err
		}
		list = append(list, s)
		for _, spelling := range append(r.aliases, s.Designation) {
			k := key(spelling)
			if old, twice := c.index[k]; twice {
				return fmt.Errorf("%q stands for both %s and %s", spelling, old.Designation, s.Designation)
			}
			c.index[k] = s
		}
	}
	slices.SortFunc(list, func(a, b Section) int {
		return cmp.Or(cmp.Compare(a.Mass, b.Mass), strings.Compare(a.Designation, b.Designation))
	})
	c.series[name] = list
	c.families = append(c.families, Family{
		Name: name, Title: t.head["title"], Standard: t.head["standard"],
		ByDimensions: byDimensions, Sizes: len(list),
	})
	return nil
}

// Families returns all families, those with a catalogue first.
func Families() []Family {
	c, err := load()
	if err != nil {
		return nil
	}
	return slices.Clone(c.families)
}

// Series returns the catalogue of a family (any spelling that IsFamily takes),
// lightest first, equal masses by designation. The slice is the caller's own. A
// family that is unknown or that has no catalogue is an *UnknownError.
func Series(family string) ([]Section, error) {
	c, err := load()
	if err != nil {
		return nil, err
	}
	name, ok := IsFamily(family)
	if !ok {
		return nil, &UnknownError{Found: family, Why: "no such family; families with a catalogue are " + strings.Join(c.catalogued(), ", ")}
	}
	list := c.series[name]
	if len(list) == 0 {
		f, _ := formOf(name)
		return nil, &UnknownError{Found: family,
			Why: fmt.Sprintf("family %s has no catalogue to size from; name one size, such as %s, or a family of %s", name, f.example, strings.Join(c.catalogued(), ", "))}
	}
	return slices.Clone(list), nil
}

// catalogued returns the names of the families that Series accepts.
func (c *catalogue) catalogued() []string {
	var names []string
	for _, f := range c.families {
		if f.Sizes > 0 {
			names = append(names, f.Name)
		}
	}
	return names
}

// DataHash returns the SHA-256, in hex, of the embedded catalogue files in the
// order of Families; empty if they can't be read.
func DataHash() string {
	c, err := load()
	if err != nil {
		return ""
	}
	return c.hash
}
