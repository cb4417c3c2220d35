package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"
	"text/tabwriter"

	"spanwright/api/service"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/schedule"
	"spanwright/estimate/sheet"
	"spanwright/estimate/workbook"
)

// offlineMembers is how many rows a schedule may have offline.
const offlineMembers = 100_000

func priceCommand() command {
	c := command{name: "price", args: "[flags] SCHEDULE", short: "price a schedule offline: CSV or XLSX in, estimate out, no database"}
	c.long = `
Reads a schedule (CSV or XLSX; “-” is standard input), sizes its members, counts
tonnes, prices them with a rate book and prints the estimate. Faults of the
schedule are listed by cell, all at once, and nothing is printed.

  spanwright price testdata/brackwater.xlsx
  spanwright price --job testdata/brackwater-job.csv testdata/brackwater.csv
  spanwright price --rate-book unit-rate testdata/brackwater.xlsx
  spanwright price --format json --out estimate.json testdata/brackwater.xlsx
  spanwright price --format xlsx --out priced.xlsx testdata/brackwater.xlsx`
	c.run = func(ctx context.Context, p *program, args []string) error { return p.price(ctx, c, args) }
	return c
}

type priceOptions struct {
	rateBook, jobTable, definition, risks, project, scheme, format, out string
	check                                                               bool
	seed                                                                uint64
	replicates, trials                                                  int
}

func (p *program) price(ctx context.Context, c command, args []string) error {
	var o priceOptions
	f := p.flags(c)
	o.define(f)
	f.StringVar(&o.format, "format", "table", "table, json (the estimate document), xlsx (the priced workbook) or csv (its lines)")
	f.StringVar(&o.out, "out", "-", "`FILE` to write to; - is standard output")
	f.BoolVar(&o.check, "check", false, "only read the schedule: print the load of each member, tonnes of each group, defaults taken and possible omissions")
	rest, err := parse(f, args)
	if err != nil {
		return err
	}
	if len(rest) != 1 {
		f.Usage()
		return errUsage
	}
	if o.check {
		return p.checkSchedule(ctx, rest[0], o)
	}
	render, err := renderer(o.format)
	if err != nil {
		return err
	}
	d, err := p.estimate(ctx, rest[0], o)
	if err != nil {
		return err
	}
	data, err := render(d)
	if err != nil {
		return err
	}
	if o.out == "-" {
		_, err = p.stdout.Write(data)
		return err
	}
	return os.WriteFile(o.out, data, 0o644)
}

// define adds the flags of what decides an estimate.
func (o *priceOptions) define(f *flag.FlagSet) {
	f.StringVar(&o.rateBook, "rate-book", ratebook.KindRatio, "rate book: the starting book ratio or unit-rate, or a `FILE` (JSON)")
	f.StringVar(&o.jobTable, "job", "", "CSV `FILE` with the keys and values of a Job sheet, for a schedule that has none")
	f.StringVar(&o.definition, "definition", "", "CSV `FILE` with what is defined so far, item by item")
	f.StringVar(&o.risks, "risks", "", "CSV `FILE` with discrete risks")
	f.StringVar(&o.project, "project", "", "project `NAME`; overrides the Job sheet")
	f.StringVar(&o.scheme, "scheme", "", "scheme `NAME`; overrides the Job sheet")
	f.Uint64Var(&o.seed, "seed", 1, "seed of the simulation")
	f.IntVar(&o.replicates, "replicates", 32, "replicates of the simulation, 32 or more")
	f.IntVar(&o.trials, "trials", 4096, "trials of each replicate")
}

func renderer(format string) (func(document.Document) ([]byte, error), error) {
	switch format {
	case "table":
		return func(d document.Document) ([]byte, error) { return []byte(workbook.Table(d)), nil }, nil
	case "json":
		return func(d document.Document) ([]byte, error) {
			data, _, err := d.Canonical()
			return data, err
		}, nil
	case "xlsx":
		return workbook.XLSX, nil
	case "csv":
		return workbook.CSV, nil
	}
	return nil, fmt.Errorf("format: found %q; accepted: table, json, xlsx, csv", format)
}

// readBook reads the rate book of a file, or takes a starting one.
func readBook(file string) (ratebook.Book, error) {
	switch file {
	case ratebook.KindRatio, "":
		return ratebook.Ratio(), nil
	case ratebook.KindUnitRate:
		return ratebook.UnitRate(), nil
	}
	raw, err := os.ReadFile(file)
	if err != nil {
		return ratebook.Book{}, err
	}
	return ratebook.Parse(raw)
}

// read reads a schedule and the hash of its bytes.
func (p *program) read(ctx context.Context, path string, book ratebook.Book, o priceOptions) (schedule.Schedule, job.Source, error) {
	data, err := p.readInput(path)
	if err != nil {
		return schedule.Schedule{}, job.Source{}, err
	}
	options := schedule.Options{MaxMembers: offlineMembers, Project: o.project, Scheme: o.scheme, ConnectionClasses: book.ConnectionClasses()}
	for _, t := range []struct {
		file string
		into *[]byte
	}{{o.jobTable, &options.JobTable}, {o.definition, &options.DefinitionTable}, {o.risks, &options.RiskTable}} {
		if t.file == "" {
			continue
		}
		if *t.into, err = os.ReadFile(t.file); err != nil {
			return schedule.Schedule{}, job.Source{}, err
		}
	}
	posted := service.Posting{Name: path, Data: data, JobTable: options.JobTable}
	sch, err := readSchedule(ctx, data, posted.SourceName(), options)
	return sch, job.Source{Name: posted.SourceName(), SHA256: posted.SHA256()}, p.explain(err)
}

// estimate takes a file through the same stages as the service does.
func (p *program) estimate(ctx context.Context, path string, o priceOptions) (document.Document, error) {
	j, err := p.freeze(ctx, path, o)
	if err != nil {
		return document.Document{}, err
	}
	d, err := engine.Run(ctx, j, nil)
	return d, p.explain(err)
}

// freeze reads a schedule and joins it with the rate book and the sampling.
func (p *program) freeze(ctx context.Context, path string, o priceOptions) (job.Job, error) {
	book, err := readBook(o.rateBook)
	if err != nil {
		return job.Job{}, err
	}
	sch, source, err := p.read(ctx, path, book, o)
	if err != nil {
		return job.Job{}, err
	}
	j, err := job.Freeze(sch, source, book, nil, job.Sampling{Seed: o.seed, Replicates: o.replicates, Trials: o.trials})
	if err != nil {
		return job.Job{}, err
	}
	j.EngineVersion, j.Data, j.Build = document.EngineVersion, engine.Data(), build()
	return j, nil
}

// checkSchedule prints what was read, in tables for a terminal.
func (p *program) checkSchedule(ctx context.Context, path string, o priceOptions) error {
	book, err := readBook(o.rateBook)
	if err != nil {
		return err
	}
	sch, _, err := p.read(ctx, path, book, o)
	if err != nil {
		return err
	}
	w := tabwriter.NewWriter(p.stdout, 0, 0, 2, ' ', tabwriter.AlignRight)
	fmt.Fprintln(w, "mark\tpermanent, kN\tvariable, kN\taxial, kN\t")
	for _, m := range sch.Echo.Members {
		fmt.Fprintf(w, "%s\t%.4g\t%.4g\t%.4g\t\n", m.Mark, m.Permanent, m.Variable, m.Axial)
	}
	fmt.Fprintln(w, "\ngroup\tpieces\tt, known before sizing\t")
	for _, g := range sch.Echo.Groups {
		fmt.Fprintf(w, "%s\t%d\t%.3f\t\n", g.Group, g.Pieces, g.Tonnes)
	}
	if err := w.Flush(); err != nil {
		return err
	}
	fmt.Fprintln(p.stdout, "\nLoads are those of one piece, without its own weight. Defaults taken:")
	for _, d := range sch.Defaults {
		fmt.Fprintf(p.stdout, "  %s: %s %s\n", d.Statement, d.Value, d.Unit)
	}
	for _, line := range sch.Omissions {
		fmt.Fprintln(p.stdout, line)
	}
	return nil
}

func readSchedule(ctx context.Context, data []byte, name string, o schedule.Options) (schedule.Schedule, error) {
	if strings.EqualFold(filepath.Ext(name), ".json") {
		return schedule.ReadJSON(ctx, data, o)
	}
	limits := sheet.DefaultLimits()
	limits.Bytes, limits.UnzippedBytes = 200<<20, 1<<30
	limits.Rows, limits.Cells, limits.SharedStrings = offlineMembers+100, 5_000_000, 1_000_000
	book, err := sheet.Open(data, name, "", limits)
	if err != nil {
		return schedule.Schedule{}, err
	}
	return schedule.Read(ctx, book, o)
}

// explain lists faults on standard error, one a line, and returns their count as
// the error.
func (p *program) explain(err error) error {
	var faults sheet.Faults
	var members *engine.FaultsError
	switch {
	case errors.As(err, &faults):
		for _, f := range faults {
			fmt.Fprintln(p.stderr, f.Error())
		}
		return fmt.Errorf("%s in the schedule; nothing was priced", counted(len(faults), "fault"))
	case errors.As(err, &members):
		for _, f := range members.Faults {
			fmt.Fprintf(p.stderr, "member %s: %s; %s\n", f.Mark, f.Problem, f.Remedy)
		}
		return fmt.Errorf("%s cannot be estimated; nothing was priced", counted(len(members.Faults), "member"))
	}
	return err
}

// counted puts a number before a word, in the plural where it is not one.
func counted(n int, word string) string {
	if n == 1 {
		return "1 " + word
	}
	return fmt.Sprintf("%d %ss", n, word)
}

func (p *program) readInput(path string) ([]byte, error) {
	if path == "-" {
		return io.ReadAll(p.stdin)
	}
	return os.ReadFile(path)
}
