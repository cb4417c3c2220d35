package material

import (
	"bytes"
	"crypto/sha256"
	_ "embed"
	"encoding/csv"
	"encoding/hex"
	"fmt"
	"slices"
	"strconv"
	"strings"
	"sync"
)

//go:embed grades.csv
var gradesCSV []byte

//go:embed suits.csv
var suitsCSV []byte

// ksi is 1000 lbf/in² in Pa: 0.45359237 kg × 9.80665 m/s² × 1000 / (0.0254 m)².
const ksi = 0.45359237 * 9.80665 * 1000 / (0.0254 * 0.0254)

// DataHash returns the SHA-256, in hex, of the embedded grade data and the
// family × grade table.
func DataHash() string {
	h := sha256.New()
	h.Write(gradesCSV)
	h.Write(suitsCSV)
	return hex.EncodeToString(h.Sum(nil))
}

type pair struct{ family, grade string }

type data struct {
	names    []string
	grades   map[string]Grade
	families map[string]bool
	verdicts map[pair]Verdict
}

var load = sync.OnceValues(func() (*data, error) {
	d := &data{grades: map[string]Grade{}, families: map[string]bool{}, verdicts: map[pair]Verdict{}}
	if err := d.readGrades(gradesCSV); err != nil {
		return nil, fmt.Errorf("embedded grades.csv: %w", err)
	}
	if err := d.readVerdicts(suitsCSV); err != nil {
		return nil, fmt.Errorf("embedded suits.csv: %w", err)
	}
	return d, nil
})

// readRows returns the rows under the header, each of the given width.
func readRows(text []byte, width int) ([][]string, error) {
	r := csv.NewReader(bytes.NewReader(text))
	r.Comment = '#'
	r.FieldsPerRecord = width
	rows, err := r.ReadAll()
	if err != nil {
		return nil, err
	}
	if len(rows) < 2 {
		return nil, fmt.Errorf("found %d rows; want a header and at least one row", len(rows))
	}
	return rows[1:], nil
}

func (d *data) readGrades(text []byte) error {
	rows, err := readRows(text, 12)
	if err != nil {
		return err
	}
	for _, row := range rows {
		g, err := gradeOf(row)
		if err != nil {
			return fmt.Errorf("grade %s: %w", row[0], err)
		}
		old, ok := d.grades[g.Name]
		if !ok {
			if row[10] != "" {
				return fmt.Errorf("grade %s: its first row is for %s alone; want the row of all families first", g.Name, row[10])
			}
			d.names = append(d.names, g.Name)
			d.grades[g.Name] = g
			continue
		}
		if err := old.add(g.Bands[0], strings.Fields(row[10])); err != nil {
			return fmt.Errorf("grade %s: band up to %s: %w", g.Name, row[7], err)
		}
		d.grades[g.Name] = old
	}
	return nil
}

// add puts a band under those of the same families.
func (g *Grade) add(b Band, families []string) error {
	bands := &g.Bands
	if len(families) > 0 {
		i := slices.IndexFunc(g.Variants, func(v Variant) bool { return slices.Equal(v.Families, families) })
		if i < 0 {
			g.Variants = append(g.Variants, Variant{Families: families})
			i = len(g.Variants) - 1
		}
		bands = &g.Variants[i].Bands
	}
	if n := len(*bands); n > 0 && !(b.UpTo > (*bands)[n-1].UpTo) {
		return fmt.Errorf("it does not follow the one above it")
	}
	*bands = append(*bands, b)
	return nil
}

// gradeOf reads one row as a grade of one band.
func gradeOf(row []string) (Grade, error) {
	stress, ok := map[string]float64{"MPa": 1e6, "ksi": ksi}[row[2]]
	if !ok {
		return Grade{}, fmt.Errorf("stress unit %q; want MPa or ksi", row[2])
	}
	length, ok := map[string]float64{"mm": 1e-3, "in": 0.0254}[row[3]]
	if !ok {
		return Grade{}, fmt.Errorf("length unit %q; want mm or in", row[3])
	}
	var v [6]float64
	for i := range v {
		x, err := strconv.ParseFloat(row[4+i], 64)
		if err != nil || !finite(x) {
			return Grade{}, fmt.Errorf("%q is not a number above zero", row[4+i])
		}
		v[i] = x
	}
	return Grade{
		Name: row[0], Standard: row[1], Source: row[11],
		E: v[0] * stress, G: v[1] * stress, Density: v[2],
		Bands: []Band{{UpTo: v[3] * length, Yield: v[4] * stress, Ultimate: v[5] * stress}},
	}, nil
}

func (d *data) readVerdicts(text []byte) error {
	rows, err := readRows(text, 5)
	if err != nil {
		return err
	}
	levels := map[string]Level{"suitable": Suitable, "doubtful": Doubtful, "refused": Refused}
	for _, row := range rows {
		level, ok := levels[row[2]]
		if !ok {
			return fmt.Errorf("level %q; want suitable, doubtful or refused", row[2])
		}
		v := Verdict{Level: level, Reason: row[3], Remedy: row[4]}
		for f := range strings.FieldsSeq(row[0]) {
			d.families[f] = true
			for g := range strings.FieldsSeq(row[1]) {
				p := pair{f, strings.ReplaceAll(g, "_", " ")}
				if _, twice := d.verdicts[p]; twice {
					return fmt.Errorf("%s in %s stands in two rows", p.family, p.grade)
				}
				d.verdicts[p] = v
			}
		}
	}
	return nil
}
