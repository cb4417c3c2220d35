package main

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"strings"

	"spanwright/estimate/bridge"
	"spanwright/estimate/calibration"
	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/sheet"
	"spanwright/estimate/trace"
)

func traceCommand() command {
	c := command{name: "trace", args: "[flags] FIGURE ESTIMATE", short: "say where a figure of an estimate comes from, down to inputs, assumptions and clauses"}
	c.long = `
Reads an estimate document (JSON, as “price --format json” or the API gives it;
“-” is standard input) and prints the tree behind one of its figures: formula,
numbers, inputs, sources and authors. Without a figure it lists those that can
be asked.

  spanwright price --format json --out estimate.json testdata/brackwater.xlsx
  spanwright trace base estimate.json
  spanwright trace --depth 2 category/erection estimate.json`
	c.run = func(ctx context.Context, p *program, args []string) error { return p.trace(c, args) }
	return c
}

func (p *program) trace(c command, args []string) error {
	f := p.flags(c)
	depth := f.Int("depth", 0, "levels of the tree; 0 is all")
	format := f.String("format", "text", "text or json")
	rest, err := parse(f, args)
	if err != nil {
		return err
	}
	if len(rest) < 1 || len(rest) > 2 {
		f.Usage()
		return errUsage
	}
	if *depth < 0 {
		return fmt.Errorf("depth: found %d; accepted: 0 for the whole tree, or a number of levels", *depth)
	}
	d, err := p.readDocument(rest[len(rest)-1])
	if err != nil {
		return err
	}
	if len(rest) == 1 {
		for _, s := range trace.Figures(d) {
			fmt.Fprintf(p.stdout, "%-60s %s %s\n", s.Figure, s.Value, s.Unit)
		}
		return nil
	}
	n, err := trace.Build(d, rest[0], *depth)
	if err != nil {
		return err
	}
	return p.answer(*format, n, trace.Text(n))
}

func (p *program) readDocument(path string) (document.Document, error) {
	data, err := p.readInput(path)
	if err != nil {
		return document.Document{}, err
	}
	return document.Parse(data)
}

// answer prints an answer as text or as JSON.
func (p *program) answer(format string, v any, text string) error {
	switch format {
	case "text":
		_, err := fmt.Fprint(p.stdout, text)
		return err
	case "json":
		e := json.NewEncoder(p.stdout)
		e.SetEscapeHTML(false)
		e.SetIndent("", " ")
		return e.Encode(v)
	}
	return fmt.Errorf("format: found %q; accepted: text, json", format)
}

func compareCommand() command {
	c := command{name: "compare", args: "[flags] SCHEDULE SCHEDULE …", short: "set schemes side by side by their whole range, on common draws"}
	c.long = `
Prices two to sixteen schedules, simulates them on common draws and prints what
each weighs and costs, what is unsafe in it, and how probable it is that one is
cheaper than another.

  spanwright compare --rate-book unit-rate testdata/brackwater.xlsx testdata/brackwater-end-tower.xlsx`
	c.run = func(ctx context.Context, p *program, args []string) error { return p.compare(ctx, c, args) }
	return c
}

func (p *program) compare(ctx context.Context, c command, args []string) error {
	var o priceOptions
	f := p.flags(c)
	o.define(f)
	format := f.String("format", "text", "text or json")
	rest, err := parse(f, args)
	if err != nil {
		return err
	}
	if len(rest) < comparison.Fewest {
		f.Usage()
		return errUsage
	}
	var sides []comparison.Side
	for _, path := range rest {
		j, d, err := p.run(ctx, path, o)
		if err != nil {
			return fmt.Errorf("%s: %w", path, err)
		}
		sides = append(sides, comparison.Side{ID: path, Job: j, Document: d})
	}
	out, err := comparison.Build(ctx, sides, engine.Joint)
	if err != nil {
		return err
	}
	return p.answer(*format, out, comparison.Text(out))
}

// run prices one schedule.
func (p *program) run(ctx context.Context, path string, o priceOptions) (job.Job, document.Document, error) {
	j, err := p.freeze(ctx, path, o)
	if err != nil {
		return j, document.Document{}, err
	}
	d, err := engine.Run(ctx, j, nil)
	return j, d, p.explain(err)
}

func bridgeCommand() command {
	c := command{name: "bridge", args: "[flags] FROM TO", short: "explain the whole change between two estimates, cause by cause"}
	c.long = `
Prices two schedules, each under its own rate book and Job table where they
differ, and prints what each cause makes of the change of base and contingency;
the causes add up to the change, to the cent.

  spanwright bridge testdata/brackwater.xlsx testdata/brackwater-end-tower.xlsx
  spanwright bridge --to-rate-book newer.json testdata/brackwater.xlsx testdata/brackwater.xlsx`
	c.run = func(ctx context.Context, p *program, args []string) error { return p.bridge(ctx, c, args) }
	return c
}

func (p *program) bridge(ctx context.Context, c command, args []string) error {
	var o priceOptions
	f := p.flags(c)
	o.define(f)
	to := o
	f.StringVar(&to.rateBook, "to-rate-book", "", "rate book of the second estimate, where it is another")
	f.StringVar(&to.jobTable, "to-job", "", "Job table of the second schedule, where it has one of its own")
	format := f.String("format", "text", "text or json")
	rest, err := parse(f, args)
	if err != nil {
		return err
	}
	if len(rest) != 2 {
		f.Usage()
		return errUsage
	}
	second := o
	if to.rateBook != "" {
		second.rateBook = to.rateBook
	}
	if to.jobTable != "" {
		second.jobTable = to.jobTable
	}
	var a, b bridge.Side
	if a.Job, a.Document, err = p.run(ctx, rest[0], o); err != nil {
		return fmt.Errorf("%s: %w", rest[0], err)
	}
	if b.Job, b.Document, err = p.run(ctx, rest[1], second); err != nil {
		return fmt.Errorf("%s: %w", rest[1], err)
	}
	v := engine.NewValuer()
	out, err := bridge.Build(ctx, a, b, func(ctx context.Context, j job.Job) (bridge.Value, error) {
		x, err := v.Value(ctx, j)
		return bridge.Value(x), err
	})
	if err != nil {
		return err
	}
	return p.answer(*format, out, bridge.Text(out))
}

func calibrateCommand() command {
	c := command{name: "calibrate", args: "[flags] OUTTURNS", short: "learn from outturns of finished jobs: coverage of past ranges, and a proposal"}
	c.long = `
Reads outturns (CSV, XLSX or JSON), brings them to the base date and currency of
a basis, tests how past ranges held, fits each figure with shrinkage between
kinds of structure and tests the fit on each job from the others. Fewer than 20
comparable jobs are refused. Nothing is changed: a proposal becomes a version of
a rate book when a person accepts it, in the service.

  spanwright calibrate --basis estimate/calibration/testdata/basis.json estimate/calibration/testdata/outturns.csv`
	c.run = func(ctx context.Context, p *program, args []string) error { return p.calibrate(ctx, c, args) }
	return c
}

func (p *program) calibrate(ctx context.Context, c command, args []string) error {
	f := p.flags(c)
	basisFile := f.String("basis", "", "JSON `FILE` with currency, base date, exchange rates and indices (obligatory)")
	book := f.String("rate-book", ratebook.KindUnitRate, "rate book that the past estimates were priced with: ratio, unit-rate or a `FILE`")
	rest, err := parse(f, args)
	if err != nil {
		return err
	}
	if len(rest) != 1 || *basisFile == "" {
		f.Usage()
		return errUsage
	}
	b, err := readBook(*book)
	if err != nil {
		return err
	}
	outturns, err := p.readOutturns(ctx, rest[0], calibration.Options{Kinds: b.ConnectionClasses()})
	if err != nil {
		return err
	}
	var basis calibration.Basis
	if err := readJSON(*basisFile, &basis); err != nil {
		return err
	}
	comparables, left, err := calibration.Normalise(outturns, basis)
	if err != nil {
		return err
	}
	proposal, err := calibration.Fit(comparables, calibration.FitOptions{Systemic: b.Systemic, Left: left})
	if err != nil {
		return err
	}
	return p.answer("json", proposal, "")
}

func (p *program) readOutturns(ctx context.Context, path string, o calibration.Options) ([]calibration.Outturn, error) {
	data, err := p.readInput(path)
	if err != nil {
		return nil, err
	}
	if strings.HasSuffix(strings.ToLower(path), ".json") {
		out, err := calibration.ReadJSON(data, o)
		var faults calibration.Faults
		if errors.As(err, &faults) {
			for _, x := range faults {
				fmt.Fprintf(p.stderr, "%s: %s: found %s; accepted: %s\n", x.Pointer, x.Problem, x.Found, x.Remedy)
			}
			return nil, fmt.Errorf("%d faults in the outturns; nothing was fitted", len(faults))
		}
		return out, err
	}
	book, err := sheet.Open(data, path, "", sheet.DefaultLimits())
	if err != nil {
		return nil, err
	}
	out, err := calibration.Read(ctx, book, o)
	var faults sheet.Faults
	if errors.As(err, &faults) {
		for _, x := range faults {
			fmt.Fprintln(p.stderr, x.Error())
		}
		return nil, fmt.Errorf("%d faults in the outturns; nothing was fitted", len(faults))
	}
	return out, err
}

func readJSON(path string, into any) error {
	f, err := os.Open(path)
	if err != nil {
		return err
	}
	defer f.Close()
	d := json.NewDecoder(f)
	d.DisallowUnknownFields()
	if err := d.Decode(into); err != nil {
		return fmt.Errorf("%s: %w", path, err)
	}
	return nil
}
