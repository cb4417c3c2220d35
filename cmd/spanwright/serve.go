package main

import (
	"context"
	"errors"
	"fmt"
	"log/slog"
	"net"
	"net/http"
	"strconv"
	"time"

	"github.com/google/uuid"

	"spanwright/api"
	"spanwright/api/dashboard"
	"spanwright/api/service"
	"spanwright/api/store"
	"spanwright/estimate/engine"
	"spanwright/estimate/workbook"
)

// drain is how long requests in flight may take once the program is told to stop.
const drain = 20 * time.Second

func serveCommand() command {
	c := command{name: "serve", args: "[flags]", short: "serve the API and the pages on a PostgreSQL of yours"}
	c.long = `
Serves on a database that “spanwright migrate” has prepared. It connects as the
role spanwright_service and refuses to start as a superuser, an owner or any role
that row-level security does not bind.

  SPANWRIGHT_DATABASE_URL='postgres://spanwright_service:…@db/spanwright' spanwright serve`
	c.run = func(ctx context.Context, p *program, args []string) error {
		f := p.flags(c)
		url := f.String("database-url", "", "`URL` of the database, role spanwright_service ($SPANWRIGHT_DATABASE_URL)")
		listen := f.String("listen", p.env("SPANWRIGHT_LISTEN", "127.0.0.1:8080"), "`ADDRESS` to listen on ($SPANWRIGHT_LISTEN)")
		secure := f.String("secure-cookies", p.env("SPANWRIGHT_SECURE_COOKIES", "true"), "true or false: cookies for https only ($SPANWRIGHT_SECURE_COOKIES)")
		format := f.String("log-format", p.env("SPANWRIGHT_LOG_FORMAT", "json"), "text or json ($SPANWRIGHT_LOG_FORMAT)")
		level := f.String("log-level", p.env("SPANWRIGHT_LOG_LEVEL", "info"), "debug, info, warn or error ($SPANWRIGHT_LOG_LEVEL)")
		members := f.Int("max-members", 0, "rows of one schedule; 0 is the default of 20,000 ($SPANWRIGHT_MAX_MEMBERS)")
		megabytes := f.Int("max-megabytes", 0, "size of one posted file; 0 is the default of 20 ($SPANWRIGHT_MAX_MEGABYTES)")
		heavy := f.Int("max-heavy", 0, "estimates computed, and large files read or written, at the same time; 0 is the default of 2 ($SPANWRIGHT_MAX_HEAVY)")
		rest, err := parse(f, args)
		if err != nil {
			return err
		}
		*url = p.orEnv(*url, "SPANWRIGHT_DATABASE_URL")
		if len(rest) > 0 || *url == "" {
			f.Usage()
			return errUsage
		}
		log, err := p.logger(*format, *level)
		if err != nil {
			return err
		}
		https, err := strconv.ParseBool(*secure)
		if err != nil {
			return fmt.Errorf("secure cookies: found %q; accepted: true, false", *secure)
		}
		limits, err := p.limits(*members, *megabytes, *heavy)
		if err != nil {
			return err
		}
		st, err := store.Open(ctx, *url, store.Options{})
		if err != nil {
			return err
		}
		defer st.Close()
		return serve(ctx, serving{store: st, listen: *listen, secure: https, limits: limits, log: log})
	}
	return c
}

// serving is what the server needs; ready, where set, is called with the address
// once it listens.
type serving struct {
	store  service.Store
	listen string
	secure bool
	limits service.Limits
	log    *slog.Logger
	ready  func(address string, s *service.Service) error
}

// limits are the defaults with what flags or the environment change.
func (p *program) limits(members, megabytes, heavy int) (service.Limits, error) {
	l := service.DefaultLimits()
	for _, c := range []struct {
		name  string
		value *int
	}{{"SPANWRIGHT_MAX_MEMBERS", &members}, {"SPANWRIGHT_MAX_MEGABYTES", &megabytes}, {"SPANWRIGHT_MAX_HEAVY", &heavy}} {
		if text := p.getenv(c.name); *c.value == 0 && text != "" {
			n, err := strconv.Atoi(text)
			if err != nil {
				return l, fmt.Errorf("%s: found %q; accepted: a whole number", c.name, text)
			}
			*c.value = n
		}
		if *c.value < 0 || *c.value > 1_000_000 {
			return l, fmt.Errorf("%s: found %d; accepted: 1 to 1000000", c.name, *c.value)
		}
	}
	if members > 0 {
		l.Members, l.Sheet.Rows = members, members+100
	}
	if megabytes > 0 {
		l.Sheet.Bytes, l.Sheet.UnzippedBytes = int64(megabytes)<<20, 5*int64(megabytes)<<20
	}
	if heavy > 0 {
		l.Heavy = heavy
	}
	return l, nil
}

func newService(st service.Store, limits service.Limits, log *slog.Logger) *service.Service {
	return service.New(service.Config{
		Store: st, Run: engine.Run, Limits: limits, Build: build(), Now: now, NewID: uuid.NewV7, Logger: log,
	})
}

// exports are the forms of an estimate besides its JSON document.
var exports = api.Exports{Workbook: workbook.XLSX, CSV: workbook.CSV}

// serve listens until the context ends, then lets requests in flight finish.
func serve(ctx context.Context, c serving) error {
	s := newService(c.store, c.limits, c.log)
	pages, err := dashboard.New(dashboard.Config{Service: s, Logger: c.log, SecureCookies: c.secure})
	if err != nil {
		return err
	}
	handler, err := api.New(api.Config{Service: s, Logger: c.log, Limits: c.limits, Pages: pages, Version: build(), Exports: exports})
	if err != nil {
		return err
	}
	l, err := net.Listen("tcp", c.listen)
	if err != nil {
		return fmt.Errorf("listening: %w", err)
	}
	server := api.Server(c.listen, handler)
	failed := make(chan error, 1)
	go func() { failed <- server.Serve(l) }()
	c.log.Info("listening", "address", l.Addr().String())
	if c.ready != nil {
		if err := c.ready(l.Addr().String(), s); err != nil {
			return errors.Join(err, server.Close())
		}
	}
	select {
	case err := <-failed:
		return err
	case <-ctx.Done():
	}
	c.log.Info("stopping")
	late, cancel := context.WithTimeout(context.WithoutCancel(ctx), drain)
	defer cancel()
	if err := server.Shutdown(late); err != nil && !errors.Is(err, http.ErrServerClosed) {
		return errors.Join(fmt.Errorf("stopping: %w", err), server.Close())
	}
	return nil
}

// now is the clock of the service: UTC, to the microsecond that the database keeps.
func now() time.Time { return time.Now().UTC().Truncate(time.Microsecond) }
