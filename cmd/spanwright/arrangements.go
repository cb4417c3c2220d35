package main

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"path/filepath"

	"spanwright/estimate/calculator"
	"spanwright/estimate/comparison"
	"spanwright/estimate/document"
	"spanwright/estimate/engine"
	"spanwright/estimate/job"
	"spanwright/estimate/ratebook"
	"spanwright/estimate/sheet"
)

func arrangementsCommand() command {
	c := command{name: "arrangements", args: "[flags] STUDY", short: "price the ways to hold a length and compare them by their whole range"}
	c.long = `
Reads an arrangement study (JSON, as “calculate arrangements” takes it; “-” is
standard input), works out the ways to hold the length, prices each feasible one
with its towers, ballast and footings, and compares them on common draws. Those
that are not feasible are listed with their reason. --job names a JSON file of
settings by the keys of the Job sheet, such as {"Estimate class": 4}.

  spanwright arrangements boom.json
  spanwright arrangements --rate-book ours.json --job job.json --format json boom.json`
	c.run = func(ctx context.Context, p *program, args []string) error { return p.arrangements(ctx, c, args) }
	return c
}

func (p *program) arrangements(ctx context.Context, c command, args []string) error {
	f := p.flags(c)
	book := f.String("rate-book", ratebook.KindUnitRate, "rate book: the starting book unit-rate or ratio, or a `FILE` (JSON)")
	settings := f.String("job", "", "JSON `FILE` with settings by the keys of the Job sheet")
	kind := f.String("kind", "boom", "kind of the main member, such as boom or beam: lumps and connections go by it")
	format := f.String("format", "text", "text or json")
	sampling := comparison.ArrangementSampling()
	f.Uint64Var(&sampling.Seed, "seed", sampling.Seed, "seed of the simulation")
	f.IntVar(&sampling.Replicates, "replicates", sampling.Replicates, "replicates of the simulation, 32 or more")
	f.IntVar(&sampling.Trials, "trials", sampling.Trials, "trials of each replicate")
	rest, err := parse(f, args)
	if err != nil {
		return err
	}
	if len(rest) != 1 {
		f.Usage()
		return errUsage
	}
	study, err := p.arrangementStudy(ctx, rest[0], *settings)
	if err != nil {
		return err
	}
	if study.Book, err = readBook(*book); err != nil {
		return err
	}
	study.Kind, study.Sampling, study.Data, study.Build = *kind, sampling, engine.Data(), build()
	run := func(ctx context.Context, j job.Job) (document.Document, error) { return engine.Run(ctx, j, nil) }
	out, err := comparison.CompareArrangements(ctx, study, run, engine.Joint)
	if err != nil {
		return p.explain(err)
	}
	return p.answer(*format, out, comparison.ArrangementText(out))
}

// arrangementStudy reads a study with its settings and works out its ways.
func (p *program) arrangementStudy(ctx context.Context, path, settings string) (comparison.ArrangementStudy, error) {
	var out comparison.ArrangementStudy
	data, err := p.readInput(path)
	if err != nil {
		return out, err
	}
	sum := sha256.Sum256(data)
	out.Source = job.Source{Name: filepath.Base(path), SHA256: hex.EncodeToString(sum[:])}
	var r calculator.ArrangementsRequest
	if err := calculator.Decode(data, &r); err != nil {
		return out, p.explainCalculation(err)
	}
	out.OwnRules = r.OwnRules()
	if out.Study, out.Candidates, err = calculator.StudyArrangements(ctx, r); err != nil {
		return out, p.explainCalculation(err)
	}
	var keys map[string]any
	if settings != "" {
		text, err := os.ReadFile(settings)
		if err != nil {
			return out, err
		}
		if err := json.Unmarshal(text, &keys); err != nil {
			return out, fmt.Errorf("%s: found no JSON object of settings: %w", settings, err)
		}
	}
	out.Schedule, err = comparison.ReadArrangementJob(ctx, keys, r.DesignBasis, r.Grade, r.YieldFactor())
	return out, p.explainSettings(err)
}

// explainSettings lists faults of the settings, one a line.
func (p *program) explainSettings(err error) error {
	var decided *comparison.SettledError
	var keys sheet.Faults
	n := 0
	if errors.As(err, &decided) {
		for _, k := range decided.Keys {
			fmt.Fprintf(p.stderr, "%s: %s\n", k, decided.Remedy())
		}
		n += len(decided.Keys)
	}
	if errors.As(err, &keys) {
		for _, f := range keys {
			fmt.Fprintln(p.stderr, f.Error())
		}
		n += len(keys)
	}
	if n == 0 {
		return err
	}
	return fmt.Errorf("%d faults in the settings; nothing was priced", n)
}
