package calibration

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"

	"spanwright/estimate/sheet"
)

// Fault is one thing wrong in one place of outturns posted as JSON.
type Fault struct {
	Pointer string `json:"pointer"` // JSON pointer (RFC 6901), such as /outturns/3/weighed_mass
	Found   string `json:"found"`
	Problem string `json:"problem"`
	Remedy  string `json:"remedy"`
}

// Faults is the list of all faults of a JSON text, in its order.
type Faults []Fault

// Error counts the faults and spells out the first few.
func (f Faults) Error() string {
	const shown = 5
	var b strings.Builder
	fmt.Fprintf(&b, "%d faults", len(f))
	for i, x := range f {
		if i == shown {
			fmt.Fprintf(&b, "\nand %d more", len(f)-i)
			break
		}
		fmt.Fprintf(&b, "\n%s: ", x.Pointer)
		if x.Found != "" {
			fmt.Fprintf(&b, "%q ", x.Found)
		}
		b.WriteString(x.Problem + "; " + x.Remedy)
	}
	return b.String()
}

// leaf is one value of an outturn in JSON, by its path.
type leaf struct {
	path  string
	cell  sheet.Cell
	isKey bool // a member that stands twice
}

// Kinds of JSON values that no cell has.
const (
	nestedKind sheet.Kind = 254 // an array or an object too deep
	nullKind   sheet.Kind = 253
)

// deepest is how many objects an outturn nests: estimate/base/material.
const deepest = 3

// ReadJSON reads outturns posted as {"outturns": [{…}, …]}, each as Outturn is
// tagged. Masses are numbers in kg, or texts with their unit ("12.4 t"); amounts are
// decimal strings. The rules are those of Read. What is wrong comes as Faults, all at
// once; text that is no JSON of this form is another error that says where.
func ReadJSON(data []byte, o Options) ([]Outturn, error) {
	r := jsonReader{options: o.resolved(false), jobs: map[string]int{}}
	d := json.NewDecoder(bytes.NewReader(data))
	d.UseNumber()
	seen := false
	err := sheet.EachKey(d, func(key string) error {
		if key != "outturns" || seen {
			return fmt.Errorf("found the key %q; accepted is \"outturns\", once", shorten(key))
		}
		seen = true
		return sheet.EachItem(d, func(i int) error { return r.item(d, i) })
	})
	if err == nil {
		if _, last := d.Token(); !errors.Is(last, io.EOF) {
			err = errors.New("something follows the end")
		}
	}
	switch {
	case err != nil:
		return nil, fmt.Errorf("reading the outturns as JSON: at byte %d: %w", d.InputOffset(), err)
	case len(r.faults) > 0:
		return nil, r.faults
	case len(r.outturns) == 0:
		return nil, Faults{{"/outturns", "", "there is no job", "at least one outturn"}}
	}
	sortOutturns(r.outturns)
	return r.outturns, nil
}

type jsonReader struct {
	options
	faults   Faults
	outturns []Outturn
	jobs     map[string]int // item by name in lower case
}

func (r *jsonReader) report(i int, field string, c complaint) {
	pointer := "/outturns/" + strconv.Itoa(i)
	if field != "" {
		pointer += "/" + field
	}
	r.faults = append(r.faults, Fault{pointer, c.found, c.problem, c.remedy})
}

func (r *jsonReader) item(d *json.Decoder, i int) error {
	if i == MostOutturns {
		return fmt.Errorf("there are more than %d jobs; split the list", MostOutturns)
	}
	leaves, err := flatten(d, "", 1)
	if err != nil {
		return err
	}
	before := len(r.faults)
	o, given, bad := empty(), map[string]bool{}, map[string]bool{}
	for _, l := range leaves {
		at := columnOf(l.path)
		if l.isKey {
			r.report(i, l.path, complaint{"", "is a key that stands twice", "leave one of them out"})
			continue
		}
		if at < 0 {
			r.report(i, l.path, unknownField(l))
			continue
		}
		blank, wrong := false, unsuited(l.cell, definitions[at])
		if wrong == nil {
			blank, wrong = definitions[at].take(&o, l.cell, kilogram, r.options)
		}
		if wrong != nil {
			r.report(i, l.path, *wrong)
			bad[l.path] = true
		}
		given[l.path] = !blank
	}
	for _, d := range definitions {
		if d.Obligatory && !given[d.Field] {
			r.report(i, d.Field, complaint{"", "is missing or blank", "enter " + d.Accepts})
			bad[d.Field] = true
		}
	}
	for _, t := range check(o, bad) {
		r.report(i, t.field, t.complaint)
	}
	r.once(i, o)
	if len(r.faults) == before {
		r.outturns = append(r.outturns, o)
	}
	return nil
}

func (r *jsonReader) once(i int, o Outturn) {
	key := strings.ToLower(o.Job)
	if key == "" {
		return
	}
	if first, twice := r.jobs[key]; twice {
		r.report(i, "job", complaint{shorten(o.Job), fmt.Sprintf("is a job that stands at /outturns/%d already", first), "leave one of them out, or name them apart"})
		return
	}
	r.jobs[key] = i
}

// unsuited is the complaint about a JSON type that a field does not take: amounts
// are strings because a JSON number passes through floats in most readers.
func unsuited(c sheet.Cell, d definition) *complaint {
	switch {
	case c.Kind == nullKind:
		return &complaint{"null", "is no value", "leave the key out where there is nothing to say"}
	case c.Kind == sheet.Number && d.kind == moneyKind:
		return &complaint{shorten(c.Text), "is a JSON number", "write the amount as a string, such as \"12500.50\""}
	case c.Kind == sheet.Number && d.kind != massKind && d.kind != hoursKind && d.kind != classKind:
		return &complaint{shorten(c.Text), "is a JSON number", "enter " + d.Accepts + " as a string"}
	}
	return nil
}

func unknownField(l leaf) complaint {
	if slices.Contains(branches, l.path) {
		return complaint{shorten(l.cell.Text), "is no object", "enter an object in braces"}
	}
	fields := make([]string, len(definitions))
	for i, d := range definitions {
		fields[i] = d.Field
	}
	return complaint{shorten(l.path), "is not known here", didYouMean(nearMisses(l.path, fields), "accepted are "+strings.Join(fields, ", "))}
}

// branches are the paths at which an outturn holds objects.
var branches = []string{"costs", "estimate", "estimate/base"}

// flatten reads the object that comes next as leaves with their paths.
func flatten(d *json.Decoder, prefix string, depth int) ([]leaf, error) {
	var leaves []leaf
	seen := map[string]bool{}
	err := sheet.EachKey(d, func(key string) error {
		path := prefix + strings.NewReplacer("~", "~0", "/", "~1").Replace(key)
		if seen[key] {
			leaves = append(leaves, leaf{path: path, isKey: true})
		}
		seen[key] = true
		var raw json.RawMessage
		if err := d.Decode(&raw); err != nil {
			return err
		}
		if raw[0] == '{' && depth < deepest && slices.Contains(branches, path) {
			inner := json.NewDecoder(bytes.NewReader(raw))
			inner.UseNumber()
			more, err := flatten(inner, path+"/", depth+1)
			leaves = append(leaves, more...)
			return err
		}
		c, err := cellOf(raw)
		leaves = append(leaves, leaf{path: path, cell: c})
		return err
	})
	return leaves, err
}

// cellOf turns a JSON value into a cell.
func cellOf(raw json.RawMessage) (sheet.Cell, error) {
	switch raw[0] {
	case '"':
		var s string
		err := json.Unmarshal(raw, &s)
		return sheet.Cell{Kind: sheet.Text, Text: s}, err
	case '{', '[':
		return sheet.Cell{Kind: nestedKind, Text: string(raw[:min(len(raw), 80)])}, nil
	case 'n':
		return sheet.Cell{Kind: nullKind}, nil
	case 't', 'f':
		return sheet.Cell{Kind: sheet.Boolean, Text: strings.ToUpper(string(raw))}, nil
	}
	return sheet.Cell{Kind: sheet.Number, Text: string(raw)}, nil
}
