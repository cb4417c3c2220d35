package main

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"slices"
	"strings"

	"spanwright/api/service"
	"spanwright/estimate/calculator"
)

// calculation is one calculator: JSON in, an answer out that can be written.
type calculation func(ctx context.Context, data []byte) (any, error)

var calculations = map[string]calculation{
	"beam": calculated(func(_ context.Context, r calculator.BeamRequest) (calculator.BeamAnswer, error) {
		return calculator.Beam(r)
	}),
	"section": calculated(func(_ context.Context, r calculator.SectionRequest) (calculator.SectionAnswer, error) {
		return calculator.Section(r)
	}),
	"resistance": calculated(func(_ context.Context, r calculator.ResistanceRequest) (calculator.ResistanceAnswer, error) {
		return calculator.Resistance(r)
	}),
	"sizing": calculated(func(_ context.Context, r calculator.SizingRequest) (calculator.SizingAnswer, error) {
		return calculator.Size(r)
	}),
	"arrangements": calculated(calculator.Arrangements),
	"cutting-plan": calculated(calculator.CuttingPlan),
	"range":        calculated(calculator.Range),
}

// calculated reads the request of a calculator as strictly as the API does.
func calculated[I, O any](f func(context.Context, I) (O, error)) calculation {
	return func(ctx context.Context, data []byte) (any, error) {
		var r I
		if err := calculator.Decode(data, &r); err != nil {
			return nil, err
		}
		return f(ctx, r)
	}
}

// calculators are the names of the calculators, in the order of their work.
var calculators = []string{"beam", "section", "resistance", "sizing", "arrangements", "cutting-plan", "range"}

func calculateCommand() command {
	c := command{name: "calculate", args: "beam|section|resistance|sizing|arrangements|cutting-plan|range [flags] [FILE]", short: "one calculation offline: JSON in, JSON or a drawing out"}
	c.long = `
Reads the request of a calculator as JSON, the same as POST /v1/calculators/…
takes, from FILE or standard input (“-”, or none), and prints the answer. Faults
are listed by JSON pointer, all at once, and nothing is printed. The beam
calculator can also draw: moment, shear and deflection.

  spanwright calculate section <<< '{"designation": "IPE 300"}'
  spanwright calculate beam --format svg --out boom.svg boom.json`
	c.run = func(ctx context.Context, p *program, args []string) error { return p.calculate(ctx, c, args) }
	return c
}

func (p *program) calculate(ctx context.Context, c command, args []string) error {
	f := p.flags(c)
	format := f.String("format", "json", "json, or svg (the diagrams of the beam calculator)")
	out := f.String("out", "-", "`FILE` to write to; - is standard output")
	rest, err := parse(f, args)
	if err != nil {
		return err
	}
	if len(rest) < 1 || len(rest) > 2 {
		f.Usage()
		return errUsage
	}
	run, ok := calculations[rest[0]]
	if !ok {
		return fmt.Errorf("calculator: found %q; accepted: %s", rest[0], strings.Join(calculators, ", "))
	}
	if !slices.Contains([]string{"json", "svg"}, *format) || *format == "svg" && rest[0] != "beam" {
		return fmt.Errorf("format: found %q for %s; accepted: json, and svg for beam", *format, rest[0])
	}
	data, err := p.readInput(append(rest, "-")[1])
	if err != nil {
		return err
	}
	answer, err := run(ctx, data)
	if err != nil {
		return p.explainCalculation(err)
	}
	text, err := written(answer, *format)
	if err != nil {
		return err
	}
	if *out == "-" {
		_, err = p.stdout.Write(text)
		return err
	}
	return os.WriteFile(*out, text, 0o644)
}

// written is the answer in the format asked for.
func written(answer any, format string) ([]byte, error) {
	if b, ok := answer.(calculator.BeamAnswer); ok && format == "svg" {
		return service.BeamDiagrams(b), nil
	}
	var text bytes.Buffer
	e := json.NewEncoder(&text)
	e.SetEscapeHTML(false)
	e.SetIndent("", "  ")
	if err := e.Encode(answer); err != nil {
		return nil, fmt.Errorf("writing the answer: %w", err)
	}
	return text.Bytes(), nil
}

// explainCalculation lists faults on standard error, one a line, and returns their
// count as the error.
func (p *program) explainCalculation(err error) error {
	var faults calculator.Faults
	if !errors.As(err, &faults) {
		return err
	}
	for _, f := range faults {
		fmt.Fprintf(p.stderr, "%s: %s: found %s; accepted: %s\n", f.Pointer, f.Problem, f.Found, f.Remedy)
	}
	if len(faults) == 1 {
		return errors.New("a fault in the request; nothing was computed")
	}
	return fmt.Errorf("%d faults in the request; nothing was computed", len(faults))
}
