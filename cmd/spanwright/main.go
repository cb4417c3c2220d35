// Command spanwright prices fabricated steel structures from a sketch.
//
//	price  → offline: spreadsheet in, estimate out, no database
//	template → an empty schedule to be filled in
//	calculate → offline: one structural calculation, JSON in and out
//	serve  → the service on a PostgreSQL of yours
//	demo   → the service on a local PostgreSQL that it runs itself, with the
//	         invented Brackwater job loaded
//	migrate, token → administration of a database
//
// This package is the only place that wires the others.
package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"io"
	"log/slog"
	"os"
	"os/signal"
	"runtime/debug"
	"strings"
	"syscall"
)

// command is one subcommand. run gets a flag set that has its flags defined and
// parsed.
type command struct {
	name, args, short string
	long              string
	run               func(ctx context.Context, p *program, args []string) error
}

// program is what every subcommand is handed: the outside world.
type program struct {
	stdin          io.Reader
	stdout, stderr io.Writer
	getenv         func(string) string
}

// errUsage is returned after the usage has been printed.
var errUsage = errors.New("usage")

func commands() []command {
	return []command{priceCommand(), templateCommand(), traceCommand(), compareCommand(), arrangementsCommand(), bridgeCommand(), calibrateCommand(), calculateCommand(), demoCommand(), serveCommand(), migrateCommand(), tokenCommand()}
}

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	context.AfterFunc(ctx, stop) // a second Ctrl-C ends the program at once
	p := &program{stdin: os.Stdin, stdout: os.Stdout, stderr: os.Stderr, getenv: os.Getenv}
	os.Exit(p.main(ctx, os.Args[1:]))
}

// main runs a subcommand and returns the exit code: 0, 1 for a failure, 2 for a
// wrong call.
func (p *program) main(ctx context.Context, args []string) int {
	if len(args) == 0 || args[0] == "help" || args[0] == "-h" || args[0] == "--help" {
		p.usage()
		if len(args) == 0 {
			return 2
		}
		return 0
	}
	if args[0] == "version" || args[0] == "--version" {
		fmt.Fprintln(p.stdout, "spanwright", build())
		return 0
	}
	for _, c := range commands() {
		if c.name != args[0] {
			continue
		}
		err := c.run(ctx, p, args[1:])
		switch {
		case err == nil, errors.Is(err, flag.ErrHelp):
			return 0
		case errors.Is(err, errUsage):
			return 2
		}
		fmt.Fprintln(p.stderr, "spanwright "+c.name+": "+err.Error())
		return 1
	}
	fmt.Fprintf(p.stderr, "spanwright: there is no subcommand %q\n\n", args[0])
	p.usage()
	return 2
}

func (p *program) usage() {
	fmt.Fprint(p.stderr, "Spanwright prices fabricated steel structures before they are drawn: from a\nschedule of members to sizes, tonnes and a budget range.\n\nusage: spanwright SUBCOMMAND [flags]\n\n")
	for _, c := range commands() {
		fmt.Fprintf(p.stderr, "  %-9s %s\n", c.name, c.short)
	}
	fmt.Fprint(p.stderr, "\n“spanwright SUBCOMMAND -h” explains each one.\n")
}

// flags returns a flag set that prints the command's own help.
func (p *program) flags(c command) *flag.FlagSet {
	f := flag.NewFlagSet(c.name, flag.ContinueOnError)
	f.SetOutput(p.stderr)
	f.Usage = func() {
		fmt.Fprintf(p.stderr, "usage: spanwright %s %s\n\n%s\n", c.name, c.args, strings.TrimSpace(c.long))
		fmt.Fprint(p.stderr, "\nflags:\n")
		f.PrintDefaults()
	}
	return f
}

// parse parses flags that may stand before or after the arguments, and returns
// the arguments.
func parse(f *flag.FlagSet, args []string) ([]string, error) {
	var rest []string
	for {
		if err := f.Parse(args); err != nil {
			if errors.Is(err, flag.ErrHelp) {
				return nil, err
			}
			return nil, errUsage
		}
		if f.NArg() == 0 {
			return rest, nil
		}
		rest = append(rest, f.Arg(0))
		args = f.Args()[1:]
	}
}

// env returns the environment variable or the default.
func (p *program) env(name, fallback string) string {
	if v := p.getenv(name); v != "" {
		return v
	}
	return fallback
}

// orEnv returns the value, or where it is empty the environment variable. Flags
// that hold secrets are read so: a default would be printed by the help.
func (p *program) orEnv(value, name string) string {
	if value != "" {
		return value
	}
	return p.getenv(name)
}

// logger returns the structured log, on standard error.
func (p *program) logger(format, level string) (*slog.Logger, error) {
	var l slog.Level
	if err := l.UnmarshalText([]byte(level)); err != nil {
		return nil, fmt.Errorf("log level: found %q; accepted: debug, info, warn, error", level)
	}
	o := &slog.HandlerOptions{Level: l}
	switch format {
	case "text":
		return slog.New(slog.NewTextHandler(p.stderr, o)), nil
	case "json":
		return slog.New(slog.NewJSONHandler(p.stderr, o)), nil
	}
	return nil, fmt.Errorf("log format: found %q; accepted: text, json", format)
}

// build names the program's build: version control revision where known.
func build() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return "unknown"
	}
	for _, s := range info.Settings {
		if s.Key == "vcs.revision" {
			return s.Value
		}
	}
	return info.Main.Version
}
